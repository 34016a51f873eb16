# One rule of seeds.

eq = equilibrium(small_study(), some_beliefs())
seed_used(x) = provenance(x).seed

# None takes one number from Julia's generator, which governs; it is stored and shown.
Random.seed!(5)
one = simulate(eq; nsim = 2)
two = simulate(eq; nsim = 2)
Random.seed!(5)
again = simulate(eq; nsim = 2)
@test seed_used(one) == seed_used(again) != seed_used(two) && one.obstacle == again.obstacle
@test 0 <= seed_used(one) <= 2^53
@test occursin(string(seed_used(one)), shown("text/plain", one))
@test simulate(eq; nsim = 2, seed = seed_used(one)).obstacle == one.obstacle

# A given one leaves Julia's generator alone.
Random.seed!(5)
untouched = rand()
Random.seed!(5)
simulate(eq; seed = 3)
counterfactual(eq, scenario(small_study(), thin_links(0.5; seed = 2)); draws = 2, seed = 3)
@test rand() == untouched

for seed in (0, 7, 7.0, 2^53, UInt8(9), big(12))
    @test seed_used(simulate(eq; seed = seed)) == seed
end
for seed in (-1, 0.5, NaN, Inf, 2^53 + 1, missing, "7", true, 1im, big(2)^80)
    @test refused(() -> simulate(eq; seed = seed), :FOLKMOTE_BAD_ARGUMENT, "0 to 2^53")
    @test refused(() -> thin_links(0.1; seed = seed), :FOLKMOTE_BAD_ARGUMENT, "0 to 2^53")
end

# An edit takes its seed when it is made.
edit = thin_links(0.5)
@test occursin(string(edit.seed), sprint(show, edit))
