# Random communities against the dense form of the model.

"A random community as tables, and the same by matrices."
function random_community(seed)
    r = MersenneTwister(seed)
    n = rand(r, 4:9)
    own = round.(0.5 .+ 3 .* rand(r, n); digits = 3)
    relay = [i != j && rand(r) < 0.3 ? round(0.5 + 4rand(r); digits = 3) : 0.0 for i in 1:n, j in 1:n]
    met = seed % 2 == 0 ? shuffle(r, 1:n)[1:3] : Int[]
    audience, loudness = shuffle(r, 1:n)[1:rand(r, 2:n)], round(0.2 + rand(r); digits = 3)
    heard = [i == j ? own[i] : i in met && j in met ? own[j] : relay[i, j] > 0 ? own[j] * relay[i, j] / (own[j] + relay[i, j]) : 0.0
             for i in 1:n, j in 1:n]
    stake, weight = 0.1 .+ 0.4 .* rand(r, n), 0.5 .+ rand(r, n)
    benefit, cost = 0.5 .+ rand(r, n), 0.2 .* rand(r, n)
    dense = Dense(own, heard, [audience => loudness], stake, weight, benefit, cost, rand(r), 0.5 + rand(r), (seed % 3) / 2)
    links = findall(>(0), relay)
    tables = (members = (community = fill(1, n), member = 1:n, signal_precision = own, stake_sd = stake, weight = weight,
                         benefit = benefit, cost = cost),
              links = (community = fill(1, length(links)), listener = [l[1] for l in links], speaker = [l[2] for l in links],
                       relay_precision = relay[links]),
              broadcasts = (community = fill(1, length(audience)), broadcast = fill(1, length(audience)), member = audience,
                            precision = fill(loudness, length(audience))),
              gatherings = isempty(met) ? nothing : (community = fill(1, 3), gathering = fill(1, 3), member = met))
    return tables, dense
end

"Both ends of the kernel's answer against the oracle's."
function agrees(eq, dense)
    found = columns(eq; level = :member)
    @test eq.verdict[1] !== Symbol("not converged")
    for (cutoffs, from_kernel, share) in ((oracle_least(dense), found.cutoff_least, eq.turnout_least[1]),
                                          (oracle_greatest(dense), found.cutoff_greatest, eq.turnout_greatest[1]))
        @test maximum(abs, cutoffs - from_kernel) < 1e-9
        @test abs(oracle_turnout(dense, cutoffs) - share) < 1e-9
    end
end

function random_agrees(seed)
    tables, dense = random_community(seed)
    st = study(tables.members, tables.links; broadcasts = tables.broadcasts, gatherings = tables.gatherings)
    parameters = beliefs(prior_mean = dense.mean, prior_precision = dense.precision)
    agrees(equilibrium(st, parameters, share_payoff(reach = dense.mix); tolerance = 1e-11), dense)
end

foreach(random_agrees, 1:8)

# Two members with the same information, apart by their stakes only: the smaller the stake, the closer their indices.
function twins_agree(stake)
    pair = study((community = [1, 1], member = [1, 2]), (community = [1], listener = [1], speaker = [2]); mutual = true)
    dense = Dense([4.0, 4], fill(4.0, 2, 2), [], [stake, stake], ones(2), ones(2), zeros(2), 0.4, 1.0, 0.0)
    agrees(equilibrium(pair, some_beliefs(stake_sd = stake); tolerance = 1e-11), dense)
end

foreach(twins_agree, (1.0, 0.5, 0.2, 0.1))
