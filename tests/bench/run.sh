#!/usr/bin/env bash
# Measures speed as ratios within one run on this machine, and prints the tables. Run it on an otherwise idle machine.
set -euo pipefail
cd "$(dirname "${BASH_SOURCE[0]}")/../.."
build=${FOLKMOTE_BUILD:-$PWD/build}
cmake -S . -B "$build" -G Ninja -DFOLKMOTE_BENCH=ON >/dev/null
cmake --build "$build" >/dev/null
"$build/tests/bench/bench_normal"
Rscript tests/bench/bench_normal.R
