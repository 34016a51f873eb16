# The raw layer says what the header says: every function, argument, number.

const HEADER = read(joinpath(ROOT, "capi", "include", "folkmote.h"), String)
const CODE = replace(HEADER, r"/\*.*?\*/"s => "")

"The Julia type of a C type of the header."
function julia_type(c)
    c = strip(replace(replace(c, r"\s+" => " "), r" ?\* ?" => "*"))
    plain = Dict("int" => Cint, "int64_t" => Int64, "uint64_t" => UInt64, "size_t" => Csize_t, "double" => Float64,
                 "void" => Cvoid, "folkmote_status" => Cint, "char*" => Ptr{UInt8}, "const char*" => Cstring,
                 "const char*const*" => Ptr{Ptr{UInt8}}, "const char**" => Ptr{Ptr{UInt8}}, "void*" => Ptr{Cvoid},
                 "folkmote_progress" => Ptr{Cvoid}, "double*" => Ptr{Float64}, "const double*" => Ptr{Float64},
                 "int64_t*" => Ptr{Int64}, "const int64_t*" => Ptr{Int64}, "int*" => Ptr{Cint},
                 "const int*" => Ptr{Cint})
    haskey(plain, c) && return plain[c]
    handle = match(r"^(?:const )?(folkmote_\w+?)(\*+)$", c)
    type = Ptr{getfield(Raw, Symbol(handle[1]))}
    return handle[2] == "**" ? Ptr{type} : type
end

argument_types(list) = strip(list) == "void" ? [] :
    [julia_type(replace(argument, r"\w+\s*$" => "")) for argument in split(list, ',')]

const DECLARED = [(Symbol(m[2]), julia_type(m[1]), argument_types(m[3]))
                  for m in eachmatch(r"FOLKMOTE_API\s+([\w\s\*]+?)\b(folkmote_\w+)\(([^)]*)\)", CODE)]

@test length(DECLARED) > 40
@test Set(first.(DECLARED)) == Set(keys(Raw.FUNCTIONS))
for (name, returns, takes) in DECLARED
    entry = Raw.FUNCTIONS[name]
    @test (name, entry.returns, entry.takes) == (name, returns, takes)
    @test entry.address[] != C_NULL
end

for m in eachmatch(r"\b(FOLKMOTE_[A-Z_]+)\s*=\s*(\d+)", CODE)
    @test (m[1], getfield(Raw, Symbol(m[1]))) == (m[1], parse(Int, m[2]))
end
for m in eachmatch(r"#define (FOLKMOTE_(?:VERSION|STREAM_VERSION|MESSAGE_BYTES)) \"?([\w.]+)", CODE)
    @test string(getfield(Raw, Symbol(m[1]))) == m[2]
end

# The status words, and the bounds that the docstrings state.
@test unsafe_string(Raw.folkmote_status_name(Raw.FOLKMOTE_BAD_DATA)) == "FOLKMOTE_BAD_DATA"
@test unsafe_string(Raw.folkmote_status_text(12345)) == "unknown status"

function bounds(parameter)
    low, high, low_open, high_open = Ref(0.0), Ref(0.0), Ref{Cint}(0), Ref{Cint}(0)
    Folkmote.check(m -> Raw.folkmote_parameter_bounds(parameter, low, high, low_open, high_open, m))
    return low[], high[], low_open[], high_open[]
end

@test bounds(Raw.FOLKMOTE_PRIOR_PRECISION)[[1, 3]] == (0.0, 1)
@test bounds(Raw.FOLKMOTE_REACH) == (0.0, 1.0, 0, 0)
@test refused(() -> bounds(999), :FOLKMOTE_BAD_ARGUMENT)

# Destroying nothing does nothing.
@test Raw.folkmote_table_destroy(C_NULL) === nothing
@test Raw.folkmote_table_digest(C_NULL) == 0
