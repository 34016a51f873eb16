# Chunks: any split gives the bytes of the single run; conditions and devices.

members = (community = vcat(fill("a", 5), fill("b", 8)), member = collect(1:13))
st = study(members)
eq = equilibrium(st, beliefs(prior_mean = 0.4, prior_precision = 1, signal_precision = 4, stake_sd = 0.2))
sc = scenario(st, broadcast(precision = 2))
output_of(x) = provenance(x).result

@test vcat(collect.(split_draws(10, 3))...) == 1:10
@test refused(() -> split_draws(3, 4), :FOLKMOTE_BAD_ARGUMENT)

for level in (:community, :member), chunks in (1, 4, 57)
    mktempdir() do folder
        merged = run_chunks(eq, 57, 9, folder; chunks = chunks, level = level)
        @test output_of(merged) == output_of(simulate(eq; nsim = 57, seed = 9, level = level))
        stamps = mtime.(readdir(folder; join = true))
        run_chunks(eq, 57, 9, folder; chunks = chunks, level = level)
        @test mtime.(readdir(folder; join = true)) == stamps
    end
end

mktempdir() do folder
    pairs = run_chunks(() -> (eq, sc), 30, 9, folder; chunks = 3, given = (0, 1))
    plays = simulate(eq; nsim = 30, seed = 9, given = (0, 1))
    @test pairs.baseline_least == plays.turnout_least && pairs.obstacle == plays.obstacle
    @test all(0 .<= plays.obstacle .<= 1)
    @test occursin("seed 9", shown("text/plain", pairs))
end

mktempdir() do folder
    files = joinpath.(folder, ["a", "b", "c"])
    for (part, file) in zip((1:10, 11:20, 21:30), files)
        @test run_chunk(eq, part, 9, file)
    end
    @test !run_chunk(eq, 1:10, 9, files[1])
    @test refused(() -> merge_chunks(eq, files[[1, 3]], 30), :FOLKMOTE_BAD_FILE)
    @test refused(() -> merge_chunks(eq, files[[1, 2, 3, 3]], 30), :FOLKMOTE_BAD_FILE)
    @test refused(() -> run_chunk(eq, 1:10, 8, files[1]), :FOLKMOTE_BAD_FILE)
    @test refused(() -> run_chunk(eq, [1, 3], 8, files[1]), :FOLKMOTE_BAD_ARGUMENT)
    @test refused(() -> run_chunk(eq, 1:3, nothing, files[1]), :FOLKMOTE_BAD_ARGUMENT)
end

cheaper = scenario(st, shift_cost(-0.2))
plain = counterfactual(eq, cheaper; draws = 400, seed = 2, reduce = ())
best = counterfactual(eq, cheaper; draws = 400, seed = 2)
@test plain.difference_least == best.difference_least
@test all(best.standard_error_least .< plain.standard_error_least ./ 3)
@test counterfactual(eq, cheaper; draws = 0, given = 0.3).baseline_least[2:end] ≈ turnout(eq; given = 0.3).turnout_least
@test refused(() -> counterfactual(eq, cheaper; reduce = (:luck,)), :FOLKMOTE_BAD_ARGUMENT)
@test refused(() -> simulate(eq; given = (1, 0)), :FOLKMOTE_BAD_ARGUMENT)
@test refused(() -> simulate(eq; given = (1, 2, 3)), :FOLKMOTE_BAD_ARGUMENT)
