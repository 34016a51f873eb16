"""
    provenance(x)

The block that a data editor asks for, of a study, a result or a scenario: versions of package and
kernel, stream version (it changes whenever any draw changes), seed, digests of inputs and of the
result, settings, run time, machine and time. Prints as text; `string(provenance(x))` is that text, and
its fields can be read one by one, as in `provenance(cf).seed`. Equal inputs, seed and version give equal
digests in Julia and in R, for any number of threads.

# Example
```julia
print(provenance(counterfactual(eq, scenario(st, broadcast(precision = 2)); seed = 7)))
```
"""
provenance(x) = record_of(x)

struct Provenance
    verb::String
    seed::Union{Nothing,Int64}
    inputs::Vector{Pair{String,UInt64}} # what it was made from
    result::Union{Nothing,UInt64}       # digest of the result table
    settings::Vector{Pair{String,String}}
    seconds::Float64
    version::String
    stream_version::Int
    julia::String
    machine::String
    time::Dates.DateTime # UTC
end

function Provenance(verb, began; seed = nothing, inputs = Pair{String,UInt64}[], result = nothing,
                    settings = Pair{String,String}[])
    return Provenance(verb, seed, inputs, result, settings, time() - began,
                      unsafe_string(Raw.folkmote_version()), Raw.folkmote_stream_version(),
                      string(VERSION), machine(), Dates.now(Dates.UTC))
end

function machine()
    processor = strip(first(Sys.cpu_info()).model)
    return "$(Sys.KERNEL) $(Sys.ARCH), $processor, $(Sys.CPU_THREADS) hardware threads"
end

hexadecimal(digest) = string(digest; base = 16, pad = 16)

function lines(record::Provenance)
    found = ["made by" => record.verb,
             "folkmote" => "$(record.version), stream version $(record.stream_version)",
             "Julia" => record.julia, "machine" => record.machine,
             "time (UTC)" => Dates.format(record.time, "yyyy-mm-dd HH:MM:SS"),
             "run time" => @sprintf("%.3f s", record.seconds),
             "seed" => record.seed === nothing ? "none used" : string(record.seed)]
    append!(found, record.settings)
    append!(found, ["digest of $name" => hexadecimal(digest) for (name, digest) in record.inputs])
    record.result === nothing || push!(found, "digest of the result" => hexadecimal(record.result))
    return found
end

function Base.show(io::IO, record::Provenance)
    found = lines(record)
    width = maximum(length(name) for (name, _) in found)
    for (position, (name, text)) in enumerate(found)
        position > 1 && println(io)
        print(io, rpad(name, width), "  ", text)
    end
end
