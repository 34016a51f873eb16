#!/usr/bin/env bash
# One answer, whoever asks: the three programs of examples/holdout give the same bytes in C, R and Julia, with any number of
# threads and however the draws are split, and the committed data are what their script makes.
# Usage: tests/agreement/run.sh
#   FOLKMOTE_BUILD      folder with libfolkmote.so (default: build/)
#   FOLKMOTE_R_LIBRARY  folder in which the R package is installed (default: r-library/ of the build folder)
set -euo pipefail

root=$(cd "$(dirname "${BASH_SOURCE[0]}")/../.." && pwd)
build=$(cd "${FOLKMOTE_BUILD:-$root/build}" && pwd)
r_library=${FOLKMOTE_R_LIBRARY:-$build/r-library}
data=$root/examples/holdout/data
# shellcheck source=../../examples/holdout/programs.sh
. "$root/examples/holdout/programs.sh"

work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
passed=0
failed=0

# check <what> <command>: one line for each, with the command's own words when it fails.
check() {
  local what=$1
  shift
  if "$@" >"$work/log" 2>&1; then
    passed=$((passed + 1))
    echo "ok      $what"
  else
    failed=$((failed + 1))
    echo "FAILED  $what"
    tail -n 15 "$work/log" | cut -c -300 | sed 's/^/        /'
  fi
}

same_data() {
  R_LIBS="$r_library" Rscript --vanilla "$root/examples/holdout/make_data.R" "$work/data" && diff -rq "$data" "$work/data"
}

plays() { "$work/plays" "$data" "$@"; }

# A range of draws in one go against the same range in three parts of unequal size, by different numbers of threads.
same_in_parts() {
  local level=$1 draws=$2 first=$3
  plays "$level" 0 "$draws" 1 | LC_ALL=C sort >"$work/whole"
  { plays "$level" 0 "$first" 3 && plays "$level" "$first" 1 1 && plays "$level" "$((first + 1))" "$((draws - first - 1))" 2; } |
    LC_ALL=C sort >"$work/parts"
  [ -s "$work/whole" ] && cmp "$work/whole" "$work/parts"
}

complete() { [ "$(wc -l <"$1")" = 148 ] && ! grep -q 'not converged\|NaN' "$1"; }
shows_picture() { grep -q '<svg' "$work/julia.txt"; }
says_the_same() { diff <(grep '^  [a-z]' "$work/c.txt" | head -n 7) <(grep '^  [a-z]' "$1" | head -n 7); }
refuses() { ! "$work/holdout" "$work" "$work/none.csv" 2>"$work/refusal" && grep -q 'members.csv cannot be read' "$work/refusal"; }

# Digests of the derivatives by community, by member and by link, one a line.
derivatives_c() { "$work/derivatives" "$data" "$1" >"$work/derivatives$1.txt" && [ "$(wc -l <"$work/derivatives$1.txt")" = 3 ]; }
derivatives_agree() { [ -s "$work/derivatives2.txt" ] && "$@" >"$work/others.txt" && diff "$work/derivatives2.txt" "$work/others.txt"; }
derivatives_r() { R_LIBS="$r_library" Rscript --vanilla "$root/tests/agreement/derivatives.R" "$data"; }
derivatives_julia() {
  FOLKMOTE_LIBRARY="$build/libfolkmote.so" "$root/.ci/julia.sh" --startup-file=no --project="$root/wrappers_julia" \
    "$root/tests/agreement/derivatives.jl" "$data"
}

mkdir -p "$build/holdout"
check "holdout.c compiles as plain C11 without a warning" compile "$build/holdout/holdout" "$root/examples/holdout/holdout.c"
check "first_steps.c compiles" compile "$work/first_steps" "$root/examples/first_steps.c"
check "first_steps.c runs" "$work/first_steps"
check "plays.c compiles" compile "$work/plays" "$root/tests/agreement/plays.c"
cp "$build/holdout/holdout" "$work/holdout" 2>/dev/null || true

in_c() { run_c "$work/c.csv" 2 >"$work/c.txt"; }
in_r() { run_r "$work/r.csv" 2 "$work/holdout.png" >"$work/r.txt"; }
in_julia() { run_julia "$work/julia.csv" 2 >"$work/julia.txt"; }
check "the C program runs" in_c
check "its results are complete and converged" complete "$work/c.csv"
check "the R script runs" in_r
check "it makes a picture" test -s "$work/holdout.png"
check "the notebook runs" in_julia
check "it shows a picture" shows_picture
check "C and R give the same bytes" cmp "$work/c.csv" "$work/r.csv"
check "C and Julia give the same bytes" cmp "$work/c.csv" "$work/julia.csv"
check "C and R print the same answers" says_the_same "$work/r.txt"
check "C and Julia print the same answers" says_the_same "$work/julia.txt"

in_c_threads() { run_c "$work/c$1.csv" "$1" >/dev/null && cmp "$work/c.csv" "$work/c$1.csv"; }
in_r_threads() { run_r "$work/r$1.csv" "$1" "$work/r$1.png" >/dev/null && cmp "$work/c.csv" "$work/r$1.csv"; }
check "one thread gives the same bytes in C" in_c_threads 1
check "five threads give the same bytes in C" in_c_threads 5
check "one thread gives the same bytes in R" in_r_threads 1

check "plays by community in parts equal the whole" same_in_parts 1 41 13
check "plays by member in parts equal the whole" same_in_parts 2 5 2
check "derivatives.c compiles" compile "$work/derivatives" "$root/tests/agreement/derivatives.c"
check "derivatives in C with two threads" derivatives_c 2
check "one thread gives the same derivatives" derivatives_c 1
check "byte for byte" cmp "$work/derivatives2.txt" "$work/derivatives1.txt"
check "R gives the same derivatives" derivatives_agree derivatives_r
check "Julia gives the same derivatives" derivatives_agree derivatives_julia
check "make_data.R makes the committed data again" same_data
check "a missing table is refused by name" refuses

echo "agreement: $passed passed, $failed failed"
[ "$failed" = 0 ]
