#!/usr/bin/env bash
# The main job in one command, from a bare Debian 12 machine to the answers: installs what is needed, builds the library
# and the R package, and asks the three questions of holdout/README.md in C, R and Julia.
# Usage: examples/run.sh             FOLKMOTE_BUILD names another build folder (default: build/ of the repository)
set -euo pipefail

root=$(cd "$(dirname "${BASH_SOURCE[0]}")/.." && pwd)
build=${FOLKMOTE_BUILD:-$root/build}
mkdir -p "$build/holdout"
build=$(cd "$build" && pwd)
export FOLKMOTE_BUILD=$build
r_library=$build/r-library
results=$build/holdout

say() { printf '\n== %s\n' "$*"; }

# quietly <log> <command>: its output goes to the log, and is shown only when it fails.
quietly() {
  local log=$1
  shift
  "$@" >"$log" 2>&1 || { tail -n 40 "$log" >&2; echo "run: '$1' failed; all of its output is in $log" >&2; exit 1; }
}

build_library() {
  [ -e "$build/build.ninja" ] ||
    quietly "$build/configure.log" cmake -S "$root" -B "$build" -G Ninja -DCMAKE_BUILD_TYPE=Release
  quietly "$build/library.log" ninja -C "$build" folkmote
}

# Everything that goes into the R package, as one digest: it is built again only when that has changed.
r_inputs() {
  (cd "$root" && find kernel capi wrappers_r -type f ! -name '*.o' ! -name '*.so' -print0 | LC_ALL=C sort -z |
    xargs -0 sha256sum | sha256sum)
}

build_r_package() {
  local stamp=$r_library/inputs.sha256
  mkdir -p "$r_library"
  [ -d "$r_library/folkmote" ] && [ "$(cat "$stamp" 2>/dev/null)" = "$(r_inputs)" ] && return
  r_inputs >"$stamp.new"
  quietly "$build/r-bundle.log" "$root/wrappers_r/bundle.sh" "$build/r"
  MAKEFLAGS="-j$(nproc)" quietly "$build/r-install.log" R CMD INSTALL --no-docs --no-test-load \
    --library="$r_library" "$build/r/folkmote_0.1.0.tar.gz"
  mv "$stamp.new" "$stamp"
}

say "Installing what is missing"
"$root/.ci/setup.sh" main
# shellcheck source=holdout/programs.sh
. "$root/examples/holdout/programs.sh"

say "Building the library"
build_library
say "Building the R package (a minute or two the first time)"
build_r_package
compile "$results/holdout" "$root/examples/holdout/holdout.c"

say "The questions, asked in C"
run_c "$results/holdout_c.csv" | tee "$results/holdout_c.txt"
say "The same in R, and the picture"
run_r "$results/holdout_R.csv" >"$results/holdout_R.txt"
echo "done"
say "The same in Julia, from the notebook"
run_julia "$results/holdout_julia.csv" >"$results/holdout_julia.txt"
echo "done"

say "What you have"
for language in R julia; do
  cmp "$results/holdout_c.csv" "$results/holdout_$language.csv" ||
    { echo "run: C and $language do not give the same results" >&2; exit 1; }
done
size="$(wc -l <"$results/holdout_c.csv") lines, $(wc -c <"$results/holdout_c.csv") bytes each"
echo "C, R and Julia agree to the last byte: $size."
echo "Results: $results/holdout_c.csv (and _R, _julia)"
echo "Picture: $results/holdout.png"
