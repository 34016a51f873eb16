# How the three programs are built and run; sourced by examples/run.sh and tests/agreement/run.sh.
# They set: root (the repository), build (the build folder), r_library (where the R package is installed).
# Each function takes the results file, and the number of threads (default 2).

export JULIA_DEPOT_PATH="${JULIA_DEPOT_PATH:-$build/julia-depot:}" # compiled Julia code stays in the build folder

# compile <program> <source>: plain C11 against the header and the shared library.
compile() {
  "${CC:-cc}" -std=c11 -O2 -Wall -Wextra -Wpedantic -Werror -I"$root/capi/include" -I"$root/examples/holdout" "$2" \
    -o "$1" -L"$build" -lfolkmote -lm "-Wl,-rpath,$build"
}

run_c() { "$build/holdout/holdout" "$root/examples/holdout/data" "$1" "${2:-2}"; }

run_r() {
  R_LIBS="$r_library" HOLDOUT_THREADS="${2:-2}" \
    Rscript --vanilla "$root/examples/holdout/holdout.R" "$1" "${3:-$build/holdout/holdout.png}"
}

# The cells of the notebook in order, as a notebook would run them; the pictures that they show go to standard output.
run_julia() {
  FOLKMOTE_LIBRARY="$build/libfolkmote.so" FOLKMOTE_BUILD="$build" HOLDOUT_RESULTS="$1" HOLDOUT_THREADS="${2:-2}" \
    "$root/.ci/julia.sh" --startup-file=no --project="$root/wrappers_julia" "$root/tests/julia/notebook_runner.jl" \
    "$root/examples/holdout/holdout.ipynb"
}
