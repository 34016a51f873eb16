# Analytic turnout and seeded plays.

st = random_study(2, 20; seed = 3)
eq = equilibrium(st, some_beliefs())

plain = turnout(eq)
@test propertynames(plain) == (:community, :turnout_least, :turnout_greatest, :sd_least, :sd_greatest)
@test plain.turnout_least == eq.turnout_least
@test all(0 .< plain.sd_least .< 0.5)

curve = turnout(eq; given = [-1, 0.5, 2])
@test propertynames(curve)[1:3] == (:community, :given, :turnout_least) && curve.given == repeat([-1, 0.5, 2], 2)
@test issorted(curve.turnout_least[1:3]; rev = true) # a larger obstacle, a smaller turnout
@test turnout(eq; given = range(-1, 2; length = 4)).given[1:4] == [-1, 0, 1, 2]

chance = turnout(eq; given = 0.4, at_least = [0, 0.5, 1])
@test propertynames(chance) == (:community, :given, :at_least, :turnout_least, :turnout_greatest, :sd_least, :sd_greatest,
                                :chance_least, :chance_greatest, :chance_method)
@test all(0 .<= chance.chance_least .<= 1) && issorted(chance.chance_least[1:3]; rev = true)
@test eltype(chance.chance_method) == Symbol

# Plays agree with the analysis within their error, and split as they should.
plays = simulate(eq; nsim = 2000, seed = 11)
@test propertynames(plays) == (:community, :replication, :obstacle, :turnout_least, :turnout_greatest)
@test length(plays.community) == 4000 && plays.replication[[1, 2000, 2001]] == [1, 2000, 1]
for k in 1:2
    own = plays.turnout_least[plays.community .== k]
    @test abs(sum(own) / 2000 - eq.turnout_least[k]) < 5 * plain.sd_least[k] / sqrt(2000)
end
@test simulate(eq; nsim = 3, seed = 11).obstacle[1:3] == plays.obstacle[1:3]
@test all(==(0.4), simulate(eq; nsim = 3, seed = 11, given = 0.4).obstacle)

acts = simulate(eq; nsim = 2, seed = 11, level = :member)
@test propertynames(acts) == (:community, :member, :replication, :index, :action_least, :action_greatest)
first_play = (acts.replication .== 1) .& (acts.community .== 1)
@test sum(acts.action_least[first_play]) / 20 ≈ plays.turnout_least[1]
@test acts.member[first_play] == 1:20
@test length(simulate(eq; nsim = 1, seed = 11).community) == 2
