# What the verbs return: plain Julia data. A result is a NamedTuple of vectors with a record of where
# it came from; its columns are its properties.

abstract type Result end

"What a reader of a result must know about a community: is there an answer, may it be shared."
struct Cell
    members::Int
    verdict::Symbol
end

const UNIQUE = Symbol("proved unique")
const BRACKETED = :bracketed
const SEVERAL = :several
const NOT_CONVERGED = Symbol("not converged")
const VERDICTS = (UNIQUE, BRACKETED, SEVERAL, NOT_CONVERGED)

const FEWEST_TO_SHARE = 10 # cells with fewer members point at people

small(cell::Cell) = cell.members < FEWEST_TO_SHARE
answers(cell::Cell) = cell.verdict !== NOT_CONVERGED

table_of(result::Result) = getfield(result, :table)
record_of(result) = getfield(result, :record)

Base.propertynames(result::Result, private::Bool = false) = propertynames(table_of(result))

function Base.getproperty(result::Result, name::Symbol)
    table = table_of(result)
    haskey(table, name) && return table[name]
    refuse("there is no column '$name' here; the columns are $(join(propertynames(table), ", ")).")
end

"""
    columns(result; level = :community)
    NamedTuple(result)

The columns of a result, or of a study's summary, as a NamedTuple of equally long vectors: a column
table to every table package, so that `DataFrame(columns(result))` works. Ids have the type they had in
the input, verdicts are symbols, shares and chances lie in 0..1.

For an equilibrium `level = :member` gives one row per member, in the order of `members`: `community`,
`member`, `cutoff_least`, `cutoff_greatest` (in units of the obstacle), `information_held`, `chance_least`,
`chance_greatest`. Member rows describe people: keep them private.

# Example
```julia
columns(equilibrium(st, b)).turnout_least
```
"""
columns(result::Result; level = :community) = columns(result, Val(checked_level(level)))
columns(result::Result, ::Val{:community}) = table_of(result)
columns(result::Result, ::Val{:member}) =
    refuse("level = :member is for an equilibrium; for plays, ask simulate(eq; level = :member).")

Base.NamedTuple(result::Result) = table_of(result)

const LEVELS = (community = Raw.FOLKMOTE_BY_COMMUNITY, member = Raw.FOLKMOTE_BY_MEMBER)

checked_level(level::Symbol) = haskey(LEVELS, level) ? level : bad_level(level)
checked_level(level) = bad_level(level)
bad_level(level) = refuse("level = $(repr(level)) is unknown; it is :community or :member.")

"Call the kernel for a table, read it, and keep its digest."
function read_result(make, ids)
    table = create(make, Raw.folkmote_table)
    columns = read_table(table, ids)
    digest = Raw.folkmote_table_digest(table)
    close(table)
    return columns, digest
end
