# Plays on Distributed workers: addprocs takes the machines of a cluster as well.
#     julia --project=wrappers_julia examples/cluster/workers.jl folder draws
using Distributed
addprocs(2; exeflags = "--project=$(Base.active_project())")
@everywhere using Folkmote

# The study of the example, as in study.R. Each worker makes its own, once.
@everywhere function village_equilibrium()
    community = repeat(["village-$(lpad(k, 2, '0'))" for k in 1:12]; inner = 60)
    member = repeat(1:60; outer = 12)
    links = (community = community, listener = member, speaker = member .% 60 .+ 1)
    st = study((community = community, member = member), links; mutual = true)
    return equilibrium(st, beliefs(prior_mean = 0.45, prior_precision = 1, signal_precision = 4, stake_sd = 0.2))
end

plays = run_chunks(village_equilibrium, parse(Int, ARGS[2]), 7, ARGS[1]; chunks = 4, map = pmap)
println(provenance(plays))
