# The dense form of the model, written from its definition alone: every pair, no curve, no tables.
# It shares nothing with the kernel.

"Standard normal distribution function by Marsaglia's series (2004), good to 1e-15."
function normal_cdf(x)
    abs(x) > 9 && return x > 0 ? 1.0 : 0.0
    term, total, k = x, x, 1
    while abs(term) > 1e-18
        k += 2
        term *= x^2 / k
        total += term
    end
    return 0.5 + total * exp(-x^2 / 2) / sqrt(2pi)
end

"A community by matrices: precisions β_ij with which i hears j (0: does not), exact ones marked, broadcasts."
struct Dense
    own::Vector{Float64}            # β_i
    heard::Matrix{Float64}          # β_ij, own signal on the diagonal
    broadcasts::Vector{Pair{Vector{Int},Float64}} # audience and τ
    stake::Vector{Float64}
    weight::Vector{Float64}
    benefit::Vector{Float64}
    cost::Vector{Float64}
    mean::Float64
    precision::Float64
    mix::Float64
end

"Information held, and what each pair shares of it."
function information(d)
    n = length(d.own)
    held = vec(sum(d.heard; dims = 2))
    shared = zeros(n, n)
    for i in 1:n, j in 1:n
        shared[i, j] = sum(d.own[k] > 0 ? d.heard[i, k] * d.heard[j, k] / d.own[k] : 0.0 for k in 1:n)
    end
    for (audience, precision) in d.broadcasts
        held[audience] .+= precision
        shared[audience, audience] .+= precision
    end
    return held, shared
end

"Variance of each index and covariance of each pair."
function moments(d)
    held, shared = information(d)
    p = d.precision .+ held
    covariance = (held * held' ./ d.precision .+ shared) ./ (p * p')
    return held ./ (d.precision .* p) .+ d.stake .^ 2, covariance
end

"Reach w_ij, rows of sum 1 (0 where nobody is heard)."
function reach(d)
    n = length(d.own)
    everyone = [i == j ? 0.0 : d.weight[j] for i in 1:n, j in 1:n]
    contacts = [i != j && d.heard[i, j] > 0 ? d.weight[j] : 0.0 for i in 1:n, j in 1:n]
    scaled(w) = [sum(w[i, :]) > 0 ? w[i, j] / sum(w[i, :]) : 0.0 for i in 1:n, j in 1:n]
    return (1 - d.mix) .* scaled(everyone) .+ d.mix .* scaled(contacts)
end

"Where a decreasing function crosses zero."
function crossing(f, low, high)
    for _ in 1:200
        middle = (low + high) / 2
        f(middle) > 0 ? (low = middle) : (high = middle)
    end
    return (low + high) / 2
end

function best_reply(d, cutoffs, variance, covariance, w)
    n = length(cutoffs)
    return map(1:n) do i
        share(t) = sum(j == i ? 0.0 : w[i, j] * normal_cdf((cutoffs[j] - d.mean - covariance[i, j] / variance[i] * (t - d.mean)) /
                                                sqrt(variance[j] - covariance[i, j]^2 / variance[i])) for j in 1:n)
        crossing(t -> d.benefit[i] * share(t) - d.cost[i] - t, -d.cost[i] - 1, d.benefit[i] - d.cost[i] + 1)
    end
end

"The end of the equilibria that monotone best replies from `start` reach."
function oracle_cutoffs(d, start)
    variance, covariance = moments(d)
    w, cutoffs = reach(d), start
    for _ in 1:5000
        next = best_reply(d, cutoffs, variance, covariance, w)
        maximum(abs, next - cutoffs) < 1e-13 && return next
        cutoffs = next
    end
    return cutoffs
end

oracle_least(d) = oracle_cutoffs(d, -d.cost)
oracle_greatest(d) = oracle_cutoffs(d, d.benefit - d.cost)

function oracle_turnout(d, cutoffs)
    variance, _ = moments(d)
    return sum(d.weight .* normal_cdf.((cutoffs .- d.mean) ./ sqrt.(variance))) / sum(d.weight)
end
