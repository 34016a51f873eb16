# Parameters of beliefs and payoff are plain numbers; the kernel checks them when they are made and
# once more, with the study at hand, when they are used.

const BELIEFS = (prior_mean = Raw.FOLKMOTE_PRIOR_MEAN, prior_precision = Raw.FOLKMOTE_PRIOR_PRECISION,
                 signal_precision = Raw.FOLKMOTE_SIGNAL_PRECISION,
                 relay_precision = Raw.FOLKMOTE_RELAY_PRECISION, stake_sd = Raw.FOLKMOTE_STAKE_SD)
const PAYOFF = (benefit = Raw.FOLKMOTE_BENEFIT, cost = Raw.FOLKMOTE_COST, reach = Raw.FOLKMOTE_REACH)

numbers(value::Real, name) = [Float64(value)]
numbers(values::AbstractVector{<:Real}, name) = Vector{Float64}(values)
numbers(value, name) = refuse("$name must be a number, or a vector with one number per community or per " *
                              "member, none missing; it is of type $(typeof(value)).")

"The given parameters, by name; what is nothing is left to the study's columns."
given_numbers(values::NamedTuple) =
    Dict{Symbol,Vector{Float64}}(name => numbers(value, name) for (name, value) in pairs(values)
                                 if value !== nothing)

abstract type Parameters end

struct Beliefs <: Parameters
    values::Dict{Symbol,Vector{Float64}}
end

struct SharePayoff <: Parameters
    values::Dict{Symbol,Vector{Float64}}
end

"The kernel's object for these parameters."
function kernel_object(beliefs::Beliefs)
    made = create(Raw.folkmote_beliefs_create, Raw.folkmote_beliefs)
    for (name, number) in pairs(BELIEFS)
        haskey(beliefs.values, name) || continue
        values = beliefs.values[name]
        check(message -> Raw.folkmote_beliefs_set(made, number, length(values), values, message))
    end
    return made
end

function kernel_object(payoff::SharePayoff)
    made = create((handle, message) -> Raw.folkmote_payoff_create(Raw.FOLKMOTE_SHARE_PAYOFF, handle, message),
                  Raw.folkmote_payoff)
    for (name, number) in pairs(PAYOFF)
        values = payoff.values[name]
        check(message -> Raw.folkmote_payoff_set(made, number, length(values), values, message))
    end
    return made
end

"The parameters, once the kernel has accepted them."
function accepted(parameters::Parameters)
    close(kernel_object(parameters))
    return parameters
end

"""
    beliefs(; prior_mean, prior_precision, signal_precision = nothing, relay_precision = Inf, stake_sd = 0)

What members know before and beside what they hear. Each value is one number, or a vector with one number
per community (in the order in which `members` first names them) or per member (in the order of `members`).

- `prior_mean` (μ, finite) and `prior_precision` (α > 0; one or per community): the obstacle θ ~ N(μ, 1/α), in units
  of the benefit. Larger is worse. A precision is one over a variance.
- `signal_precision` (β >= 0): precision of a member's own signal of θ; 0 means no signal. `nothing`: `members` has the column.
- `relay_precision` (γ > 0): precision with which a listener hears a speaker's signal; `Inf` is exact.
- `stake_sd` (σ >= 0): standard deviation of a member's private stake.

A member or link column of the same name overrides the value here. Out of range: [`FolkmoteError`](@ref)
`:FOLKMOTE_BAD_ARGUMENT`. Beliefs in this normal form follow Morris & Shin (2003, "Global games: theory and
applications"); what is heard is pooled by normal updating.

# Example
```julia
beliefs(prior_mean = 0.4, prior_precision = 1, signal_precision = 4, stake_sd = 0.2)
```
"""
beliefs(; prior_mean, prior_precision, signal_precision = nothing, relay_precision = Inf, stake_sd = 0) =
    accepted(Beliefs(given_numbers((prior_mean = prior_mean, prior_precision = prior_precision,
                                    signal_precision = signal_precision, relay_precision = relay_precision,
                                    stake_sd = stake_sd))))

"""
    share_payoff(; benefit = 1, cost = 0, reach = :community)

Acting pays `benefit` × (share of the reach that acts) − `cost` − (θ + stake); staying out pays 0.
`benefit` (>= 0) and `cost` (finite) are one number, or a vector with one per community or member; columns of
`members` override them. `reach` is `:community` (everyone else), `:contacts` (the members one hears), or a
number from 0 (community) to 1 (contacts) that mixes the two. Shares are weighted by `weight`.

Out of range: [`FolkmoteError`](@ref) `:FOLKMOTE_BAD_ARGUMENT`. The linear payoff is that of Morris & Shin (2003).

# Example
```julia
share_payoff(cost = 0.1, reach = :contacts)
```
"""
share_payoff(; benefit = 1, cost = 0, reach = :community) =
    accepted(SharePayoff(given_numbers((benefit = benefit, cost = cost, reach = reach_mix(reach)))))

const REACHES = (community = 0.0, contacts = 1.0) # the ends of the header's FOLKMOTE_REACH

reach_mix(reach::Real) = reach
reach_mix(reach::Union{Symbol,AbstractString}) = get(() -> bad_reach(reach), REACHES, Symbol(reach))
reach_mix(reach) = bad_reach(reach)
bad_reach(reach) = refuse("reach = $(repr(reach)) is unknown; it is :community, :contacts or a number from 0 to 1.")
