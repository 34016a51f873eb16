# julia --project=wrappers_julia tests/julia/runtests.jl
# The library is that of FOLKMOTE_LIBRARY, else build/libfolkmote.so of this repository.
const ROOT = dirname(dirname(@__DIR__))

if isempty(get(ENV, "FOLKMOTE_LIBRARY", ""))
    ENV["FOLKMOTE_LIBRARY"] = joinpath(ROOT, "build", "libfolkmote.so")
end

using Test, Random, SparseArrays, Logging
using Folkmote
using Folkmote: Raw, FolkmoteError

include("fixtures.jl")
include("oracle.jl")
include("notebook_runner.jl")

const FILES = ["test_raw.jl", "test_load.jl", "test_study.jl", "test_bad_input.jl", "test_equilibrium.jl",
               "test_oracle.jl", "test_turnout.jl", "test_sensitivity.jl", "test_scenario.jl", "test_seeds.jl",
               "test_handles.jl", "test_chunks.jl",
               "test_display.jl", "test_interrupt.jl", "test_notebook.jl"]

passed(set) = set.n_passed + sum(Int[passed(inner) for inner in set.results if inner isa Test.DefaultTestSet])

"Passed and failed tests of everything."
function run_all()
    try
        set = @testset "Folkmote" begin
            for file in FILES
                @testset "$file" begin
                    include(file)
                end
            end
        end
        return passed(set), 0
    catch problem
        problem isa Test.TestSetException || rethrow()
        return problem.pass, problem.fail + problem.error
    end
end

const COUNTS = run_all()
println("Julia: $(COUNTS[1]) passed, $(COUNTS[2]) failed")
exit(COUNTS[2] == 0 ? 0 : 1)
