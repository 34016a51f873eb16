struct Study <: Result
    handle::Handle{Raw.folkmote_study}
    table::NamedTuple # the summary, one row per community
    ids::IdTypes
    communities::AbstractVector # columns of `members`, for links given as matrices
    members::AbstractVector
    record::Provenance
end

"""
    study(members, links; broadcasts, gatherings, communities, mutual = false)
    study(members; links, broadcasts, gatherings, communities, mutual = false)

Check the tables of who listens to whom and index them. A table is any table of columns: a NamedTuple or
Dict of vectors, a DataFrame, or anything else with columns as properties.

| table | columns |
| --- | --- |
| `members` | `community`, `member` (unique in its community); optional `turnout` (0, 1 or missing), `expected_share` (0..1 or missing), `weight` (> 0), `cost`, `benefit` (>= 0), `signal_precision` (>= 0), `stake_sd` (>= 0) |
| `links` | `community`, `listener`, `speaker`; optional `relay_precision` (> 0; `Inf`: exact, the default) |
| `broadcasts` | `community`, `broadcast`, `member`, `precision` (> 0, one value per broadcast) |
| `gatherings` | `community`, `gathering`, `member`: everyone in one hears everyone, exactly |
| `communities` | `community`: exactly those of `members` |

Other columns are left alone. Ids are whole numbers or text (strings, symbols, characters), matched by
label, and come back in your type. `mutual = true` adds the reverse of every link. A member or link column,
where present, overrides the scalar of [`beliefs`](@ref) or of the payoff.

`links` may also be a (sparse) matrix over all members in the order of `members`, where
`A[i, j] != 0` says that i listens to j; or a vector of such matrices, one per community in the order in which
`members` first names them; or a Dict of them by community.

Bad input raises one [`FolkmoteError`](@ref) `:FOLKMOTE_BAD_DATA` that names table, column, the first rows
at fault and their number. Nothing is dropped or repaired silently.

Returns a study that prints as a summary; `columns(st)` has one row per community: `community`, `members`,
`links`, `broadcasts`, `gatherings`, `hears_mean`, `hears_most`, `turnout_observed` (NaN: nobody observed),
`turnout_missing`.

Listening data describe people, also those who were only named by others: see the cautions in the
documentation of [`Folkmote`](@ref).

# Example
```julia
members = (community = fill("north", 3), member = [1, 2, 3])
links = (community = fill("north", 2), listener = [1, 2], speaker = [2, 3])
st = study(members, links; mutual = true)
```
"""
function study(members, links_in_order = nothing; links = nothing, broadcasts = nothing,
               gatherings = nothing, communities = nothing, mutual = false)
    began = time()
    given_links = one_of(links_in_order, links)
    member_table = kernel_table(members, :members)
    community_column, member_column = id_columns(members)
    link_columns = link_table(given_links, community_column, member_column)
    tables = [member_table, kernel_table(link_columns, :links), kernel_table(broadcasts, :broadcasts),
              kernel_table(gatherings, :gatherings), kernel_table(communities, :communities)]
    handle = create(Raw.folkmote_study) do study, message
        Raw.folkmote_study_create(or_null.(tables)..., flag(mutual, "mutual"), study, message)
    end
    ids = IdTypes(id_type(community_column), id_type(member_column))
    digests = ["study" => Raw.folkmote_study_digest(handle); input_digests(tables)]
    foreach(give_back, tables)
    return indexed_study(handle, ids, community_column, member_column, began, digests, mutual)
end

one_of(a, ::Nothing) = a
one_of(::Nothing, b) = b
one_of(::Nothing, ::Nothing) = nothing
one_of(a, b) = refuse("links were given twice, by position and by name; give them once.")

flag(value::Bool, name) = Cint(value)
flag(value, name) = refuse("$name = $(repr(value)) cannot be used: it is true or false.")

"The id columns as the caller has them; the kernel says what is wrong when they are absent."
id_columns(members) = something(find_column(members, :community), Int[]),
                      something(find_column(members, :member), Int[])

const TABLE_NAMES = ("members", "links", "broadcasts", "gatherings", "communities")

input_digests(tables) = [name => Raw.folkmote_table_digest(table)
                         for (name, table) in zip(TABLE_NAMES, tables) if table !== nothing]

function indexed_study(handle, ids, community_column, member_column, began, inputs, mutual)
    summary, digest = read_result((table, message) -> Raw.folkmote_study_summary(handle, table, message), ids)
    record = Provenance("study", began; inputs = inputs, result = digest,
                        settings = ["mutual links" => string(mutual)])
    return Study(handle, summary, ids, copy(community_column), copy(member_column), record)
end

handle_of(x) = getfield(x, :handle)
ids_of(st::Study) = getfield(st, :ids)

Base.close(st::Study) = close(handle_of(st))
