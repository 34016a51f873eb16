# Any table of columns becomes a kernel table; any kernel table becomes a NamedTuple of vectors.

"The columns that the kernel reads, table by table; other columns stay with the caller."
const USED = (
    members = (:community, :member, :turnout, :expected_share, :weight, :cost, :benefit,
               :signal_precision, :stake_sd),
    links = (:community, :listener, :speaker, :relay_precision),
    broadcasts = (:community, :broadcast, :member, :precision),
    gatherings = (:community, :gathering, :member),
    communities = (:community,),
    audience = (:community, :member),
)

"The column called `name` of any table of columns; `nothing` when it has none."
find_column(table::NamedTuple, name) = get(table, name, nothing)
find_column(table::AbstractDict, name) = get(() -> get(table, String(name), nothing), table, name)
find_column(table, name) = name in propertynames(table) ? getproperty(table, name) : nothing

const NOT_TABLES = Union{AbstractArray,Number,AbstractString,Symbol,Char,Nothing,Missing,Function,Type}

function require_table(table, what)
    table isa NOT_TABLES || return nothing
    refuse_data("$what: a table of columns is needed, such as (community = [1, 1], member = [1, 2]) or a " *
                "DataFrame, but this is of type $(typeof(table)).")
end

"Name and values of the columns of `table` that the kernel reads, in the kernel's order."
function used_columns(table, what)
    require_table(table, what)
    found = Pair{Symbol,AbstractVector}[]
    for name in USED[what]
        column = find_column(table, name)
        column === nothing && continue
        column isa AbstractVector || refuse_data("$what: column '$name' is of type $(typeof(column)); " *
                                                 "it must be a vector with one value per row.")
        push!(found, name => column)
    end
    return found
end

function common_length(columns, what)
    isempty(columns) && return 0
    rows = length(columns[1].second)
    for (name, column) in columns
        length(column) == rows || refuse_data("$what: column '$name' has $(length(column)) rows but column " *
                                              "'$(columns[1].first)' has $rows; give them the same length.")
    end
    return rows
end

"A kernel table made of any table of columns; `nothing` stays nothing."
kernel_table(::Nothing, what) = nothing
function kernel_table(table, what)
    columns = used_columns(table, what)
    rows = common_length(columns, what)
    made = create((handle, message) -> Raw.folkmote_table_create(rows, handle, message), Raw.folkmote_table)
    for (name, column) in columns
        add_column!(made, what, name, column)
    end
    return made
end

"Close a table as soon as it is not needed, rather than when the collector comes by."
give_back(table::Handle) = close(table)
give_back(::Nothing) = nothing

"What stands for a table that was not given."
or_null(table::Handle) = table
or_null(::Nothing) = Ptr{Raw.folkmote_table}(C_NULL)

# The type of a column is that of its values, so that a Vector{Any} of integers is an integer column.
kind(::Integer) = :integer
kind(::Real) = :real
kind(::Union{AbstractString,Symbol,Char}) = :text
kind(::Missing) = :missing
kind(::Any) = :other

function column_kind(column, what, name)
    type = nonmissingtype(eltype(column))
    type === Union{} && return :real # every value is missing
    type <: Integer && return :integer
    type <: AbstractFloat && return :real
    type <: Union{AbstractString,Symbol,Char} && return :text
    return mixed_kind(kind.(column), what, name)
end

"The kind of a column whose element type does not tell."
function mixed_kind(kinds, what, name)
    refuse_rows(findall(==(:other), kinds), what, name, "a value is neither number nor text; convert the column")
    if :text in kinds
        refuse_rows(findall(in((:integer, :real)), kinds), what, name,
                    "numbers stand among text; give the column one type")
        return :text
    end
    return :real in kinds || !(:integer in kinds) ? :real : :integer
end

"Refuse a column because of these rows, in the form of the kernel's own sentences."
function refuse_rows(rows, what, name, rule)
    isempty(rows) && return nothing
    count = length(rows)
    shown = join(rows[1:min(count, 5)], ", ", count <= 5 ? " and " : ", ")
    count > 5 && (shown *= ", ...")
    noun = count == 1 ? "row" : "rows"
    refuse_data("$what: column '$name', $noun $shown ($count $noun): $rule.")
end

function add_column!(table, what, name, column)
    kind = column_kind(column, what, name)
    kind === :integer && return add_integer!(table, what, name, column)
    kind === :real && return add_real!(table, what, name, column)
    return add_text!(table, what, name, column)
end

fits(value) = ismissing(value) || typemin(Int64) < value <= typemax(Int64)

function add_integer!(table, what, name, column)
    refuse_rows(findall(!fits, column), what, name, "a whole number is too large; use text")
    numbers = Int64[ismissing(value) ? typemin(Int64) : value for value in column]
    check(message -> Raw.folkmote_table_add_integer(table, String(name), numbers, message))
end

function add_real!(table, what, name, column)
    numbers = Float64[ismissing(value) ? NaN : value for value in column]
    check(message -> Raw.folkmote_table_add_real(table, String(name), numbers, message))
end

function add_text!(table, what, name, column)
    texts = Union{Missing,String}[ismissing(value) ? missing : string(value) for value in column]
    refuse_rows(findall(text -> !ismissing(text) && '\0' in text, texts), what, name,
                "a text holds a zero character; remove it")
    GC.@preserve texts begin
        pointers = Ptr{UInt8}[ismissing(text) ? Ptr{UInt8}(C_NULL) : pointer(text) for text in texts]
        check(message -> Raw.folkmote_table_add_text(table, String(name), pointers, message))
    end
end

# ---- Results --------------------------------------------------------------------------------------

"Element types of the caller's ids, to give them back as they came."
struct IdTypes
    community::Type
    member::Type
end

"The type of the values of a column, however loosely the vector itself is typed."
function id_type(column)
    type = nonmissingtype(eltype(column))
    isconcretetype(type) && return type
    return mapreduce(typeof, promote_type, skipmissing(column); init = Union{})
end

as_id(::Type{T}, label::Integer) where {T<:Number} = T(label)
as_id(::Type{T}, label::Real) where {T<:Number} = T(label)
as_id(::Type{T}, label::AbstractString) where {T<:Number} = T(parse(Int64, label))
as_id(::Type{Symbol}, label) = Symbol(label)
as_id(::Type{Char}, label) = only(string(label))
as_id(::Type{T}, label) where {T} = isconcretetype(T) ? convert(T, string(label)) : string(label)

"Columns whose text is one of a few words come back as symbols."
is_category(name) = name in (:scope, :chance_method, :parameter, :status_least, :status_greatest) ||
                    endswith(String(name), "verdict")

function as_asked(name, values, ids)
    name === :community && return as_ids(ids.community, values)
    name in (:member, :listener, :speaker) && return as_ids(ids.member, values)
    is_category(name) && return Symbol.(values)
    return values
end

as_ids(::Type{T}, labels::Vector{T}) where {T} = labels
as_ids(::Type{T}, labels) where {T} = [ismissing(label) ? missing : as_id(T, label) for label in labels]

"All columns of a kernel table as a NamedTuple of vectors."
function read_table(table::Handle{Raw.folkmote_table}, ids)
    columns = Raw.folkmote_table_columns(table)
    names = [Symbol(unsafe_string(Raw.folkmote_table_column_name(table, column))) for column in 0:columns-1]
    vectors = [as_asked(names[column+1], read_column(table, column), ids) for column in 0:columns-1]
    return NamedTuple{Tuple(names)}(Tuple(vectors))
end

function read_column(table, column)
    rows = Raw.folkmote_table_rows(table)
    type = Raw.folkmote_table_column_type(table, column)
    type == Raw.FOLKMOTE_INTEGER && return read_integer(table, column, rows)
    type == Raw.FOLKMOTE_REAL && return read_real(table, column, rows)
    return read_text(table, column, rows)
end

function read_real(table, column, rows)
    values = Vector{Float64}(undef, rows)
    check(message -> Raw.folkmote_table_get_real(table, column, values, message))
    return values
end

function read_integer(table, column, rows)
    values = Vector{Int64}(undef, rows)
    check(message -> Raw.folkmote_table_get_integer(table, column, values, message))
    any(==(typemin(Int64)), values) || return values
    return [value == typemin(Int64) ? missing : value for value in values]
end

function read_text(table, column, rows)
    pointers = Vector{Ptr{UInt8}}(undef, rows)
    GC.@preserve table begin # the texts live as long as the table does
        check(message -> Raw.folkmote_table_get_text(table, column, pointers, message))
        any(==(C_NULL), pointers) || return unsafe_string.(pointers)
        return [pointer == C_NULL ? missing : unsafe_string(pointer) for pointer in pointers]
    end
end
