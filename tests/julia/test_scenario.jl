# Every edit, and what it changes.

st = small_study(mutual = true)
b = some_beliefs()
eq = equilibrium(st, b)
edited(edits...) = study(scenario(st, edits...))
contact = (community = ["north"], listener = [1], speaker = [3])

@test edited(add_links(contact)).links == [5, 2]
@test edited(add_links(contact; mutual = true)).links == [6, 2]
@test edited(cut_links((community = ["north"], listener = [1], speaker = [2]))).links == [3, 2]
@test edited(cut_links(:all)).links == [0, 0]
@test edited(thin_links(1; seed = 1)).links == [0, 0]
@test edited(thin_links(0.5; seed = 1)).links[1] == 2
@test edited(broadcast(precision = 2)).broadcasts == [1, 1]
@test edited(broadcast(members = (community = ["south"],), precision = 2)).broadcasts == [0, 1]
@test edited(gathering(members = (community = ["north", "north"], member = [1, 3]))).gatherings == [1, 0]
@test edited(gathering()).hears_most == [2, 1]
@test edited(rewire_links(1; seed = 1)).links == edited(thin_links(0; seed = 1)).links
@test edited(cut_links(:all), add_links(contact), thin_links(0; seed = 1)).links == [1, 0]
@test study(scenario(scenario(st, cut_links(:all)), add_links(contact))).links == [1, 0]
@test edited(add_links([sparse([1], [3], [true], 3, 3), spzeros(Bool, 2, 2)])).links == [5, 2]
@test eltype(edited().community) == String && edited().links == st.links

@test refused(() -> scenario(st, add_links(few_links())), :FOLKMOTE_BAD_DATA, "links")
@test refused(() -> scenario(st, cut_links(contact)), :FOLKMOTE_BAD_DATA, "links")
@test refused(() -> scenario(st, broadcast(members = (community = ["east"],), precision = 1)), :FOLKMOTE_BAD_DATA, "'community'")
@test refused(() -> add_links(contact; mutual = 2), :FOLKMOTE_BAD_ARGUMENT, "mutual")
@test refused(() -> scenario(st, add_links(:all)), :FOLKMOTE_BAD_DATA, "table of columns")
@test refused(() -> scenario(st, broadcast(members = 3, precision = 1)), :FOLKMOTE_BAD_DATA, "table of columns")

# Solving a scenario and comparing it give the same numbers, whatever is edited.
for edits in ((broadcast(precision = 2),), (gathering(),), (shift_cost(0.1),), (shift_benefit(0.2),), (rewire_links(1; seed = 2),), (set_beliefs(prior_mean = 0.1, stake_sd = 0.5),),
              (forward_reports(2),), (set_beliefs(signal_precision = [1, 2]), shift_cost(-0.1; members = (community = ["south"],))))
    sc = scenario(st, edits...)
    compared = counterfactual(eq, sc; draws = 0, seed = 1)
    direct = equilibrium(sc, b)
    @test compared.scenario_least[2:3] == direct.turnout_least && compared.scenario_greatest[2:3] == direct.turnout_greatest
    @test compared.baseline_least[2:3] == eq.turnout_least
end

cf = counterfactual(eq, scenario(st, shift_cost(-0.2)); draws = 200, seed = 7)
@test cf.scope == [:pooled, :community, :community] && ismissing(cf.community[1]) && cf.community[2:3] == ["north", "south"]
@test cf.members == [5, 3, 2] && all(>(0), cf.difference_low)
@test all(cf.spread_low .<= cf.simulated_least .<= cf.spread_high)
@test length(propertynames(cf)) == 19 && cf.baseline_verdict[1] === Symbol("proved unique")
@test all(isnan, counterfactual(eq, scenario(st); draws = 0).simulated_least)
@test all(abs.(counterfactual(eq, scenario(st); draws = 10, seed = 3).simulated_least) .== 0) # common random numbers

# Symbols for communities come back as symbols, and the pooled row has none.
symbols = study((community = [:a, :a, :b, :b], member = ['x', 'y', 'x', 'y']))
pooled = counterfactual(equilibrium(symbols, b), scenario(symbols, gathering()); draws = 0)
@test isequal(pooled.community, [missing, :a, :b])

other = small_study()
@test refused(() -> counterfactual(eq, scenario(other)), :FOLKMOTE_BAD_ARGUMENT, "study")
@test refused(() -> counterfactual(eq, scenario(st); draws = 1), :FOLKMOTE_BAD_ARGUMENT)
