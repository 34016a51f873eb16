# Links may be given as a table or as adjacency matrices: A[i, j] != 0 says that i listens to j.

const Adjacency = Union{AbstractMatrix,AbstractVector{<:AbstractMatrix}}

"The links of `given` as a table of columns, for the members of a study."
link_table(given, communities, members) = given
link_table(given::AbstractMatrix, communities, members) =
    whole_study_links(given, communities, members)

"One matrix per community, in the order in which `members` first names the communities."
function link_table(given::AbstractVector{<:AbstractMatrix}, communities, members)
    order = unique(communities)
    length(given) == length(order) || refuse_data("links: there are $(length(given)) matrices for " *
                                                  "$(length(order)) communities; give one for each.")
    return per_community_links(zip(order, given), communities, members)
end

function link_table(given::AbstractDict, communities, members)
    matrices = !isempty(given) && all(matrix -> matrix isa AbstractMatrix, values(given))
    return matrices ? per_community_links(pairs(given), communities, members) : given
end

"Row and column numbers of what is not zero, listeners first."
function listening_pairs(matrix, size_wanted, where)
    size(matrix) == (size_wanted, size_wanted) ||
        refuse_data("links: the matrix $where is $(join(size(matrix), " by ")); it must be $size_wanted by " *
                    "$size_wanted, one row and column per member in the order of members.")
    cells = findall(!iszero, matrix)
    return first.(Tuple.(cells)), last.(Tuple.(cells))
end

function whole_study_links(matrix, communities, members)
    listeners, speakers = listening_pairs(matrix, length(members), "of the study")
    across = findall(communities[listeners] .!= communities[speakers])
    isempty(across) || refuse_data("links: the matrix links $(length(across)) pairs across communities, " *
                                   "first row $(listeners[across[1]]) and column $(speakers[across[1]]); " *
                                   "everything stays within one community.")
    return (community = communities[listeners], listener = members[listeners], speaker = members[speakers])
end

function per_community_links(named_matrices, communities, members)
    found = (community = similar(communities, 0), listener = similar(members, 0), speaker = similar(members, 0))
    for (community, matrix) in named_matrices
        own = findall(==(community), communities)
        isempty(own) && refuse_data("links: no member belongs to community $community; correct the label.")
        listeners, speakers = listening_pairs(matrix, length(own), "of community $community")
        append!(found.community, communities[own[listeners]])
        append!(found.listener, members[own[listeners]])
        append!(found.speaker, members[own[speakers]])
    end
    return found
end
