#!/usr/bin/env bash
# The packaging step: one R source tarball with its own copy of the kernel and of the headers it needs.
# Usage: wrappers_r/bundle.sh [folder]    makes folder/folkmote_<version>.tar.gz (default: build/r)
# The bundle is made here and never committed.
set -euo pipefail

here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
root=$(dirname "$here")
out=${1:-$root/build/r}
pcg_headers=(pcg_random.hpp pcg_extras.hpp pcg_uint128.hpp)

stage=$(mktemp -d)
trap 'rm -rf "$stage"' EXIT
package=$stage/folkmote
src=$package/src

find_header() {
  local folder
  for folder in ${FOLKMOTE_INCLUDE:-} /usr/include /usr/local/include; do
    [ -r "$folder/$1" ] && { echo "$folder/$1"; return; }
  done
  echo "bundle: $1 was not found; install the PCG headers (Debian: libpcg-cpp-dev) or set FOLKMOTE_INCLUDE." >&2
  exit 1
}

copy_package() {
  cp -R "$here" "$package"
  rm -f "$package/bundle.sh"
  find "$package" -name '*.o' -delete -o -name '*.so' -delete
}

# Sources and private headers of the kernel and of the contract, folders kept; tools with a main() stay out.
copy_kernel() {
  local file
  (cd "$root" && find kernel capi -type f \( -name '*.cpp' -o -name '*.hpp' -o -name '*.h' \) | LC_ALL=C sort) |
    while read -r file; do
      grep -q '^int main(' "$root/$file" && continue
      mkdir -p "$src/$(dirname "$file")"
      cp "$root/$file" "$src/$file"
    done
}

copy_headers() {
  local name
  mkdir -p "$src/include"
  for name in "${pcg_headers[@]}"; do cp "$(find_header "$name")" "$src/include/"; done
}

# Headers that the bundle neither holds nor gets from the C++ library would break the user's build; say so here.
check_includes() {
  local foreign
  foreign=$(grep -rhoE '^ *# *include *[<"](Eigen|boost|unsupported)/[^>"]+' "$src/kernel" "$src/capi" || true)
  [ -z "$foreign" ] && return
  echo "bundle: the kernel includes headers that are not bundled:" >&2
  echo "$foreign" | sort -u >&2
  exit 1
}

write_makevars() {
  {
    echo 'CXX_STD = CXX20'
    echo 'PKG_CPPFLAGS = -Icapi/include -Ikernel -Iinclude'
    echo 'PKG_CFLAGS = $(C_VISIBILITY)'
    echo 'PKG_CXXFLAGS = $(CXX_VISIBILITY) -pthread'
    echo 'PKG_LIBS = -pthread'
    echo
    printf 'OBJECTS ='
    (cd "$src" && find . -name '*.c' -o -name '*.cpp' | LC_ALL=C sort) |
      sed -E 's#^\./#   #; s#\.(c|cpp)$#.o#' | while read -r object; do printf ' \\\n  %s' "$object"; done
    echo
  } >"$src/Makevars"
}

copy_package
copy_kernel
copy_headers
check_includes
write_makevars

mkdir -p "$out"
if ! (cd "$stage" && R CMD build --no-manual --no-build-vignettes folkmote) >"$stage/log" 2>&1; then
  cat "$stage/log" >&2
  exit 1
fi
mv "$stage"/folkmote_*.tar.gz "$out"/
echo "$out/$(ls -t "$out" | grep '^folkmote_.*\.tar\.gz$' | head -n 1)"
