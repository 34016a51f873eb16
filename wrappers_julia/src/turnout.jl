struct Turnout <: Result
    table::NamedTuple
    cells::Dict{Any,Cell}
    record::Provenance
end

"""
    turnout(eq; given = nothing, at_least = nothing)

Analytic turnout of an equilibrium at its least and greatest end. `given`: values of the obstacle θ (finite), one
or several; then every row is given that value. `at_least`: thresholds in 0..1; then the chance that turnout reaches
each of them.

Columns: `community`, [`given`, `at_least`,] `turnout_least`, `turnout_greatest` (expected shares, weighted),
`sd_least`, `sd_greatest` [, `chance_least`, `chance_greatest`, `chance_method`]. `chance_method` is `:exact` or
`Symbol("normal approximation")`. With several values of `given` it shows as a curve in a notebook.

# Example
```julia
turnout(eq; given = range(-1, 2; length = 61))
turnout(eq; at_least = 0.5).chance_least
```
"""
function turnout(eq::Equilibrium; given = nothing, at_least = nothing)
    began = time()
    thetas, thresholds = several(given, "given"), several(at_least, "at_least")
    table = Handle{Raw.folkmote_table}()
    watched("turnout"; threads = default_threads()) do options, message
        Raw.folkmote_turnout(handle_of(eq), length(thetas), thetas, length(thresholds), thresholds, options,
                             table, message)
    end
    found, digest = taken(table, ids_of(study_of(eq)))
    record = Provenance("turnout", began; inputs = inputs_of(eq),
                        result = digest, settings = settings_text(given = given, at_least = at_least))
    return Turnout(found, cells_of(eq), record)
end

several(::Nothing, name) = Float64[]
several(value, name) = numbers(value, name)

settings_text(; settings...) = [String(name) => repr(value) for (name, value) in settings if value !== nothing]

"Columns and digest of a table that the kernel has made; the table is given back."
function taken(table, ids)
    found, digest = read_table(table, ids), Raw.folkmote_table_digest(table)
    close(table)
    return found, digest
end

struct Simulation <: Result
    table::NamedTuple
    cells::Dict{Any,Cell}
    record::Provenance
end

"""
    simulate(eq; nsim = 1, seed = nothing, given = nothing, level = :community)

Seeded plays of an equilibrium, each with its own draw of everything unseen, at both ends on the same draws. `seed` is a
whole number 0..2^53; `nothing` takes one from Julia's default generator (so `Random.seed!` governs), stores and shows it.
`given`: one value of the obstacle θ at which to play, or a range `(low, high)` of it, whose ends may be infinite; then θ
follows its prior truncated to the range.

`level = :community`: `community`, `replication` (from 1), `obstacle`, `turnout_least`, `turnout_greatest` (shares, 0..1).
`level = :member`: `community`, `member`, `replication`, `index`, `action_least`, `action_greatest` (0 or 1); member rows
describe people: keep them private.

# Example
```julia
plays = simulate(eq; nsim = 100, seed = 7)
```
"""
function simulate(eq::Equilibrium; nsim = 1, seed = nothing, given = nothing, level = :community)
    began = time()
    used = the_seed(seed)
    low, high = range_given(given)
    table = Handle{Raw.folkmote_table}()
    draws, level_number = whole(nsim, "nsim"), LEVELS[checked_level(level)]
    watched("simulate"; threads = default_threads()) do options, message
        Raw.folkmote_simulate_within(handle_of(eq), FIRST_DRAW, draws, used, low, high, level_number, options, table,
                                     message)
    end
    found, digest = taken(table, ids_of(study_of(eq)))
    record = Provenance("simulate", began; seed = used, result = digest,
                        inputs = inputs_of(eq),
                        settings = settings_text(nsim = nsim, given = given, level = level))
    return Simulation(found, cells_of(eq), record)
end

const FIRST_DRAW = 0

inputs_of(eq) = ["study" => Raw.folkmote_study_digest(handle_of(study_of(eq))),
                 "equilibrium" => equilibrium_digest(handle_of(eq))]

"What is known of the obstacle, as a range: nothing, its value, or both ends."
range_given(::Nothing) = (-Inf, Inf)
range_given(value::Real) = (Float64(value), Float64(value))
range_given(ends) = length(ends) == 2 ? (one_number(first(ends), "given"), one_number(last(ends), "given")) :
    refuse("given = $(repr(ends)) cannot be used: it is nothing, one number, or a range (low, high).")

whole(value::Bool, name) = bad_whole(value, name)
whole(value::Real, name) = isinteger(value) && abs(value) <= 2^53 ? Int64(value) : bad_whole(value, name)
whole(value, name) = bad_whole(value, name)
bad_whole(value, name) = refuse("$name = $(repr(value)) cannot be used: it must be a whole number.")
