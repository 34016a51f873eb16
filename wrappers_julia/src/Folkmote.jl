"""
Turnout in a collective action on a listening network.

Who listens to whom shapes who turns out. Members of a community face an obstacle that nobody sees, hold a signal of it, hear
others' signals, broadcasts and gatherings, and act when acting pays: the more others act, the more it does. This package
encloses the least and the greatest equilibrium, says whether they are proved to be one, and answers what a change of the
network, the information or the costs would do.

    using Folkmote
    st = study(members, links; broadcasts = radio, mutual = true)
    eq = equilibrium(st, beliefs(prior_mean = 0.4, prior_precision = 1, signal_precision = 4, stake_sd = 0.2), share_payoff())
    cf = counterfactual(eq, scenario(st, broadcast(members = :all, precision = 2)); draws = 1000, seed = 7)

**What is assumed.** A member acts on one number, the index: its pooled estimate of the obstacle (normal updating on all it
hears, nobody counted twice) plus its private stake. It conditions on nothing finer. With overlapping reports a member could
in general gain a little by using each report separately; the answers here are those of the game with one-number types.
The network is known to all. Communities are independent of each other.

**Cautions.**
- Listening data describe people, also those who were only named by others. Obtain ethics approval and consent first.
- Keep sociometric data private: even without names, a neighbourhood of ten contacts nearly always identifies its owner.
- Results are by community. Member-level rows come only when asked for; cells under ten members are starred. They are never a
  list of whom to press, reward or punish.
- Nothing here is crowd-safety advice.
- Local law, and the practice of licensed professionals, come first.

**Where the kernel is.** The environment variable `FOLKMOTE_LIBRARY` names the library; without it, `Folkmote.build()` builds
one from the repository. All numbers come from that kernel, the same as in R, to the last bit.

**Errors** are [`FolkmoteError`](@ref)s. **Results** are plain data: see [`columns`](@ref) and [`provenance`](@ref).
"""
module Folkmote

import Dates, Libdl, Logging, Random
using Printf: @sprintf

export study, beliefs, share_payoff, equilibrium, turnout, simulate, sensitivity, counterfactual
export scenario, add_links, cut_links, thin_links, rewire_links, gathering, shift_cost, shift_benefit, set_beliefs, forward_reports
export columns, provenance, cutoff_picture, FolkmoteError
export split_draws, run_chunk, run_chunks, merge_chunks

include("errors.jl")
include("raw.jl")
include("handles.jl")
include("library.jl")
include("columns.jl")
include("links.jl")
include("seeds.jl")
include("watch.jl")
include("provenance.jl")
include("results.jl")
include("study.jl")
include("parameters.jl")
include("equilibrium.jl")
include("turnout.jl")
include("sensitivity.jl")
include("edits.jl")
include("scenario.jl")
include("counterfactual.jl")
include("chunks.jl")
include("words.jl")
include("show_text.jl")
include("svg.jl")
include("picture_rows.jl")
include("picture_equilibrium.jl")
include("picture_curve.jl")
include("picture_cutoffs.jl")
include("picture_counterfactual.jl")
include("show_rich.jl")

function __init__()
    CALLBACK[] = make_callback()
    problem = attach()
    isempty(problem) || @warn problem
    return nothing
end

end
