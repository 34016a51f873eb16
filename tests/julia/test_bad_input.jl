# Bad input stops with one sentence that names table, column, rows and count; the session goes on.

m, l = two_communities(), few_links()
with(table; changes...) = merge(table, (; changes...))
at(column, row, value) = [k == row ? value : x for (k, x) in enumerate(column)]
after(column, values...) = vcat(column, collect(values))
repeated(table, row) = map(column -> after(column, column[row]), table)
radio(; changes...) = with((community = fill("north", 2), broadcast = [1, 1], member = [1, 2], precision = [2.0, 2.0]); changes...)
meeting(; changes...) = with((community = fill("north", 2), gathering = [1, 1], member = [1, 2]); changes...)

const BAD = [
    "unknown listener" => (() -> study(m, with(l; listener = at(l.listener, 2, 9))), ("links", "'listener'", "row 2", "1 row")),
    "unknown speakers" => (() -> study(m, with(l; speaker = [2, 8, 9])), ("links", "'speaker'", "rows 2 and 3", "2 rows")),
    "unknown community" => (() -> study(m, with(l; community = at(l.community, 3, "east"))), ("links", "'community'", "row 3", "1 row")),
    "unknown in broadcasts" => (() -> study(m; broadcasts = radio(member = [1, 9])), ("broadcasts", "'member'", "row 2", "1 row")),
    "unknown in gatherings" => (() -> study(m; gatherings = meeting(member = [9, 1])), ("gatherings", "'member'", "row 1", "1 row")),
    "link to oneself" => (() -> study(m, with(l; speaker = at(l.speaker, 1, 1))), ("links", "'speaker'", "row 1", "1 row")),
    "duplicate link" => (() -> study(m, repeated(l, 1)), ("links", "row 4", "1 row")),
    "contact in both directions" => (() -> study(m, (community = ["north", "north"], listener = [1, 2], speaker = [2, 1]); mutual = true),
                                     ("links", "row 2", "1 row")),
    "duplicate member" => (() -> study(repeated(m, 2), l), ("members", "'member'", "row 6", "1 row")),
    "link across communities" => (() -> study(with(m; member = 1:5), (community = ["north"], listener = [1], speaker = [4])),
                                  ("links", "'speaker'", "row 1", "1 row", "another community")),
    "missing member" => (() -> study(with(m; member = [1, missing, 3, 1, missing]), l), ("members", "'member'", "rows 2 and 5", "2 rows")),
    "missing community" => (() -> study(with(m; community = at(m.community, 4, missing)), l), ("members", "'community'", "row 4", "1 row")),
    "missing listener" => (() -> study(m, with(l; listener = [missing, 2, 1])), ("links", "'listener'", "row 1", "1 row")),
    "missing weight" => (() -> study(with(m; weight = [1, 1, missing, 1, 1]), l), ("members", "'weight'", "row 3", "1 row")),
    "missing precision" => (() -> study(m; broadcasts = radio(precision = [2.0, missing])), ("broadcasts", "'precision'", "row 2", "1 row")),
    "weight of nought" => (() -> study(with(m; weight = [1, 0, 1, -2, 1]), l), ("members", "'weight'", "rows 2 and 4", "2 rows")),
    "negative precision" => (() -> study(with(m; signal_precision = [1, 1, 1, 1, -1]), l), ("members", "'signal_precision'", "row 5", "1 row")),
    "relay precision of nought" => (() -> study(m, with(l; relay_precision = [1, 0, Inf])), ("links", "'relay_precision'", "row 2", "1 row")),
    "broadcast precision of nought" => (() -> study(m; broadcasts = radio(precision = [0, 0])), ("broadcasts", "'precision'", "rows 1 and 2", "2 rows")),
    "two precisions of a broadcast" => (() -> study(m; broadcasts = radio(precision = [2, 3])), ("broadcasts", "'precision'", "row 2", "1 row")),
    "cost not finite" => (() -> study(with(m; cost = [0, 0, Inf, 0, 0]), l), ("members", "'cost'", "row 3", "1 row")),
    "turnout of two" => (() -> study(with(m; turnout = [0, 1, 2, 1, missing]), l), ("members", "'turnout'", "row 3", "1 row")),
    "turnout of a half" => (() -> study(with(m; turnout = [0, 1, 0.5, 1, missing]), l), ("members", "'turnout'", "row 3", "1 row")),
    "share above one" => (() -> study(with(m; expected_share = [0.1, 1.1, missing, 0, 1]), l), ("members", "'expected_share'", "row 2", "1 row")),
    "text for a number" => (() -> study(with(m; weight = fill("heavy", 5)), l), ("members", "'weight'", "text", "5 rows")),
    "neither number nor text" => (() -> study(with(m; member = Any[1, 2, 3, 1, 2 + 1im]), l), ("members", "'member'", "row 5", "1 row")),
    "numbers among text" => (() -> study(with(m; member = Any["a", 2, "c", "a", "b"]), l), ("members", "'member'", "row 2", "1 row")),
    "fractional id" => (() -> study(with(m; member = [1, 2.5, 3, 1, 2]), l), ("members", "'member'", "row 2", "1 row")),
    "id too large" => (() -> study(with(m; member = big.([1, 2, big(2)^70, 1, 2])), l), ("members", "'member'", "row 3", "1 row")),
    "zero character" => (() -> study(with(m; member = ["a", "b\0", "c", "a", "b"])), ("members", "'member'", "row 2", "1 row")),
    "empty community" => (() -> study(m, l; communities = (community = ["north", "south", "east"],)), ("communities", "'community'", "row 3", "1 row")),
    "community left out" => (() -> study(m, l; communities = (community = ["north"],)), ("members", "'community'", "rows 4 and 5", "2 rows")),
    "no column" => (() -> study((community = ["a"],)), ("members", "'member'", "missing")),
    "no members" => (() -> study((community = String[], member = Int[])), ("members",)),
    "columns of two lengths" => (() -> study((community = ["a", "a"], member = [1])), ("members", "'member'", "1 rows", "2")),
    "a scalar for a column" => (() -> study((community = "a", member = [1])), ("members", "'community'", "vector")),
    "no table" => (() -> study(7), ("members", "table of columns")),
    "more than five rows" => (() -> study((community = fill(1, 9), member = fill(1, 9))), ("members", "'member'", "rows 2, 3, 4, 5, 6, ...", "8 rows")),
]

for (name, (call, words)) in BAD
    found = refusal(call)
    @test (name, found === nothing ? nothing : found.code) == (name, :FOLKMOTE_BAD_DATA)
    found === nothing && continue
    for word in words
        @test occursin(word, found.sentence) || (name, word, found.sentence)
    end
    @test sprint(showerror, found) == found.sentence && endswith(found.sentence, ".")
end
@test equilibrium(small_study(), some_beliefs()).verdict == fill(Symbol("proved unique"), 2)

# Values out of range are refused where they are given.
st, b = small_study(), some_beliefs()
for call in (() -> beliefs(prior_mean = Inf, prior_precision = 1), () -> beliefs(prior_mean = 0, prior_precision = 0),
             () -> beliefs(prior_mean = 0, prior_precision = -1), () -> some_beliefs(signal_precision = -1),
             () -> some_beliefs(relay_precision = 0), () -> some_beliefs(stake_sd = NaN), () -> some_beliefs(stake_sd = missing),
             () -> beliefs(prior_mean = "high", prior_precision = 1), () -> share_payoff(benefit = -1), () -> share_payoff(cost = Inf),
             () -> share_payoff(reach = 2), () -> share_payoff(reach = :neighbours), () -> equilibrium(st, some_beliefs(prior_mean = [1, 2, 3, 4])),
             () -> equilibrium(st, some_beliefs(signal_precision = nothing)), () -> equilibrium(st, b; tolerance = 0),
             () -> equilibrium(st, b; threads = 0), () -> equilibrium(st, b; sweeps = 0), () -> equilibrium(st, b; tolerance = "small"),
             () -> turnout(equilibrium(st, b); at_least = 2), () -> turnout(equilibrium(st, b); given = NaN),
             () -> simulate(equilibrium(st, b); nsim = -1), () -> simulate(equilibrium(st, b); nsim = 1.5),
             () -> simulate(equilibrium(st, b); level = :village), () -> study(two_communities(); mutual = 2),
             () -> scenario(st, broadcast(precision = 0)), () -> scenario(st, thin_links(1.5; seed = 1)),
             () -> scenario(st, forward_reports(0)), () -> scenario(st, forward_reports(10^12)), () -> scenario(st, shift_cost(NaN)), () -> scenario(st, rewire_links(-0.1; seed = 1)),
             () -> scenario(st, shift_benefit(Inf)), () -> counterfactual(equilibrium(st, some_beliefs()), scenario(st, shift_benefit(-2)); draws = 0))
    found = refusal(call)
    @test found !== nothing && found.code === :FOLKMOTE_BAD_ARGUMENT && !isempty(found.sentence)
end
