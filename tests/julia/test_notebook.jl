# The notebook runner reads notebooks, and the example notebook runs.

@test run_notebook(joinpath(ROOT, "tests", "julia", "small.ipynb")) == ["\"20/\\\"\"", "21"]

example = joinpath(ROOT, "examples", "holdout", "holdout.ipynb")
if isfile(example)
    room = cp(dirname(example), joinpath(mktempdir(), "holdout")) # it writes its results beside itself
    outputs = run_notebook(joinpath(room, basename(example)))
    @test !isempty(outputs) && any(output -> occursin("<svg", output), outputs)
else
    @info "there is no example notebook yet" example
end
