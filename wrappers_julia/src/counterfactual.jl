struct Counterfactual <: Result
    table::NamedTuple
    record::Provenance
end

"""
    counterfactual(eq, scenario; draws = 1000, seed = nothing, threads, given = nothing, reduce = (:common, :stakes, :control))

The scenario's equilibrium beside the baseline's: analytic means at both ends, and `draws` (0, or at least 2) seeded plays in
which both share every draw (common random numbers). The scenario must be one of the equilibrium's own study. The seed follows
the rule of [`simulate`](@ref).

`given`: one value of the obstacle θ, or a range `(low, high)` with ends that may be infinite; analytic and simulated
numbers are then those given it. `reduce` names the devices that lower the error of the simulated mean difference without
moving it: draws in common, chances over the stakes in place of actions, the turnout curve as control variate; `()` is none.

The first row has `scope == :pooled` (weighted over all members), then one row `:community` each. Columns: `scope`, `community`,
`members`, `baseline_verdict`, `scenario_verdict`, `baseline_least`, `baseline_greatest`, `scenario_least`, `scenario_greatest`
(expected shares), `difference_least`, `difference_greatest` (end against same end), `difference_low`, `difference_high` (the
whole interval over equilibria), `simulated_least`, `simulated_greatest`, `standard_error_least`, `standard_error_greatest` (Monte
Carlo), `spread_low`, `spread_high` (5 % and 95 % points of the difference over plays). Without draws the last six are NaN.
Where a verdict is `Symbol("not converged")` the row is no answer.

# Example
```julia
cf = counterfactual(eq, scenario(st, broadcast(precision = 2)); draws = 1000, seed = 7)
cf.difference_low[1], cf.difference_high[1]
```
"""
function counterfactual(eq::Equilibrium, sc::Scenario; draws = 1000, seed = nothing, threads = default_threads(),
                        given = nothing, reduce = DEVICES)
    began = time()
    low, high = range_given(given)
    used, plays = the_seed(seed), whole(draws, "draws")
    table = Handle{Raw.folkmote_table}()
    watched("counterfactual"; threads = threads, devices(reduce)...) do options, message
        Raw.folkmote_counterfactual_within(handle_of(eq), handle_of(sc), plays, used, low, high, options, table, message)
    end
    found, digest = taken(table, ids_of(study_of(eq)))
    inputs = [inputs_of(eq); "baseline and edits" => Raw.folkmote_scenario_digest(handle_of(sc))]
    record = Provenance("counterfactual", began; seed = used, inputs = inputs, result = digest,
                        settings = settings_text(draws = plays, given = given, reduce = reduce))
    return Counterfactual(found, record)
end

const DEVICES = (:common, :stakes, :control)

"Options that switch each device on or off."
function devices(reduce)
    all(name -> name in DEVICES, reduce) ||
        refuse("reduce = $(repr(reduce)) cannot be used: it holds some of :common, :stakes and :control.")
    return [name => (name in reduce ? 1 : 0) for name in DEVICES]
end
