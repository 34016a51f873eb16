#!/usr/bin/env bash
# All tests: C++, C, R, Julia, and the agreement between the languages. Installs what it needs on Debian 12.
# Usage: tests/run.sh [--setup-only] [--skip-setup] [room ...]   rooms: format kernel capi r julia agreement cluster bits
set -uo pipefail
cd "$(dirname "${BASH_SOURCE[0]}")/.."
root=$PWD
export FOLKMOTE_BUILD=${FOLKMOTE_BUILD:-$root/build}
export FOLKMOTE_R_LIBRARY=$FOLKMOTE_BUILD/r-library
export FOLKMOTE_LIBRARY=$FOLKMOTE_BUILD/libfolkmote.so
export OMP_THREAD_LIMIT=2

setup=yes
only=no
rooms=()
for argument in "$@"; do
  case $argument in
    --setup-only) only=yes ;;
    --skip-setup) setup=no ;;
    *) rooms+=("$argument") ;;
  esac
done
[ ${#rooms[@]} -gt 0 ] || rooms=(format kernel capi r julia agreement cluster bits)

if [ "$setup" = yes ]; then .ci/setup.sh tests || exit 1; fi
[ "$only" = no ] || exit 0

mkdir -p "$FOLKMOTE_BUILD"
log=$FOLKMOTE_BUILD/tests.log
: >"$log"
passed=0
failed=0

# Runs one room's command, shows what it says, and adds up its closing line "<room>: N passed, N failed". A room that
# ends without that line, or with another exit code than its line asks for, counts as one failure.
room() {
  local name=$1
  shift
  local begin=$SECONDS output=$FOLKMOTE_BUILD/tests-$name.log
  "$@" >"$output" 2>&1
  local code=$?
  cat "$output" >>"$log"
  local line
  line=$(grep -E "^$name: [0-9]+ passed, [0-9]+ failed$" "$output" | tail -n 1)
  if [ -z "$line" ] || { [ "$code" != 0 ] && [[ $line == *" 0 failed" ]]; }; then
    tail -n 40 "$output"
    echo "$name: ended with code $code and no trustworthy count; counted as one failure"
    failed=$((failed + 1))
    return
  fi
  [[ $line == *" 0 failed" ]] || tail -n 60 "$output"
  echo "$line ($((SECONDS - begin)) s)"
  passed=$((passed + $(echo "$line" | sed -E 's/.*: ([0-9]+) passed.*/\1/')))
  failed=$((failed + $(echo "$line" | sed -E 's/.* ([0-9]+) failed/\1/')))
}

build() {
  cmake -S "$root" -B "$FOLKMOTE_BUILD" -G Ninja -DFOLKMOTE_TESTS=ON && cmake --build "$FOLKMOTE_BUILD"
}

kernel() {
  # Counts test cases: one case may hold a million comparisons.
  local output
  output=$("$FOLKMOTE_BUILD/tests/kernel_tests" 2>&1)
  local code=$?
  echo "$output"
  if echo "$output" | grep -q '^All tests passed'; then
    echo "kernel: $(echo "$output" | sed -nE 's/.* in ([0-9]+) test cases?\)/\1/p') passed, 0 failed"
  else
    local all bad
    all=$(echo "$output" | sed -nE 's/^test cases: *([0-9]+) .*/\1/p')
    bad=$(echo "$output" | sed -nE 's/^test cases:.* ([0-9]+) failed.*/\1/p')
    [ -n "$all" ] && echo "kernel: $((all - ${bad:-1})) passed, ${bad:-1} failed"
  fi
  return $code
}

format() {
  if .ci/format.sh; then echo "format: 1 passed, 0 failed"; else echo "format: 0 passed, 1 failed" && return 1; fi
}

r_package() {
  wrappers_r/bundle.sh && mkdir -p "$FOLKMOTE_R_LIBRARY" &&
    R CMD INSTALL --no-test-load --library="$FOLKMOTE_R_LIBRARY" "$FOLKMOTE_BUILD"/r/folkmote_*.tar.gz
}

if ! build >"$FOLKMOTE_BUILD/build.log" 2>&1; then
  grep -E 'error|FAILED' -A 5 "$FOLKMOTE_BUILD/build.log" | head -n 60
  echo "the build failed; see build.log in the build folder"
  echo "0 passed, 1 failed"
  exit 1
fi
if [[ " ${rooms[*]} " =~ " r " || " ${rooms[*]} " =~ " agreement " || " ${rooms[*]} " =~ " cluster " ]] && ! r_package >"$FOLKMOTE_BUILD/r-package.log" 2>&1; then
  tail -n 40 "$FOLKMOTE_BUILD/r-package.log"
  echo "the R package did not install; its tests will say so"
fi

for name in "${rooms[@]}"; do
  case $name in
    format) room format format ;;
    kernel) room kernel kernel ;;
    capi) room capi tests/capi/run.sh ;;
    r) room R Rscript tests/r/run.R ;;
    julia) room Julia .ci/julia.sh --project=wrappers_julia tests/julia/runtests.jl ;;
    agreement) room agreement tests/agreement/run.sh ;;
    cluster) room cluster tests/cluster/run.sh ;;
    bits) room bits tests/bits/run.sh ;;
    *) echo "there is no room of tests called $name" && failed=$((failed + 1)) ;;
  esac
done

echo "$passed passed, $failed failed"
[ "$failed" = 0 ]
