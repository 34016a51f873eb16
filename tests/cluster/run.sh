#!/usr/bin/env bash
# One answer over any engine: the examples of examples/cluster on a real single-node Slurm (a plain array, batchtools through
# a future plan), on future workers and on Julia's Distributed workers give the digest of the single run, also when
# they are killed in the middle and run again.
# Usage: tests/cluster/run.sh      FOLKMOTE_BUILD and FOLKMOTE_R_LIBRARY as in tests/run.sh
set -uo pipefail
root=$(cd "$(dirname "${BASH_SOURCE[0]}")/../.." && pwd)
export FOLKMOTE_BUILD=${FOLKMOTE_BUILD:-$root/build}
export FOLKMOTE_LIBRARY=$FOLKMOTE_BUILD/libfolkmote.so
export R_LIBS=${FOLKMOTE_R_LIBRARY:-$FOLKMOTE_BUILD/r-library}
example=$root/examples/cluster
# shellcheck source=slurm.sh
. "$root/tests/cluster/slurm.sh"
work=$(mktemp -d)
chmod 755 "$work"
finish() {
  slurm_stop
  rm -rf "$work"
}
trap finish EXIT
passed=0
failed=0
check() {
  local what=$1
  shift
  if "$@" >"$work/log" 2>&1; then
    passed=$((passed + 1))
    echo "ok      $what"
  else
    failed=$((failed + 1))
    echo "FAILED  $what"
    tail -n 20 "$work/log" | sed 's/^/        /'
  fi
}

draws=2000
julia() { "$root/.ci/julia.sh" --startup-file=no --project="$root/wrappers_julia" "$@"; }
# The digest of the result as either language prints it.
digest_in() { sed -nE 's/^digest of (the )?result:? +([0-9a-f]{16})$/\2/p' "$1"; }

Rscript -e "source('$example/study.R'); print(provenance(simulate(eq, nsim = $draws, seed = seed)))" >"$work/single" 2>&1
single=$(digest_in "$work/single")
is_single() { [ -n "$single" ] && [ "$(digest_in "$1")" = "$single" ]; }
check "the single run has a digest" test -n "$single"

merged() { Rscript "$example/merge.R" "$1" "$draws" >"$work/merged" 2>&1 || { cat "$work/merged"; return 1; }; is_single "$work/merged"; }
array() { (cd "$example" && FOLDER=$work/array DRAWS=$draws sbatch --parsable --output="$work/array-%a.out" --array=1-"$1" array.sbatch) >"$work/job"; }

# ---- Slurm
check "a single-node Slurm starts" slurm_start "$work/slurm"
whole_array() { mkdir -p "$work/array" && array 3 && slurm_wait && cat "$work"/array-*.out && merged "$work/array"; }
check "a plain array of 3 tasks gives the digest of the single run" whole_array
untouched() { ls -l --time-style=full-iso "$1"; }
again() {
  local before
  before=$(untouched "$work/array")
  array 3 && slurm_wait && [ "$(untouched "$work/array")" = "$before" ] && grep -q 'already there' "$work"/array-2.out
}
check "the same array again computes nothing" again
lost_one() { rm "$work/array/part-0002.chunk" && ! merged "$work/array" && grep -q 'are in none of the files' "$work/merged"; }
check "a lost chunk is named, not merged over" lost_one
check "and made again" whole_array

cat >"$work/slurm.tmpl" <<'TEMPLATE'
#!/bin/bash
#SBATCH --job-name=<%= job.name %>
#SBATCH --output=<%= log.file %>
#SBATCH --ntasks=1
Rscript -e 'batchtools::doJobCollection("<%= uri %>")'
TEMPLATE
through_batchtools() {
  mkdir -p "$work/batchtools" && (cd "$work" && Rscript "$example/future.R" batchtools "$draws" "$work/slurm.tmpl") >"$work/out" 2>&1 ||
    { cat "$work/out"; return 1; }
  is_single "$work/out"
}
check "batchtools on Slurm, through a future plan, gives the digest of the single run" through_batchtools

# ---- Workers
through_future() { mkdir "$work/future" && Rscript "$example/future.R" "$work/future" "$draws" >"$work/out" 2>&1; cat "$work/out"; is_single "$work/out"; }
check "future workers give the digest of the single run" through_future
through_julia() { mkdir "$work/julia" && julia "$example/workers.jl" "$work/julia" "$draws" >"$work/out" 2>&1; cat "$work/out"; is_single "$work/out"; }
check "Distributed workers give the digest of the single run in R" through_julia
mixed() { mkdir "$work/mixed" && cp "$work"/future/draws-*[05]00.chunk "$work"/mixed/ && cp "$work"/julia/draws-0001-* "$work"/mixed/ && merged "$work/mixed"; }
check "chunks made by R and by Julia merge with each other" mixed

# ---- Killed in the middle
# A process that makes chunks one after the other is killed with SIGKILL as soon as the first stands there; what stood is kept.
killed() {
  local folder=$1 pid n before
  shift
  mkdir "$folder"
  "$@" >"$work/out" 2>&1 &
  pid=$!
  for n in $(seq 3000); do
    [ -n "$(find "$folder" -name '*.chunk' -print -quit)" ] && break
    sleep 0.01
  done
  kill -KILL "$pid"
  wait "$pid" 2>/dev/null
  before=$(find "$folder" -name '*.chunk' -printf '%f %T@\n' | sort)
  [ -n "$before" ] || { cat "$work/out"; return 1; }
  [ "$(echo "$before" | wc -l)" -lt "$chunks" ] || { echo "nothing was left to do"; return 1; }
  "$@" >"$work/out" 2>&1 || { cat "$work/out"; return 1; }
  is_single "$work/out" && [ -z "$(comm -23 <(echo "$before") <(find "$folder" -name '*.chunk' -printf '%f %T@\n' | sort))" ]
}
chunks=200
check "R killed in the middle and run again: same digest, nothing twice" killed "$work/killed-r" \
  Rscript -e "source('$example/study.R'); print(provenance(run_chunks(eq, $draws, seed, '$work/killed-r', chunks = $chunks)))"

echo "cluster: $passed passed, $failed failed"
[ "$failed" = 0 ]
