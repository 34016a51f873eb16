# The edits of a scenario are plain data; `apply` gives one to the kernel.

abstract type Edit end

struct EditLinks <: Edit
    adds::Bool
    links::Any
    mutual::Cint
end

struct ThinLinks <: Edit
    share::Float64
    seed::Int64
end

struct RewireLinks <: Edit
    share::Float64
    seed::Int64
end

struct Broadcast <: Edit
    audience::Any
    precision::Float64
end

struct Gathering <: Edit
    audience::Any
end

struct ShiftCost <: Edit
    by::Float64
    audience::Any
end

struct ShiftBenefit <: Edit
    by::Float64
    audience::Any
end

struct SetBeliefs <: Edit
    values::Dict{Symbol,Vector{Float64}}
end

struct ForwardReports <: Edit
    hops::Int64
end

"""
    add_links(links; mutual = false)

Edit for [`scenario`](@ref): add these links, a table with `community`, `listener`, `speaker` and optionally
`relay_precision`, or matrices, as in [`study`](@ref). A link that is there already is refused.

# Example
```julia
scenario(st, add_links((community = ["north"], listener = [1], speaker = [3]); mutual = true))
```
"""
add_links(links; mutual = false) = EditLinks(true, links, flag(mutual, "mutual"))

"""
    cut_links(links; mutual = false)

Edit for [`scenario`](@ref): cut these links, a table or matrices as in [`study`](@ref); `:all` cuts every link.
`mutual = true` cuts both directions. A link that is not there is refused.

# Example
```julia
scenario(st, cut_links(:all))
```
"""
cut_links(links; mutual = false) = EditLinks(false, links, flag(mutual, "mutual"))

"""
    thin_links(share; seed = nothing)

Edit for [`scenario`](@ref): lose a random `share` (0..1) of the contacts of each community, the nearest whole number of
them. A contact is a pair with a link in either direction; both directions go together. The seed follows the rule of
[`simulate`](@ref); it is taken when the edit is made, so that one edit always loses the same contacts.

# Example
```julia
scenario(st, thin_links(0.2; seed = 7))
```
"""
thin_links(share; seed = nothing) = ThinLinks(one_number(share, "share"), the_seed(seed))

"""
    rewire_links(share; seed = nothing)

Edit for [`scenario`](@ref): rewire a random `share` (0..1) of the contacts of each community, the nearest whole number of
them. Each exchanges partners with another contact of its kind (heard in both directions, or in one), so that everybody
hears as many, and is heard by as many, as before; each link keeps its listener and relay precision. Where no exchange is
found without a double contact, the contact stays as it is. The seed is taken as in [`thin_links`](@ref).

# Example
```julia
scenario(st, rewire_links(0.5; seed = 7))
```
"""
rewire_links(share; seed = nothing) = RewireLinks(one_number(share, "share"), the_seed(seed))

"""
    broadcast(; members = :all, precision)

Edit for [`scenario`](@ref): one more broadcast per community (radio, leaflet, announcement), heard alike by its audience, with
`precision` > 0 and finite. `members`: `:all`, or a table with `community`, or with `community` and `member`.
(A method of Base's `broadcast` without positional arguments.)

# Example
```julia
scenario(st, broadcast(precision = 2))
```
"""
Base.broadcast(; members = :all, precision) = Broadcast(audience(members), one_number(precision, "precision"))

"""
    gathering(; members = :all)

Edit for [`scenario`](@ref): one more gathering, in which everyone hears everyone exactly. `members` as in `broadcast`.

# Example
```julia
scenario(st, gathering(members = (community = ["north", "north"], member = [1, 2])))
```
"""
gathering(; members = :all) = Gathering(audience(members))

"""
    shift_cost(by; members = :all)

Edit for [`scenario`](@ref): add `by` (finite, in units of the benefit) to the cost of acting. `members` as in `broadcast`.

# Example
```julia
scenario(st, shift_cost(-0.1))
```
"""
shift_cost(by; members = :all) = ShiftCost(one_number(by, "by"), audience(members))

"""
    shift_benefit(by; members = :all)

Edit for [`scenario`](@ref): add `by` (finite) to the benefit. `members` as in `broadcast`. A benefit that ends below 0 is an
error when the scenario is solved.

# Example
```julia
scenario(st, shift_benefit(0.1))
```
"""
shift_benefit(by; members = :all) = ShiftBenefit(one_number(by, "by"), audience(members))

"""
    set_beliefs(; prior_mean, prior_precision, signal_precision, relay_precision, stake_sd)

Edit for [`scenario`](@ref): replace the named parameters of [`beliefs`](@ref), overriding any column of that name. Those not
named stay as they are.

# Example
```julia
scenario(st, set_beliefs(prior_mean = 0.2))
```
"""
set_beliefs(; prior_mean = nothing, prior_precision = nothing, signal_precision = nothing,
            relay_precision = nothing, stake_sd = nothing) =
    SetBeliefs(given_numbers((prior_mean = prior_mean, prior_precision = prior_precision,
                              signal_precision = signal_precision, relay_precision = relay_precision,
                              stake_sd = stake_sd)))

"""
    forward_reports(hops)

Edit for [`scenario`](@ref): extend hearing to `hops` (1..64) links. Original reports are forwarded, each along the most
precise path (relay variances add along it), and nobody is counted twice.

# Example
```julia
scenario(st, forward_reports(2))
```
"""
forward_reports(hops) = ForwardReports(clamp(whole(hops, "hops"), typemin(Cint), typemax(Cint)))

"Everyone, or the table that names them."
audience(members) = is_all(members) ? nothing : members

is_all(choice) = choice === :all || isequal(choice, "all")

"Call with the kernel's form of a table, or with its null."
function with_table(call, table, what)
    made = kernel_table(table, what)
    call(or_null(made))
    give_back(made)
end

function apply(edit::EditLinks, scenario, st)
    change = edit.adds ? Raw.folkmote_scenario_add_links : Raw.folkmote_scenario_cut_links
    found = !edit.adds && is_all(edit.links) ? nothing : link_table(edit.links, getfield(st, :communities), getfield(st, :members))
    with_table(found, :links) do table
        check(message -> change(scenario, table, edit.mutual, message))
    end
end

apply(edit::ThinLinks, scenario, st) =
    check(message -> Raw.folkmote_scenario_thin_links(scenario, edit.share, edit.seed, message))

apply(edit::RewireLinks, scenario, st) =
    check(message -> Raw.folkmote_scenario_rewire_links(scenario, edit.share, edit.seed, message))

function apply(edit::Broadcast, scenario, st)
    with_table(edit.audience, :audience) do table
        check(message -> Raw.folkmote_scenario_broadcast(scenario, table, edit.precision, message))
    end
end

function apply(edit::Gathering, scenario, st)
    with_table(edit.audience, :audience) do table
        check(message -> Raw.folkmote_scenario_gathering(scenario, table, message))
    end
end

function apply(edit::ShiftCost, scenario, st)
    with_table(edit.audience, :audience) do table
        check(message -> Raw.folkmote_scenario_shift_cost(scenario, table, edit.by, message))
    end
end

function apply(edit::ShiftBenefit, scenario, st)
    with_table(edit.audience, :audience) do table
        check(message -> Raw.folkmote_scenario_shift_benefit(scenario, table, edit.by, message))
    end
end

function apply(edit::SetBeliefs, scenario, st)
    for (name, number) in pairs(BELIEFS)
        haskey(edit.values, name) || continue
        values = edit.values[name]
        check(message -> Raw.folkmote_scenario_set_beliefs(scenario, number, length(values), values, message))
    end
end

apply(edit::ForwardReports, scenario, st) =
    check(message -> Raw.folkmote_scenario_forward_reports(scenario, edit.hops, message))

# ---- In words, for printing -----------------------------------------------------------------------

whom(::Nothing) = "everyone"
whom(table) = "some members"

in_words(edit::EditLinks) = (edit.adds ? "add" : "cut") * (is_all(edit.links) ? " all links" : " links")
in_words(edit::ThinLinks) = "lose a share $(edit.share) of contacts (seed $(edit.seed))"
in_words(edit::RewireLinks) = "rewire a share $(edit.share) of contacts (seed $(edit.seed))"
in_words(edit::Broadcast) = "broadcast to $(whom(edit.audience)), precision $(edit.precision)"
in_words(edit::Gathering) = "gathering of $(whom(edit.audience))"
in_words(edit::ShiftCost) = "shift the cost of $(whom(edit.audience)) by $(edit.by)"
in_words(edit::ShiftBenefit) = "shift the benefit of $(whom(edit.audience)) by $(edit.by)"
in_words(edit::SetBeliefs) = "set " * join(sort(collect(keys(edit.values))), ", ")
in_words(edit::ForwardReports) = "forward reports up to $(edit.hops) links"

Base.show(io::IO, edit::Edit) = print(io, "edit: ", in_words(edit))
