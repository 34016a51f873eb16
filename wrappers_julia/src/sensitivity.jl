struct Sensitivity <: Result
    table::NamedTuple
    cells::Dict{Any,Cell}
    record::Provenance
end

const DERIVATIVES = (prior_mean = Raw.FOLKMOTE_PRIOR_MEAN, prior_precision = Raw.FOLKMOTE_PRIOR_PRECISION,
                     signal_precision = Raw.FOLKMOTE_SIGNAL_PRECISION, relay_precision = Raw.FOLKMOTE_RELAY_PRECISION,
                     stake_sd = Raw.FOLKMOTE_STAKE_SD, benefit = Raw.FOLKMOTE_BENEFIT, cost = Raw.FOLKMOTE_COST,
                     broadcast_precision = Raw.FOLKMOTE_BROADCAST_PRECISION)

"""
    sensitivity(eq; with_respect_to = nothing, level = :community)

Derivatives of an equilibrium at both ends, by the implicit function theorem (the adjoint method; Cacuci 1981). They say what a
small change does; for a large one ask [`counterfactual`](@ref). `with_respect_to`: `nothing` for all parameters, one or several of
`:prior_mean`, `:prior_precision`, `:signal_precision`, `:relay_precision`, `:stake_sd`, `:benefit`, `:cost` and
`:broadcast_precision`, or `:links` alone. All values of a parameter in a community move by the same small amount, also those that
come from a column; exact relays stay exact; who is in whose reach stays as it is.

Columns: `community`, `parameter` (a symbol), `broadcast` (its number in the community, from 1; `missing` for other
parameters), `turnout_least`, `turnout_greatest` (derivatives of expected turnout, per unit of the parameter), `status_least`,
`status_greatest`. A status is `:solved`, or says why there is only `NaN`: `Symbol("near a tangency")` (two equilibria meet there),
`Symbol("a gain jumps")`, `Symbol("not converged")`, `Symbol("too many pairs")` (above 2,000 members, of whom more than 50 million
ordered pairs share information; an audience of 7,000 is about as many).

`level = :member`: `community`, `member`, `parameter`, `broadcast`, `cutoff_least`, `cutoff_greatest`, `chance_least`,
`chance_greatest` (of the member's cutoff and chance when the whole community's values move), `turnout_own_least`,
`turnout_own_greatest` (of the community's turnout when this member's own value alone moves) and the status.

`with_respect_to = :links`: `community`, `listener`, `speaker`, `precision` (of the report now; 0: not heard), `turnout_least`,
`turnout_greatest` and the status, for every ordered pair: the derivative in the precision with which the listener hears the
speaker's signal. At most 2,000 members in a community and 5,000,000 pairs in all.

Rows by member and by link describe people: keep them private. They are never a list of whom to press, reward or punish.

# Example
```julia
sensitivity(eq; with_respect_to = :cost).turnout_least
```
"""
function sensitivity(eq::Equilibrium; with_respect_to = nothing, level = :community)
    began = time()
    links = with_respect_to === :links
    links && level !== :community &&
        refuse("level = $(repr(level)) cannot be used with with_respect_to = :links: its rows are pairs of members.")
    parameters, level_number = links ? Cint[] : derivative_numbers(with_respect_to), LEVELS[checked_level(level)]
    table = Handle{Raw.folkmote_table}()
    watched("sensitivity"; threads = default_threads()) do options, message
        links ? Raw.folkmote_link_sensitivity(handle_of(eq), options, table, message) :
        Raw.folkmote_sensitivity(handle_of(eq), length(parameters), parameters, level_number, options, table, message)
    end
    found, digest = taken(table, ids_of(study_of(eq)))
    record = Provenance("sensitivity", began; inputs = ["equilibrium" => equilibrium_digest(handle_of(eq))],
                        result = digest, settings = settings_text(with_respect_to = with_respect_to, level = level))
    return Sensitivity(found, cells_of(eq), record)
end

derivative_numbers(::Nothing) = Cint[values(DERIVATIVES)...]
derivative_numbers(name::Symbol) = derivative_numbers([name])
derivative_numbers(names) = bad_derivatives(names)

function derivative_numbers(names::Union{AbstractVector{Symbol},Tuple{Vararg{Symbol}}})
    isempty(names) || !allunique(names) || !all(in(keys(DERIVATIVES)), names) ? bad_derivatives(names) :
    Cint[DERIVATIVES[name] for name in names]
end

bad_derivatives(names) =
    refuse("with_respect_to = $(repr(names)) cannot be used: it is nothing (all), different names out of " *
           "$(join(repr.(keys(DERIVATIVES)), ", ")), or :links alone.")
