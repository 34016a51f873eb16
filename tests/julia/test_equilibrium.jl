# Verdicts, check values, threads.

using DelimitedFiles: readdlm

# Morris & Shin's linear investment game (2003): its state is one less our obstacle. Two members without links are the
# whole continuum, since both face the same chance.
reference, header = readdlm(joinpath(ROOT, "tests", "reference", "gg_investment_cutoffs.csv"), ',', Any, '\n'; header = true)
column(name) = reference[:, findfirst(==(name), vec(header))]
triples = unique(zip(Float64.(column("mu")), Float64.(column("alpha")), Float64.(column("beta"))))
roots = [Float64.(column("one_minus_kappa")[[row == triple for row in zip(column("mu"), column("alpha"), column("beta"))]])
         for triple in triples]
games = study((community = repeat(1:length(triples); inner = 2), member = repeat(1:2; outer = length(triples))))
solved = equilibrium(games, beliefs(prior_mean = [1 - t[1] for t in triples], prior_precision = [t[2] for t in triples],
                                    signal_precision = [t[3] for t in triples]); tolerance = 1e-11)
cutoffs = columns(solved; level = :member)
for (k, found) in enumerate(roots)
    least, greatest = cutoffs.cutoff_least[2k], cutoffs.cutoff_greatest[2k]
    @test least <= minimum(found) + 1e-9 && greatest >= maximum(found) - 1e-9 # always enclosed
    solved.verdict[k] === Symbol("not converged") && continue
    @test abs(least - minimum(found)) < 1e-8 && abs(greatest - maximum(found)) < 1e-8
    @test (solved.verdict[k] === :several) == (length(found) > 1)
    @test abs(cutoffs.cutoff_least[2k-1] - least) < 1e-10
end
@test count(==(Symbol("not converged")), solved.verdict) <= 2 # at the critical point itself
@test all(solved.contraction_bound[k] < 1 for k in eachindex(roots) if solved.verdict[k] === Symbol("proved unique"))

# Too few sweeps are no answer.
starved = equilibrium(games, starving_beliefs(); sweeps = 2)
@test all(==(Symbol("not converged")), starved.verdict) && all(>(0), starved.width)

# Any number of threads gives the same bytes.
st = random_study(6, 30)
results(threads) = begin
    eq = equilibrium(st, some_beliefs(); threads = threads)
    cf = counterfactual(eq, scenario(st, broadcast(precision = 2)); draws = 50, seed = 7, threads = threads)
    (provenance(eq).result, provenance(cf).result, provenance(eq).inputs)
end
@test results(1) == results(2) == results(5)

# A result says where it is from.
eq = equilibrium(st, some_beliefs())
@test propertynames(eq) ==
      (:community, :verdict, :contraction_bound, :turnout_least, :turnout_greatest, :width, :iterations)
@test keys(columns(eq; level = :member)) ==
      (:community, :member, :cutoff_least, :cutoff_greatest, :chance_least, :chance_greatest, :information_held)
@test provenance(eq).inputs != provenance(equilibrium(st, some_beliefs(stake_sd = 0.3))).inputs
@test refused(() -> columns(eq; level = :village), :FOLKMOTE_BAD_ARGUMENT, ":village")

# A member column overrides the scalar; a vector per member says the same.
m = two_communities()
precisions = [1.0, 2, 3, 4, 5]
by_column = equilibrium(study(merge(m, (signal_precision = precisions,)), few_links()), some_beliefs(signal_precision = nothing))
by_vector = equilibrium(small_study(), some_beliefs(signal_precision = precisions))
@test columns(by_column; level = :member) == columns(by_vector; level = :member)

# Progress is a log record with a fraction.
logger = Test.TestLogger(min_level = Logging.LogLevel(-1))
with_logger(() -> equilibrium(st, some_beliefs()), logger)
records = filter(record -> record.message == "equilibrium", logger.logs)
@test !isempty(records) && all(record -> record.level == Logging.LogLevel(-1), records)
@test records[end].kwargs[:progress] == "done" && records[1].kwargs[:progress] isa Float64
@test all(record -> record.kwargs[:progress] == "done" || 0 <= record.kwargs[:progress] <= 1, records)

# An error inside a logger comes out as itself, not as a crash.
struct Trap <: AbstractLogger end
Logging.min_enabled_level(::Trap) = Logging.LogLevel(-1)
Logging.shouldlog(::Trap, args...) = true
Logging.catch_exceptions(::Trap) = false
Logging.handle_message(::Trap, level, message, args...; progress = nothing, more...) =
    progress isa Float64 ? throw(DomainError(progress, "trap")) : nothing
@test_throws DomainError with_logger(() -> equilibrium(st, some_beliefs()), Trap())
@test length(equilibrium(st, some_beliefs()).community) == 6
