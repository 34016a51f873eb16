"""
The header `capi/include/folkmote.h`, transcribed: same names, same order, same arguments, nothing
added. Its documentation is the header's. `tests/julia/test_raw.jl` reads the header and compares
every name, argument and number with this file.
"""
module Raw

import ..refuse

# Opaque handles: one type each, so that one cannot pass for another.
for name in (:table, :study, :beliefs, :payoff, :options, :equilibrium, :scenario)
    @eval mutable struct $(Symbol(:folkmote_, name)) end
end

"One exported function: where it is, what it returns, what it takes."
struct Entry
    address::Base.RefValue{Ptr{Cvoid}}
    returns::Any
    takes::Vector{Any}
end

const FUNCTIONS = Dict{Symbol,Entry}()

"Why no library is attached; empty when one is."
const PROBLEM = Ref("the folkmote library is not loaded")

resolved(address) = address[] == C_NULL ? refuse(PROBLEM[]) : address[]

"`@exported name(argument::Type, …)::Type` makes a function of that name that calls the library's."
macro exported(signature)
    call, returns = signature.args
    name, arguments = call.args[1], call.args[2:end]
    names = [argument.args[1] for argument in arguments]
    types = [argument.args[2] for argument in arguments]
    address = Symbol(name, "_address")
    return esc(quote
        const $address = Ref{Ptr{Cvoid}}(C_NULL)
        FUNCTIONS[$(QuoteNode(name))] = Entry($address, $returns, Any[$(types...)])
        $name($(names...)) = ccall(resolved($address), $returns, ($(types...),), $(names...))
    end)
end

const Status = Cint
const Message = Ptr{UInt8}

# ---- Version
const FOLKMOTE_VERSION = "0.1.0"
const FOLKMOTE_STREAM_VERSION = 1
const FOLKMOTE_MESSAGE_BYTES = 1024

@exported folkmote_version()::Cstring
@exported folkmote_stream_version()::Cint
@exported folkmote_message_bytes()::Csize_t
@exported folkmote_live_handles()::Int64

# ---- Status
const FOLKMOTE_OK = 0
const FOLKMOTE_BAD_ARGUMENT = 1
const FOLKMOTE_BAD_DATA = 2
const FOLKMOTE_OUT_OF_MEMORY = 3
const FOLKMOTE_CANCELLED = 4
const FOLKMOTE_BAD_FILE = 5
const FOLKMOTE_INTERNAL = 9

@exported folkmote_status_name(status::Cint)::Cstring
@exported folkmote_status_text(status::Cint)::Cstring

# ---- Tables
const FOLKMOTE_TEXT = 1
const FOLKMOTE_INTEGER = 2
const FOLKMOTE_REAL = 3

@exported folkmote_table_create(rows::Int64, table::Ptr{Ptr{folkmote_table}}, message::Message)::Status
@exported folkmote_table_destroy(table::Ptr{folkmote_table})::Cvoid
@exported folkmote_table_add_text(table::Ptr{folkmote_table}, name::Cstring, values::Ptr{Ptr{UInt8}},
                                  message::Message)::Status
@exported folkmote_table_add_integer(table::Ptr{folkmote_table}, name::Cstring, values::Ptr{Int64},
                                     message::Message)::Status
@exported folkmote_table_add_real(table::Ptr{folkmote_table}, name::Cstring, values::Ptr{Float64},
                                  message::Message)::Status
@exported folkmote_table_rows(table::Ptr{folkmote_table})::Int64
@exported folkmote_table_columns(table::Ptr{folkmote_table})::Int64
@exported folkmote_table_column_name(table::Ptr{folkmote_table}, column::Int64)::Cstring
@exported folkmote_table_column_type(table::Ptr{folkmote_table}, column::Int64)::Cint
@exported folkmote_table_get_text(table::Ptr{folkmote_table}, column::Int64, values::Ptr{Ptr{UInt8}},
                                  message::Message)::Status
@exported folkmote_table_get_integer(table::Ptr{folkmote_table}, column::Int64, values::Ptr{Int64},
                                     message::Message)::Status
@exported folkmote_table_get_real(table::Ptr{folkmote_table}, column::Int64, values::Ptr{Float64},
                                  message::Message)::Status
@exported folkmote_table_digest(table::Ptr{folkmote_table})::UInt64

# ---- Study
@exported folkmote_study_create(members::Ptr{folkmote_table}, links::Ptr{folkmote_table},
                                broadcasts::Ptr{folkmote_table}, gatherings::Ptr{folkmote_table},
                                communities::Ptr{folkmote_table}, mutual::Cint,
                                study::Ptr{Ptr{folkmote_study}}, message::Message)::Status
@exported folkmote_study_destroy(study::Ptr{folkmote_study})::Cvoid
@exported folkmote_study_summary(study::Ptr{folkmote_study}, table::Ptr{Ptr{folkmote_table}},
                                 message::Message)::Status

@exported folkmote_study_digest(study::Ptr{folkmote_study})::UInt64

# ---- Parameters of beliefs and payoff
const FOLKMOTE_PRIOR_MEAN = 1
const FOLKMOTE_PRIOR_PRECISION = 2
const FOLKMOTE_SIGNAL_PRECISION = 3
const FOLKMOTE_RELAY_PRECISION = 4
const FOLKMOTE_STAKE_SD = 5
const FOLKMOTE_BENEFIT = 16
const FOLKMOTE_COST = 17
const FOLKMOTE_REACH = 18
const FOLKMOTE_SHARE_PAYOFF = 1

@exported folkmote_parameter_bounds(parameter::Cint, low::Ptr{Float64}, high::Ptr{Float64},
                                    low_open::Ptr{Cint}, high_open::Ptr{Cint}, message::Message)::Status
@exported folkmote_beliefs_create(beliefs::Ptr{Ptr{folkmote_beliefs}}, message::Message)::Status
@exported folkmote_beliefs_destroy(beliefs::Ptr{folkmote_beliefs})::Cvoid
@exported folkmote_beliefs_set(beliefs::Ptr{folkmote_beliefs}, parameter::Cint, count::Int64,
                               values::Ptr{Float64}, message::Message)::Status
@exported folkmote_payoff_create(kind::Cint, payoff::Ptr{Ptr{folkmote_payoff}}, message::Message)::Status
@exported folkmote_payoff_destroy(payoff::Ptr{folkmote_payoff})::Cvoid
@exported folkmote_payoff_set(payoff::Ptr{folkmote_payoff}, parameter::Cint, count::Int64,
                              values::Ptr{Float64}, message::Message)::Status

# ---- Options of a run
const FOLKMOTE_TOLERANCE = 32
const FOLKMOTE_SWEEPS = 33
const FOLKMOTE_THREADS = 34
const FOLKMOTE_COMMON_DRAWS = 40
const FOLKMOTE_OVER_STAKES = 41
const FOLKMOTE_CONTROL = 42

@exported folkmote_options_create(options::Ptr{Ptr{folkmote_options}}, message::Message)::Status
@exported folkmote_options_destroy(options::Ptr{folkmote_options})::Cvoid
@exported folkmote_options_set(options::Ptr{folkmote_options}, option::Cint, value::Float64,
                               message::Message)::Status
@exported folkmote_options_progress(options::Ptr{folkmote_options}, callback::Ptr{Cvoid},
                                    user::Ptr{Cvoid}, message::Message)::Status

# ---- Equilibrium
const FOLKMOTE_BY_COMMUNITY = 1
const FOLKMOTE_BY_MEMBER = 2

@exported folkmote_equilibrium_create(study::Ptr{folkmote_study}, beliefs::Ptr{folkmote_beliefs},
                                      payoff::Ptr{folkmote_payoff}, options::Ptr{folkmote_options},
                                      equilibrium::Ptr{Ptr{folkmote_equilibrium}}, message::Message)::Status
@exported folkmote_equilibrium_destroy(equilibrium::Ptr{folkmote_equilibrium})::Cvoid
@exported folkmote_equilibrium_table(equilibrium::Ptr{folkmote_equilibrium}, level::Cint,
                                     table::Ptr{Ptr{folkmote_table}}, message::Message)::Status
@exported folkmote_equilibrium_digest(equilibrium::Ptr{folkmote_equilibrium})::UInt64
@exported folkmote_turnout(equilibrium::Ptr{folkmote_equilibrium}, given_count::Int64,
                           given::Ptr{Float64}, at_least_count::Int64, at_least::Ptr{Float64},
                           options::Ptr{folkmote_options}, table::Ptr{Ptr{folkmote_table}},
                           message::Message)::Status
@exported folkmote_simulate(equilibrium::Ptr{folkmote_equilibrium}, first_draw::Int64, draws::Int64,
                            seed::UInt64, given::Ptr{Float64}, level::Cint,
                            options::Ptr{folkmote_options}, table::Ptr{Ptr{folkmote_table}},
                            message::Message)::Status

@exported folkmote_simulate_within(equilibrium::Ptr{folkmote_equilibrium}, first_draw::Int64, draws::Int64,
                                   seed::UInt64, low::Float64, high::Float64, level::Cint,
                                   options::Ptr{folkmote_options}, table::Ptr{Ptr{folkmote_table}},
                                   message::Message)::Status

# ---- Sensitivity
const FOLKMOTE_BROADCAST_PRECISION = 24

@exported folkmote_sensitivity(equilibrium::Ptr{folkmote_equilibrium}, parameter_count::Int64,
                               parameters::Ptr{Cint}, level::Cint, options::Ptr{folkmote_options},
                               table::Ptr{Ptr{folkmote_table}}, message::Message)::Status
@exported folkmote_link_sensitivity(equilibrium::Ptr{folkmote_equilibrium}, options::Ptr{folkmote_options},
                                    table::Ptr{Ptr{folkmote_table}}, message::Message)::Status

# ---- Scenarios and counterfactuals
@exported folkmote_scenario_create(study::Ptr{folkmote_study}, scenario::Ptr{Ptr{folkmote_scenario}},
                                   message::Message)::Status
@exported folkmote_scenario_destroy(scenario::Ptr{folkmote_scenario})::Cvoid
@exported folkmote_scenario_add_links(scenario::Ptr{folkmote_scenario}, links::Ptr{folkmote_table},
                                      mutual::Cint, message::Message)::Status
@exported folkmote_scenario_cut_links(scenario::Ptr{folkmote_scenario}, links::Ptr{folkmote_table},
                                      mutual::Cint, message::Message)::Status
@exported folkmote_scenario_thin_links(scenario::Ptr{folkmote_scenario}, share::Float64, seed::UInt64,
                                       message::Message)::Status
@exported folkmote_scenario_rewire_links(scenario::Ptr{folkmote_scenario}, share::Float64, seed::UInt64,
                                       message::Message)::Status
@exported folkmote_scenario_broadcast(scenario::Ptr{folkmote_scenario}, audience::Ptr{folkmote_table},
                                      precision::Float64, message::Message)::Status
@exported folkmote_scenario_gathering(scenario::Ptr{folkmote_scenario}, audience::Ptr{folkmote_table},
                                      message::Message)::Status
@exported folkmote_scenario_shift_cost(scenario::Ptr{folkmote_scenario}, audience::Ptr{folkmote_table},
                                       by::Float64, message::Message)::Status
@exported folkmote_scenario_shift_benefit(scenario::Ptr{folkmote_scenario}, audience::Ptr{folkmote_table},
                                       by::Float64, message::Message)::Status
@exported folkmote_scenario_set_beliefs(scenario::Ptr{folkmote_scenario}, parameter::Cint, count::Int64,
                                        values::Ptr{Float64}, message::Message)::Status
@exported folkmote_scenario_forward_reports(scenario::Ptr{folkmote_scenario}, hops::Cint,
                                            message::Message)::Status
@exported folkmote_scenario_study(scenario::Ptr{folkmote_scenario}, study::Ptr{Ptr{folkmote_study}},
                                  message::Message)::Status
@exported folkmote_scenario_digest(scenario::Ptr{folkmote_scenario})::UInt64
@exported folkmote_counterfactual(equilibrium::Ptr{folkmote_equilibrium}, scenario::Ptr{folkmote_scenario},
                                  draws::Int64, seed::UInt64, options::Ptr{folkmote_options},
                                  table::Ptr{Ptr{folkmote_table}}, message::Message)::Status

@exported folkmote_counterfactual_within(equilibrium::Ptr{folkmote_equilibrium},
                                         scenario::Ptr{folkmote_scenario}, draws::Int64, seed::UInt64,
                                         low::Float64, high::Float64, options::Ptr{folkmote_options},
                                         table::Ptr{Ptr{folkmote_table}}, message::Message)::Status
@exported folkmote_counterfactual_plays(equilibrium::Ptr{folkmote_equilibrium},
                                        scenario::Ptr{folkmote_scenario}, first_draw::Int64, draws::Int64,
                                        seed::UInt64, low::Float64, high::Float64,
                                        options::Ptr{folkmote_options}, table::Ptr{Ptr{folkmote_table}},
                                        message::Message)::Status

# ---- Chunks
@exported folkmote_chunk_run(equilibrium::Ptr{folkmote_equilibrium}, scenario::Ptr{folkmote_scenario},
                             first_draw::Int64, draws::Int64, seed::UInt64, low::Float64, high::Float64,
                             level::Cint, options::Ptr{folkmote_options}, path::Cstring, computed::Ptr{Cint},
                             message::Message)::Status
@exported folkmote_chunk_merge(count::Int64, paths::Ptr{Ptr{UInt8}}, first_draw::Int64, draws::Int64,
                               table::Ptr{Ptr{folkmote_table}}, message::Message)::Status
@exported folkmote_chunk_table(count::Int64, paths::Ptr{Ptr{UInt8}}, table::Ptr{Ptr{folkmote_table}},
                               message::Message)::Status

end
