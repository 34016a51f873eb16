# A session in the middle of a long call; its parent (test_interrupt.jl) sends it SIGINT.
using Folkmote

Base.exit_on_sigint(false) # as in a session that someone types into

quick() = equilibrium(study((community = [1, 1], member = [1, 2])),
                      beliefs(prior_mean = 0.4, prior_precision = 1, signal_precision = 4))
handles() = (GC.gc(); GC.gc(); Folkmote.Raw.folkmote_live_handles())

crowd(count, size) = study((community = repeat(1:count; inner = size), member = repeat(1:size; outer = count),
                            signal_precision = repeat(range(0.999, 1.001; length = size), count)))

"Close to where one equilibrium becomes three, best replies creep."
function creep(st)
    try
        b = beliefs(prior_mean = 0.5, prior_precision = 2.8159766482620667)
        equilibrium(st, b; tolerance = 1e-13, sweeps = 10^9, threads = 1)
        return "ended by itself"
    catch problem
        return problem isa InterruptException ? "interrupted" : sprint(showerror, problem)
    end
end

quick() # everything is compiled before the clock runs
creep(crowd(1, 2))
long = crowd(100, 1500)
before = handles()
println("started")
flush(stdout)
println(creep(long))
flush(stdout)
println("alive ", length(quick().community))
println("leaked ", handles() - before)
