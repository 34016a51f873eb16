# The plays of bench_plays.cpp in plain Julia: randn!, and neighbour sums along each member's list.
#     julia bench_plays.jl members plays file
using DelimitedFiles, Random

function play(n, start, speaker, plays, cutoff, generator)
    mu, beta, sigma = 0.45, 2.0, 0.3
    x, nu, turnout = zeros(n), zeros(n), 0.0
    precision = [1 + beta * (1 + start[i + 1] - start[i]) for i in 1:n]
    root = 1 / sqrt(beta)
    for r in 1:plays
        theta = mu + randn(generator)
        randn!(generator, x)
        randn!(generator, nu)
        @inbounds for i in 1:n
            x[i] = theta + root * x[i]
        end
        acted = 0
        @inbounds for i in 1:n
            sum = x[i]
            for k in start[i]:(start[i + 1] - 1)
                sum += x[speaker[k]]
            end
            acted += (mu + beta * sum) / precision[i] + sigma * nu[i] <= cutoff[i]
        end
        turnout += acted / n
    end
    return turnout / plays
end

n, plays = parse(Int, ARGS[1]), parse(Int, ARGS[2])
links = readdlm(ARGS[3], Int)
start, speaker = zeros(Int, n + 1), links[:, 2]
start[1] = 1
for i in 1:n
    start[i + 1] = start[i] + count(==(i), view(links, :, 1))
end
cutoff = fill(0.5, n)
play(n, start, speaker, 2, cutoff, MersenneTwister(1))  # compiled outside the clock
time = @elapsed play(n, start, speaker, plays, cutoff, MersenneTwister(2))
println("Julia ", round(time, digits=4))
