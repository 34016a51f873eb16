# Prints the digests of the example study's derivatives, as derivatives.c does.
# Usage: julia derivatives.jl data-folder
using Folkmote, DelimitedFiles

function table_of(name)
    cells, header = readdlm(joinpath(ARGS[1], name * ".csv"), ',', header = true)
    column(k) = [cell == "NA" ? missing : cell for cell in cells[:, k]]
    return NamedTuple{Tuple(Symbol.(vec(header)))}(Tuple(column(k) for k in axes(cells, 2)))
end

st = study(table_of("members"), table_of("links"); broadcasts = table_of("broadcasts"),
           gatherings = table_of("gatherings"), communities = table_of("communities"))
eq = equilibrium(st, beliefs(prior_mean = 0.36, prior_precision = 6.2, signal_precision = 1, stake_sd = 0.15))
for found in (sensitivity(eq), sensitivity(eq; level = :member), sensitivity(eq; with_respect_to = :links))
    println(string(provenance(found).result; base = 16, pad = 16))
end
