# Derivatives of an equilibrium.

ring = study((community = fill("Ring", 12), member = 1:12),
             (community = fill("Ring", 12), listener = 1:12, speaker = [2:12; 1]);
             broadcasts = (community = fill("Ring", 4), broadcast = fill("r", 4), member = 1:4, precision = fill(1.5, 4)))
solved_at(; mean = 0.4, precision = 1, signal = 4, relay = 3, stake = 0.2, benefit = 1, cost = 0.1) =
    equilibrium(ring, beliefs(prior_mean = mean, prior_precision = precision, signal_precision = signal,
                              relay_precision = relay, stake_sd = stake), share_payoff(benefit = benefit, cost = cost);
                tolerance = 1e-13)
solved = solved_at()

derivatives = sensitivity(solved)
@test propertynames(derivatives) == (:community, :parameter, :broadcast, :turnout_least, :turnout_greatest, :status_least, :status_greatest)
@test derivatives.parameter == collect(keys(Folkmote.DERIVATIVES))
@test isequal(derivatives.broadcast, [fill(missing, 7); 1])
@test all(==(:solved), derivatives.status_least)
at_base = (mean = 0.4, precision = 1, signal = 4, relay = 3, stake = 0.2, benefit = 1, cost = 0.1)
for (k, name) in enumerate(keys(at_base))
    at(by) = solved_at(; merge(at_base, NamedTuple{(name,)}((at_base[name] + by,)))...).turnout_greatest[1]
    h = 2e-3
    @test abs(derivatives.turnout_greatest[k] - (8 * (at(h) - at(-h)) - (at(2h) - at(-2h))) / 12h) < 1e-6
end

own = sensitivity(solved; with_respect_to = [:cost, :stake_sd], level = :member)
@test own.member == [1:12; 1:12] && own.parameter == [fill(:cost, 12); fill(:stake_sd, 12)]
@test sum(own.turnout_own_least[1:12]) ≈ derivatives.turnout_least[7]
@test all(isnan, sensitivity(solved; with_respect_to = :prior_mean, level = :member).turnout_own_least)

links = sensitivity(solved; with_respect_to = :links)
@test length(links.listener) == 132 && eltype(links.speaker) == Int
@test count(>(0), links.precision) == 12 && links.precision[1] ≈ 4 * 3 / 7

shown_text = sprint(show, MIME"text/plain"(), derivatives)
@test occursin("Derivatives at 1 community", shown_text) && occursin("prior_mean", shown_text)
@test occursin("no list of whom to press", sprint(show, MIME"text/plain"(), links))
@test occursin("<table>", sprint(show, MIME"text/html"(), own))
unfinished = equilibrium(ring, beliefs(prior_mean = 0.4, prior_precision = 1, signal_precision = 4); sweeps = 1)
@test all(isnan, sensitivity(unfinished).turnout_least)
@test all(==(Symbol("not converged")), sensitivity(unfinished).status_least)

for wrong in (:weight, [:cost, :cost], [:links, :cost], Symbol[], 1, "cost")
    @test_throws FolkmoteError sensitivity(solved; with_respect_to = wrong)
end
@test_throws FolkmoteError sensitivity(solved; with_respect_to = :links, level = :member)
@test_throws FolkmoteError sensitivity(solved; level = :household)
