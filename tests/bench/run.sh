#!/usr/bin/env bash
# Measures speed as ratios within one run on this machine, and prints the tables. Run it on an otherwise idle machine.
# Usage: tests/bench/run.sh [largest community, default 100000]
set -euo pipefail
cd "$(dirname "${BASH_SOURCE[0]}")/../.."
build=${FOLKMOTE_BUILD:-$PWD/build}
cmake -S . -B "$build" -G Ninja -DFOLKMOTE_BENCH=ON >/dev/null
cmake --build "$build" >/dev/null
"$build/tests/bench/bench_normal"
Rscript tests/bench/bench_normal.R

echo "a full solve of 2,000 members, both ends to 1e-10, one thread: seconds, and how many times folkmote's"
{
  "$build/tests/bench/bench_dense" 2000 "$build/bench_links.txt"
  Rscript tests/bench/bench_dense.R 2000 "$build/bench_links.txt"
  .ci/julia.sh --startup-file=no tests/bench/bench_dense.jl 2000 "$build/bench_links.txt"
} | awk '$1 == "folkmote" { ours = $2 } NF == 2 { printf "%-9s %10.3f s %8.0f x\n", $1, $2, $2 / ours } NF > 2'

for members in 1000; do
  echo "plays of $members members, one thread: seconds, and how many times folkmote's"
  {
    "$build/tests/bench/bench_plays" "$members" 10000 "$build/bench_links.txt"
    Rscript tests/bench/bench_plays.R "$members" 10000 "$build/bench_links.txt"
    .ci/julia.sh --startup-file=no tests/bench/bench_plays.jl "$members" 10000 "$build/bench_links.txt"
  } | awk '$1 == "folkmote" { ours = $2 } NF == 2 { printf "%-9s %10.3f s %8.1f x\n", $1, $2, $2 / ours } NF > 2'
done

"$build/tests/bench/bench_engine" "${1:-100000}"
"$build/tests/bench/bench_sensitivity"
