#!/usr/bin/env bash
# Everything that the main job and the tests need, on Debian 12 as root or with sudo.
# Elsewhere it installs nothing and stops with the list of what is missing.
# Usage: .ci/setup.sh main | tests
set -euo pipefail

purpose=${1:-tests}
here=$(cd "$(dirname "${BASH_SOURCE[0]}")/.." && pwd)
build=${FOLKMOTE_BUILD:-$here/build}

main_packages=(g++ cmake ninja-build libboost-dev libeigen3-dev libpcg-cpp-dev
  r-base-core r-base-dev libboost-tools-dev librsvg2-bin)
test_packages=(clang clang-format catch2 g++-aarch64-linux-gnu qemu-user pkg-config file binutils
  r-cran-future r-cran-future.batchtools r-cran-batchtools r-cran-progressr slurmctld slurmd slurm-client munge
  r-cran-testthat r-cran-tibble r-cran-mvtnorm r-cran-pbivnorm r-cran-igraph r-cran-matrix r-cran-spdata r-cran-ggraph)
main_commands=(g++ cmake ninja R Rscript julia)

packages=("${main_packages[@]}")
[ "$purpose" = tests ] && packages+=("${test_packages[@]}")

as_root() { if [ "$(id -u)" = 0 ]; then "$@"; else sudo -n "$@"; fi; }

on_debian_12() {
  [ -r /etc/os-release ] && (. /etc/os-release && [ "${ID:-}" = debian ] && [ "${VERSION_ID:-}" = 12 ])
}

missing_packages() {
  local p
  for p in "${packages[@]}"; do
    dpkg-query -W -f='${Status}' "$p" 2>/dev/null | grep -q 'install ok installed' || printf '%s\n' "$p"
  done
}

# Debian 12 carries no Julia; Debian 11 does. Its suite is read from the mirror that apt uses
# already and pinned low, so that nothing else is ever taken from it.
install_julia() {
  local site
  site=$(apt-get indextargets --format '$(SITE)' 'Created-By: Packages' 'Suite: stable' 2>/dev/null | head -n 1)
  [ -n "$site" ] || site=$(apt-get indextargets --format '$(SITE)|$(RELEASE)' 'Created-By: Packages' |
    sed -n 's/|bookworm$//p' | head -n 1)
  [ -n "$site" ] || { echo "setup: apt has no Debian 12 mirror from which to take julia; put a julia on PATH." >&2; exit 1; }
  printf 'Package: *\nPin: release n=bullseye\nPin-Priority: 100\n' |
    as_root tee /etc/apt/preferences.d/folkmote-bullseye >/dev/null
  printf 'deb [signed-by=/usr/share/keyrings/debian-archive-keyring.gpg] %s bullseye main\n' "${site%/}" |
    as_root tee /etc/apt/sources.list.d/folkmote-bullseye.list >/dev/null
  as_root apt-get update -qq
  as_root env DEBIAN_FRONTEND=noninteractive apt-get install -y -qq --no-install-recommends julia/bullseye >/dev/null ||
    as_root env DEBIAN_FRONTEND=noninteractive apt-get install -y -qq --no-install-recommends -t bullseye julia >/dev/null
}

# Julia 1.5.3 dies on every exception when it is given Debian 12's unwinder, which misreads the
# frames it compiles. The unwinder of its own suite, kept in the build folder, cures it.
fetch_unwinder() {
  local folder=$build/julia-unwind
  [ -e "$folder/done" ] && return 0
  mkdir -p "$folder"
  (cd "$folder" && apt-get -o APT::Sandbox::User=root download -qq libunwind8/bullseye >/dev/null && dpkg -x libunwind8_*.deb . && touch done)
}

if on_debian_12; then
  todo=$(missing_packages)
  if [ -n "$todo" ]; then
    if [ "$(id -u)" != 0 ] && ! sudo -n true 2>/dev/null; then
      echo "setup: these Debian packages are missing and need root to install: $(echo $todo)" >&2
      exit 1
    fi
    as_root apt-get update -qq
    # shellcheck disable=SC2086
    as_root env DEBIAN_FRONTEND=noninteractive apt-get install -y -qq --no-install-recommends $todo >/dev/null
  fi
  command -v julia >/dev/null || install_julia
  julia_version=$(julia --version | sed 's/[^0-9.]//g')
  case $julia_version in 1.5.*) fetch_unwinder ;; esac
else
  absent=()
  for c in "${main_commands[@]}"; do command -v "$c" >/dev/null || absent+=("$c"); done
  for h in boost/version.hpp eigen3/Eigen/Core pcg_random.hpp; do
    ls /usr/include/$h /usr/local/include/$h >/dev/null 2>&1 || absent+=("header $h")
  done
  if [ ${#absent[@]} -gt 0 ]; then
    echo "setup: this is not Debian 12, so nothing was installed. Missing here:" >&2
    printf '  %s\n' "${absent[@]}" >&2
    echo "On Debian 12 they come from: ${packages[*]} (and julia)" >&2
    exit 1
  fi
fi
