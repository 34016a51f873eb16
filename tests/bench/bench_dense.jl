# The plain iteration of bench_dense.cpp, in plain Julia.
#     julia bench_dense.jl members file
using DelimitedFiles

Phi(z) = 0.5 * ccall((:erfc, "libm.so.6"), Float64, (Float64,), -z * 0.7071067811865476)

function laws(n, links, alpha, beta, sigma)
    holds = zeros(n, n)
    for i in 1:n
        holds[i, i] = 1
    end
    for k in 1:size(links, 1)
        holds[links[k, 1], links[k, 2]] = 1
    end
    held = beta .* vec(sum(holds, dims=2))
    p = alpha .+ held
    e = held ./ (alpha .* p) .+ sigma^2
    covariance = (held * held' ./ alpha .+ beta .* (holds * holds')) ./ (p * p')
    rho = covariance ./ e
    sd = sqrt.(max.(0.0, e' .- covariance .^ 2 ./ e))
    # By column, as Julia stores it: column i holds member i's view of the others.
    return permutedims(rho), permutedims(sd)
end

function solve_from(start, rho, sd, mu)
    n = size(rho, 1)
    cutoff = fill(start, n)
    reply = similar(cutoff)
    while true
        for i in 1:n
            share = 0.0
            for j in 1:n
                j == i && continue
                share += Phi((cutoff[j] - mu - rho[j, i] * (cutoff[i] - mu)) / sd[j, i])
            end
            reply[i] = (cutoff[i] + share / (n - 1)) / 2  # damped: undamped it does not converge here
        end
        moved = maximum(abs.(reply .- cutoff))
        cutoff .= reply
        moved <= 1e-11 && return cutoff
    end
end

function both_ends(n, links)
    rho, sd = laws(n, links, 1.0, 2.0, 0.1)
    return solve_from(0.0, rho, sd, 0.4), solve_from(1.0, rho, sd, 0.4)
end

n = parse(Int, ARGS[1])
links = readdlm(ARGS[2], Int)
both_ends(2, [1 2; 2 1])  # compiled outside the clock
time = @elapsed begin
    least, greatest = both_ends(n, links)
end
@assert maximum(abs.(least .- greatest)) < 1e-9
println("Julia ", round(time, digits=4))
