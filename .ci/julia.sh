#!/usr/bin/env bash
# Runs julia with the unwinder that Julia 1.5.* needs on Debian 12, where .ci/setup.sh has fetched one.
# Usage: .ci/julia.sh arguments of julia        FOLKMOTE_BUILD names a build folder to look in first
set -euo pipefail

here=$(cd "$(dirname "${BASH_SOURCE[0]}")/.." && pwd)
for build in "${FOLKMOTE_BUILD:-$here/build}" "$here/build"; do
  for folder in "$build"/julia-unwind/usr/lib/*-linux-gnu*; do
    [ -d "$folder" ] || continue
    export LD_LIBRARY_PATH="$(cd "$folder" && pwd)${LD_LIBRARY_PATH:+:$LD_LIBRARY_PATH}"
    break 2
  done
done
exec julia "$@"
