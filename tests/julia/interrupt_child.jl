# A session in the middle of a long call, the one named by the argument; its parent (test_interrupt.jl) sends it SIGINT.
using Folkmote

Base.exit_on_sigint(false) # as in a session that someone types into

some() = beliefs(prior_mean = 0.4, prior_precision = 1, signal_precision = 4, stake_sd = 0.2)
quick() = equilibrium(study((community = [1, 1], member = [1, 2])), some())
handles() = (GC.gc(); GC.gc(); Folkmote.Raw.folkmote_live_handles())

crowd(count, size) = study((community = repeat(1:count; inner = size), member = repeat(1:size; outer = count),
                            signal_precision = repeat(range(0.999, 1.001; length = size), count)))
ring(size) = study((community = fill(1, size), member = 1:size),
                   (community = fill(1, size), listener = 1:size, speaker = [2:size; 1]); mutual = true)

"Close to where one equilibrium becomes three, best replies creep."
creep(st) = equilibrium(st, beliefs(prior_mean = 0.5, prior_precision = 2.8159766482620667);
                        tolerance = 1e-13, sweeps = 10^9, threads = 1)

function outcome(work)
    try
        work()
        return "ended by itself"
    catch problem
        return problem isa InterruptException ? "interrupted" : sprint(showerror, problem)
    end
end

const COUNT, SIZE = crowd(100, 1500), 3000
const ONE = equilibrium(study((community = repeat(1:4; inner = 400), member = repeat(1:400; outer = 4))), some())
const LARGE = equilibrium(ring(SIZE), some())
const LOUDER(eq) = scenario(getfield(eq, :study), Folkmote.broadcast(precision = 2))
const FOLDER = mktempdir()

# Each verb as a short call, to compile it before the clock runs, and as a long one.
const WORK = Dict(
    "equilibrium" => (() -> creep(crowd(1, 2)), () -> creep(COUNT)),
    "turnout" => (() -> turnout(quick(); at_least = 0.1), () -> turnout(ONE; at_least = range(0.1, 0.9; length = 200))),
    "simulate" => (() -> simulate(ONE), () -> simulate(ONE; nsim = 10^6)),
    "counterfactual" => (() -> counterfactual(ONE, LOUDER(ONE); draws = 4),
                         () -> counterfactual(ONE, LOUDER(ONE); draws = 300_000)),
    "counterfactual of one large community" => (() -> counterfactual(ONE, LOUDER(ONE); draws = 4),
                                                () -> counterfactual(LARGE, LOUDER(LARGE); draws = 100_000)),
    "run_chunk" => (() -> run_chunk(ONE, 1:4, 1, joinpath(FOLDER, "short")),
                    () -> run_chunk(ONE, 1:10^6, 1, joinpath(FOLDER, "long"))))

const SHORT, LONG = WORK[ARGS[1]]
quick()
outcome(SHORT)
before = handles()
println("started")
flush(stdout)
said = outcome(LONG)
println(said, " ", time())
println("alive ", length(quick().community))
println("leaked ", handles() - before)
println("left ", join(filter(name -> occursin("long", name), readdir(FOLDER)), " "))
