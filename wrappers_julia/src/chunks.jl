# Plays in chunks: any split of the replications, over any engine, merges to the very table of the single run.

"""
    split_draws(draws, chunks)

Replications `1:draws` in `chunks` ranges of nearly equal length.

# Example
```julia
split_draws(10, 3) # 1:3, 4:6 and 7:10
```
"""
function split_draws(draws, chunks)
    total, parts = whole(draws, "draws"), whole(chunks, "chunks")
    1 <= parts <= total || refuse("chunks = $chunks cannot be used: it is a whole number from 1 to draws.")
    ends = [div(total * k, parts) for k in 0:parts]
    return [(ends[k] + 1):ends[k + 1] for k in 1:parts]
end

"""
    run_chunk(eq, indices, seed, file; scenario = nothing, given = nothing, level = :community, threads)

Play the replications `indices` (consecutive, from 1) of an equilibrium, or with a `scenario` those of the baseline beside
it, into `file`: library and stream version, seed, range and digest of the inputs stand in its header, and it is
renamed into place when it is whole. Returns whether anything was computed: a whole file of the same run is left as it is, so that what
was killed can be run again. Bytes do not depend on who runs which part: merge with [`merge_chunks`](@ref).

# Example
```julia
files = ["part-\$k.chunk" for k in 1:4]
for (indices, file) in zip(split_draws(10_000, 4), files)
    run_chunk(eq, indices, 7, file)
end
plays = merge_chunks(eq, files, 10_000)
```
"""
function run_chunk(eq::Equilibrium, indices, seed, file; scenario = nothing, given = nothing, level = :community,
                   threads = default_threads())
    seed === nothing && refuse("seed = nothing cannot be used: chunks that are to be merged need one seed.")
    low, high = range_given(given)
    first_draw, draws = range_of(indices)
    used, level_number, computed = the_seed(seed), LEVELS[checked_level(level)], Ref{Cint}(0)
    watched("run_chunk"; threads = threads) do options, message
        Raw.folkmote_chunk_run(handle_of(eq), scenario_or_null(scenario), first_draw, draws, used, low, high,
                               level_number, options, String(file), computed, message)
    end
    return computed[] == 1
end

scenario_or_null(::Nothing) = Ptr{Raw.folkmote_scenario}(C_NULL)
scenario_or_null(sc::Scenario) = handle_of(sc)

function range_of(indices)
    isempty(indices) && refuse("indices are empty; give consecutive replications from 1, such as 101:200.")
    indices == first(indices):last(indices) && whole(first(indices), "indices") >= 1 ||
        refuse("indices = $(repr(indices)) cannot be used: they are consecutive whole numbers from 1, such as 101:200.")
    return Int64(first(indices)) - 1, Int64(length(indices))
end

"""
    run_chunks(eq, draws, seed, folder; chunks = 10, map = map, scenario = nothing, given = nothing, level = :community)
    run_chunks(make, draws, seed, folder; …)

Run `draws` replications in `chunks` files of `folder`, then merge them: the table of `simulate(eq; nsim = draws, seed = seed)`
(with a `scenario`, the plays of both sides). Files that are there already are not computed again. `map` runs the parts:
`Distributed.pmap` spreads them over workers. Objects of the kernel do not travel between processes, so that there `make` is a
function that gives the equilibrium, or an `(equilibrium, scenario)`, on the worker, where it is called once.

# Example
```julia
using Distributed; addprocs(4); @everywhere using Folkmote
@everywhere make() = equilibrium(study(members, links), beliefs(prior_mean = 0.4, prior_precision = 1, signal_precision = 4))
run_chunks(make, 100_000, 7, "chunks"; map = pmap)
```
"""
run_chunks(eq::Equilibrium, draws, seed, folder; scenario = nothing, settings...) =
    run_parts(() -> (eq, scenario), () -> (eq, scenario), draws, seed, folder; settings...)
function run_chunks(make, draws, seed, folder; settings...)
    run = string(time_ns(), "-", rand(Random.RandomDevice(), UInt64))
    return run_parts(() -> made_once(make, run), () -> made_once(make, run), draws, seed, folder; settings...)
end

function run_parts(on_worker, here, draws, seed, folder; chunks = 10, map = Base.map, given = nothing,
                   level = :community, threads = 1)
    isdir(folder) || refuse("folder = $(repr(folder)) cannot be used: there is no such folder.")
    parts = split_draws(draws, chunks)
    files = [joinpath(abspath(folder), chunk_name(part, draws)) for part in parts]
    map(zip(parts, files)) do (part, file)
        eq, scenario = on_worker()
        run_chunk(eq, part, seed, file; scenario = scenario, given = given, level = level, threads = threads)
    end
    return merge_chunks(first(here()), files, draws)
end

function chunk_name(part, draws)
    width = ndigits(draws)
    return "draws-$(lpad(first(part), width, '0'))-$(lpad(last(part), width, '0')).chunk"
end

# What this process has made for the run it works on; only the last run is kept.
const MADE = Dict{String,Any}()

function made_once(make, run)
    haskey(MADE, run) && return MADE[run]
    empty!(MADE)
    made = make()
    return MADE[run] = made isa Tuple ? made : (made, nothing)
end

"""
    merge_chunks(eq, files, draws)

The table of replications `1:draws` from their chunk files, in any order: the very table of the single run. Refuses, naming the
file or the draws, what is missing, stands twice, is damaged, or differs in version, stream version, inputs or seed.

# Example
```julia
merge_chunks(eq, readdir("chunks"; join = true), 10_000)
```
"""
function merge_chunks(eq::Equilibrium, files, draws)
    began = time()
    paths = String[String(file) for file in files]
    seed = parse(Int64, first(described(paths).seed))
    table = Handle{Raw.folkmote_table}()
    with_pointers(paths) do pointers
        check(message -> Raw.folkmote_chunk_merge(length(paths), pointers, FIRST_DRAW, whole(draws, "draws"), table, message))
    end
    found, digest = taken(table, ids_of(study_of(eq)))
    record = Provenance("run_chunks", began; seed = seed, result = digest, inputs = inputs_of(eq),
                        settings = settings_text(draws = draws))
    return haskey(found, :scenario_least) ? PairedPlays(found, record) : Simulation(found, cells_of(eq), record)
end

"Plays of a baseline and its scenario on the same draws."
struct PairedPlays <: Result
    table::NamedTuple
    record::Provenance
end

function page(plays::PairedPlays, most)
    table = table_of(plays)
    names = [string(name) for name in keys(table)]
    rows = [[string(column[k]) for column in table] for k in shown_rows(table, most)]
    return Page("Plays of baseline and scenario, seed $(record_of(plays).seed)", names, rows, String[], length(first(table)))
end

described(paths) = with_pointers(paths) do pointers
    first(read_result((table, message) -> Raw.folkmote_chunk_table(length(paths), pointers, table, message),
                      IdTypes(Int64, Int64)))
end

with_pointers(call, paths) = GC.@preserve paths call(Ptr{UInt8}[pointer(path) for path in paths])
