struct Scenario
    handle::Handle{Raw.folkmote_scenario}
    baseline::Study
    edits::Vector{Edit}
    record::Provenance
end

"""
    scenario(study, edits...)

A study with edits that remembers its baseline. The edits are applied in order, each checked against the study as those before
it left it: [`add_links`](@ref), [`cut_links`](@ref), [`thin_links`](@ref), [`rewire_links`](@ref), `broadcast`, [`gathering`](@ref),
[`shift_cost`](@ref), [`shift_benefit`](@ref), [`set_beliefs`](@ref), [`forward_reports`](@ref). A scenario in place of the study goes on from there.

`equilibrium(sc, beliefs, payoff)` solves it, with what [`set_beliefs`](@ref) set in place of `beliefs`; [`counterfactual`](@ref)
compares it with its baseline; `study(sc)` is the edited study alone, without what `set_beliefs` set.

# Example
```julia
sc = scenario(st, thin_links(0.2; seed = 7), broadcast(precision = 2))
```
"""
function scenario(st::Study, edits::Edit...)
    began = time()
    handle = create((scenario, message) -> Raw.folkmote_scenario_create(handle_of(st), scenario, message),
                    Raw.folkmote_scenario)
    foreach(edit -> apply(edit, handle, st), edits)
    record = Provenance("scenario", began; inputs = ["baseline and edits" => Raw.folkmote_scenario_digest(handle)],
                        settings = ["edit $k" => in_words(edit) for (k, edit) in enumerate(edits)])
    return Scenario(handle, st, collect(Edit, edits), record)
end

scenario(sc::Scenario, edits::Edit...) = scenario(sc.baseline, sc.edits..., edits...)

function study(sc::Scenario)
    began = time()
    handle = create((study, message) -> Raw.folkmote_scenario_study(handle_of(sc), study, message), Raw.folkmote_study)
    inputs = ["baseline and edits" => Raw.folkmote_scenario_digest(handle_of(sc))]
    return indexed_study(handle, ids_of(sc.baseline), getfield(sc.baseline, :communities),
                         getfield(sc.baseline, :members), began, inputs, false)
end

"The beliefs that hold under these edits: what they set goes before what the baseline had."
edited_beliefs(b, edits) = Beliefs(merge(b.values, [edit.values for edit in edits if edit isa SetBeliefs]...))

equilibrium(sc::Scenario, b::Beliefs, payoff::SharePayoff = share_payoff(); settings...) =
    equilibrium(study(sc), edited_beliefs(b, sc.edits), payoff; settings...)

Base.close(sc::Scenario) = close(handle_of(sc))
