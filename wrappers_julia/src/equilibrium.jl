struct Equilibrium <: Result
    handle::Handle{Raw.folkmote_equilibrium}
    table::NamedTuple
    study::Study
    record::Provenance
end

"""
    equilibrium(study, beliefs, payoff = share_payoff(); tolerance = 1e-10, threads, sweeps = 100_000)

Enclose the least and the greatest cutoff equilibrium of every community. Members act when their index
(pooled estimate of the obstacle plus private stake) is at most a cutoff. Monotone best replies from both ends
enclose every such equilibrium (Milgrom & Roberts 1990; Vives 1990; Van Zandt & Vives 2007).

Prints verdicts first. One row per community: `community`, `verdict`, `contraction_bound`, `turnout_least`,
`turnout_greatest` (expected shares, 0..1), `width` (of the enclosure, in units of the obstacle), `iterations`;
`columns(eq; level = :member)` has the cutoffs. Verdicts are symbols:

- `Symbol("proved unique")`: the contraction bound is below 1; there is one cutoff equilibrium.
- `:bracketed`: not proved, but both ends agree within `tolerance`.
- `:several`: the ends are proved to differ; every result is an interval.
- `Symbol("not converged")`: the sweeps ran out; this is no answer, and `width` says how far it got.

`study` is a study or a scenario (then its edited study is solved). `tolerance` 1e-13..1 is the widest enclosure
that counts as found, `sweeps` the cap per end, `threads` 1..1024 the worker threads (as many as Julia was started
with by default; they never change a result). Long runs report progress as log records and can be stopped with Ctrl-C.

# Example
```julia
eq = equilibrium(st, beliefs(prior_mean = 0.4, prior_precision = 1, signal_precision = 4))
eq.turnout_least
```
"""
function equilibrium(st::Study, b::Beliefs, payoff::SharePayoff = share_payoff(); tolerance = 1e-10,
                     threads = default_threads(), sweeps = 100_000)
    began = time()
    handle = Handle{Raw.folkmote_equilibrium}()
    kernel_beliefs, kernel_payoff = kernel_object(b), kernel_object(payoff)
    watched("equilibrium"; tolerance = tolerance, sweeps = sweeps, threads = threads) do options, message
        Raw.folkmote_equilibrium_create(handle_of(st), kernel_beliefs, kernel_payoff, options, handle, message)
    end
    close(kernel_beliefs)
    close(kernel_payoff)
    table, digest = level_table(handle, ids_of(st), :community)
    record = Provenance("equilibrium", began; inputs = [
                            "study" => Raw.folkmote_study_digest(handle_of(st)),
                            "study, beliefs and payoff" => equilibrium_digest(handle)],
                        result = digest, settings = ["tolerance" => string(tolerance), "sweeps at most" => string(sweeps)])
    return Equilibrium(handle, table, st, record)
end

equilibrium_digest(handle) = Raw.folkmote_equilibrium_digest(handle)

level_table(handle, ids, level) = read_result(ids) do table, message
    Raw.folkmote_equilibrium_table(handle, LEVELS[level], table, message)
end

study_of(eq::Equilibrium) = getfield(eq, :study)
columns(eq::Equilibrium, ::Val{:member}) = first(level_table(handle_of(eq), ids_of(study_of(eq)), :member))

Base.close(eq::Equilibrium) = close(handle_of(eq))

"Size and verdict of each community, by its id."
cells_of(eq::Equilibrium) =
    Dict{Any,Cell}(community => Cell(members, verdict) for (community, members, verdict)
                   in zip(eq.community, study_of(eq).members, eq.verdict))
