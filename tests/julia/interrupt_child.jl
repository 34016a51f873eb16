# A session in the middle of a long call; its parent (test_interrupt.jl) sends it SIGINT.
using Folkmote

Base.exit_on_sigint(false) # as in a session that someone types into

quick() = equilibrium(study((community = [1, 1], member = [1, 2])),
                      beliefs(prior_mean = 0.4, prior_precision = 1, signal_precision = 4))
handles() = (GC.gc(); GC.gc(); Folkmote.Raw.folkmote_live_handles())

"Close to where one equilibrium becomes three, best replies creep."
function creep(count, size)
    st = study((community = repeat(1:count; inner = size), member = repeat(1:size; outer = count),
                signal_precision = repeat(range(0.999, 1.001; length = size), count)))
    b = beliefs(prior_mean = 0.5, prior_precision = 2.8159766482620667)
    return equilibrium(st, b; tolerance = 1e-13, sweeps = 10^9, threads = 1)
end

@noinline function interrupted()
    try
        creep(50, 1500)
        return "ended by itself"
    catch problem
        return problem isa InterruptException ? "interrupted" : sprint(showerror, problem)
    end
end

quick() # everything is compiled before the clock runs
before = handles()
println("started")
flush(stdout)
println(interrupted())
flush(stdout)
println("alive ", length(quick().community))
println("leaked ", handles() - before)
