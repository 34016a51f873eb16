# Tables in, tables out: any table of columns, any id type, matrices for links.

"Something with columns as properties, as a data frame has them."
struct Frame
    columns::Dict{Symbol,Vector}
end
Base.propertynames(f::Frame) = collect(keys(getfield(f, :columns)))
Base.getproperty(f::Frame, name::Symbol) = getfield(f, :columns)[name]

plain = small_study(mutual = true)
@test plain.members == [3, 2]
@test plain.links == [4, 2]
@test columns(plain) === NamedTuple(plain)
@test propertynames(plain)[1:3] == (:community, :members, :links)
@test all(isnan, plain.turnout_observed)

# Every kind of table gives the same study, whatever the order of its columns.
m, l = two_communities(), few_links()
as_dict(t) = Dict(pairs(t))
as_text_dict(t) = Dict(String(k) => v for (k, v) in pairs(t))
as_frame(t) = Frame(Dict{Symbol,Vector}(pairs(t)))
as_any(t) = map(column -> Vector{Any}(column), t)
as_missing(t) = map(column -> Vector{Union{Missing,eltype(column)}}(column), t)
digests(st) = provenance(st).inputs
for form in (as_dict, as_text_dict, as_frame, as_any, as_missing)
    @test digests(study(form(m), form(l); mutual = true)) == digests(plain)
end
@test digests(study(m; links = l, mutual = true)) == digests(plain)

# Other columns are left alone, whatever they hold.
@test digests(study(merge(m, (note = [(1, 2) for _ in 1:5],)), l; mutual = true)) == digests(plain)

# Ids come back in the caller's type; 7 and "7" are one member.
b = some_beliefs()
for (convert_id, type) in ((identity, Int), (Float64, Float64), (string, String), (x -> Symbol("m", x), Symbol),
                           (x -> 'a' + x, Char), (Int32, Int32), (big, BigInt))
    st = study((community = m.community, member = convert_id.(m.member)),
               (community = l.community, listener = convert_id.(l.listener), speaker = convert_id.(l.speaker)))
    rows = columns(equilibrium(st, b); level = :member)
    @test rows.member == convert_id.(m.member) && eltype(rows.member) == type
    @test rows.community == m.community
end
mixed = study((community = [7, 7], member = ["1", "2"]), (community = ["7"], listener = [1.0], speaker = [2]))
@test mixed.links == [1] && mixed.community == [7]
large = study((community = [2^53, 2^53], member = [2.0^53, 1e5]),)
@test large.community == [2^53] && columns(equilibrium(large, b); level = :member).member == [2.0^53, 1e5]

# Matrices for links: i listens to j.
A = sparse([1, 2, 4], [2, 3, 5], [1.0, 2.0, 0.5], 5, 5)
blocks = [A[1:3, 1:3], A[4:5, 4:5]]
listens(st) = (st.links, st.hears_mean)
for links in (A, Matrix(A), blocks, Dict("north" => blocks[1], "south" => blocks[2]), A .!= 0)
    @test listens(study(m, links)) == listens(study(m, l))
end
same(a, b) = columns(a; level = :member) == columns(b; level = :member)
@test same(equilibrium(study(m, A), b), equilibrium(study(m, l), b))
@test refused(() -> study(m, A[1:4, 1:4]), :FOLKMOTE_BAD_DATA, "links", "4 by 4", "5 by 5")
@test refused(() -> study(m, blocks[1:1]), :FOLKMOTE_BAD_DATA, "links", "2 communities")
@test refused(() -> study(m, Dict("east" => blocks[1])), :FOLKMOTE_BAD_DATA, "links", "east")
@test refused(() -> study(m, l; links = l), :FOLKMOTE_BAD_ARGUMENT, "twice")

# Turnout as seen, weighted; broadcasts and gatherings are counted.
seen = study(merge(m, (turnout = [1, 0, missing, missing, missing], weight = [3, 1, 1, 1, 1])), l;
             broadcasts = (community = fill("north", 2), broadcast = [1, 1], member = [1, 2], precision = [2, 2]),
             gatherings = (community = fill("south", 2), gathering = [1, 1], member = [1, 2]))
@test seen.turnout_observed[1] == 0.75 && isnan(seen.turnout_observed[2])
@test seen.turnout_missing == [1, 2] && seen.broadcasts == [1, 0] && seen.gatherings == [0, 1]

@test refused(() -> plain.turnout, :FOLKMOTE_BAD_ARGUMENT, "turnout", "community")
