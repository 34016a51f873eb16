# Small studies that several test files use.

two_communities() = (community = ["north", "north", "north", "south", "south"], member = [1, 2, 3, 1, 2])
few_links() = (community = ["north", "north", "south"], listener = [1, 2, 1], speaker = [2, 3, 2])
small_study(; more...) = study(two_communities(), few_links(); more...)

some_beliefs(; more...) =
    beliefs(; (; prior_mean = 0.4, prior_precision = 1, signal_precision = 4, stake_sd = 0.2, more...)...)

"Precise signals behind a vague prior are one answer; the other way round there are several."
several_beliefs() = beliefs(prior_mean = 0.5, prior_precision = 20, signal_precision = 1)

"Near the point where one equilibrium becomes three, a few sweeps are not enough."
starving_beliefs() = beliefs(prior_mean = 0.5, prior_precision = 2.8, signal_precision = 1)

"`count` communities of `size` members on random mutual contacts."
function random_study(count, size; contacts = 2size, seed = 1)
    generator = MersenneTwister(seed)
    community, member = repeat(1:count; inner = size), repeat(1:size; outer = count)
    where_, from, to = Int[], Int[], Int[]
    for c in 1:count
        pairs = Set{Tuple{Int,Int}}()
        while length(pairs) < contacts
            a, b = rand(generator, 1:size), rand(generator, 1:size)
            a < b && push!(pairs, (a, b))
        end
        for (a, b) in sort(collect(pairs))
            push!(where_, c), push!(from, a), push!(to, b)
        end
    end
    return study((community = community, member = member), (community = where_, listener = from, speaker = to);
                 mutual = true)
end

"The refusal of a call; `nothing` when it went through."
function refusal(call)
    try
        call()
        return nothing
    catch problem
        problem isa FolkmoteError || rethrow()
        return problem
    end
end

"Whether a call is refused with this code and all of these words in its sentence."
function refused(call, code, words...)
    found = refusal(call)
    found === nothing && return false
    good = found.code === code && all(word -> occursin(word, found.sentence), words)
    good || @info "refused otherwise" found.code found.sentence words
    return good
end

shown(mime, x) = sprint(show, MIME(mime), x)
