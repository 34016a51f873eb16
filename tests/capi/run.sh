#!/usr/bin/env bash
# Tests the C interface as a stranger: what is exported, what is installed, what the header promises.
#   tests/capi/run.sh                          against the build in FOLKMOTE_BUILD (default: build)
#   tests/capi/run.sh --sanitize[=SANITIZERS]  the contract in a build of its own (default: address,undefined)
#   tests/capi/run.sh --valgrind               adds a run of the contract under valgrind
# Last line: "capi: N passed, N failed"; the exit code is not 0 when anything failed.
set -uo pipefail

here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
root=$(cd "$here/../.." && pwd)
build=${FOLKMOTE_BUILD:-$root/build}
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT

sanitize=
valgrind=
for argument in "$@"; do
  case $argument in
    --sanitize) sanitize=address,undefined ;;
    --sanitize=*) sanitize=${argument#*=} ;;
    --valgrind) valgrind=yes ;;
    *) echo "run.sh: unknown argument $argument" >&2; exit 2 ;;
  esac
done

passed=0
failed=0

# check WHAT COMMAND...: one check, passed when the command succeeds; its output is shown when it does not.
check() {
  local what=$1
  shift
  if "$@" >"$work/output" 2>&1; then
    passed=$((passed + 1))
  else
    failed=$((failed + 1))
    echo "${BASH_SOURCE[1]}:${BASH_LINENO[0]}: failed: $what"
    sed 's/^/    /' "$work/output" | head -n 40
  fi
}

# program COMMAND...: a test program; adds the counts of its last line. One that dies counts as a failure.
program() {
  local line code
  "$@" >"$work/program" 2>&1
  code=$?
  line=$(tail -n 1 "$work/program")
  if [[ $line =~ ^[a-z]+:\ ([0-9]+)\ passed,\ ([0-9]+)\ failed$ ]]; then
    passed=$((passed + BASH_REMATCH[1]))
    failed=$((failed + BASH_REMATCH[2]))
    # Dead after its last line, or unsound under a sanitizer or valgrind.
    if [ "$code" -ne 0 ] && [ "${BASH_REMATCH[2]}" -eq 0 ]; then failed=$((failed + 1)); fi
  else
    failed=$((failed + 1))
    echo "$(basename "$1") ended with code $code and without a count"
  fi
  if [ "$code" -ne 0 ] || [ -z "$line" ]; then head -n 200 "$work/program"; else echo "$line"; fi
}

c_flags=(-std=c11 -pedantic -Wall -Wextra -Werror -O1 -g -I"$root/capi/include" -I"$here")
contract_sources=("$here"/test_contract.c "$here"/contract_*.c "$here"/build_tables.c)

finish() {
  echo "capi: $passed passed, $failed failed"
  [ "$failed" -eq 0 ]
  exit
}

# ---- The contract under sanitizers ----

run_sanitized() {
  local folder
  case $sanitize in
    address*) folder=$root/build-asan ;;
    thread) folder=$root/build-tsan ;;
    *) folder=$root/build-${sanitize//,/-} ;;
  esac
  # Not optimised much: the build is the longest part.
  check "sanitized configuration" cmake -G Ninja -S "$root" -B "$folder" -DCMAKE_BUILD_TYPE=None \
    -DCMAKE_CXX_FLAGS=-O1 -DFOLKMOTE_SANITIZE="$sanitize"
  check "sanitized build" cmake --build "$folder" --target libfolkmote.so
  check "sanitized contract builds" gcc "${c_flags[@]}" -fsanitize="$sanitize" -fno-omit-frame-pointer \
    "${contract_sources[@]}" -o "$work/contract" -L"$folder" "-Wl,-rpath,$folder" -lfolkmote -lm -pthread
  export UBSAN_OPTIONS=print_stacktrace=1:halt_on_error=1 TSAN_OPTIONS=halt_on_error=0
  program "$work/contract"
}

if [ -n "$sanitize" ]; then
  run_sanitized
  finish
fi

# ---- What the library exports and needs ----

library=$build/libfolkmote.so
header=$root/capi/include/folkmote.h
awk -f "$here/header_facts.awk" "$header" >"$work/facts"
nm -D --defined-only "$library" | awk '$2 != "A" { sub("@@", " ", $3); print $3 }' | LC_ALL=C sort >"$work/exported"
awk '$1 == "function" { print $2 }' "$work/facts" | LC_ALL=C sort >"$work/declared"
cut -d ' ' -f 1 "$root/capi/symbols.txt" >"$work/committed"

is() { [ "$1" = "$2" ] || { echo "have '$1', wanted '$2'"; return 1; }; }
fact() { awk -v key="$1" -v name="${2:-}" 'name == "" ? $1 == key : $1 == key && $2 == name { print $NF }' "$work/facts"; }
newest() { objdump -T "$library" | grep -o "$1_[0-9.]*" | sort -Vu | tail -n 1; }
no_newer() { is "$(printf '%s\n%s\n' "$(newest "$1")" "$1_$2" | sort -V | tail -n 1)" "$1_$2"; }
project_version() { sed -n 's/^project(folkmote VERSION \([0-9.]*\).*/\1/p' "$root/CMakeLists.txt"; }

check "exported symbols are those of capi/symbols.txt" diff "$root/capi/symbols.txt" "$work/exported"
check "declared functions are those of capi/symbols.txt" diff "$work/committed" "$work/declared"
check "soname" is "$(readelf -d "$library" | sed -n 's/.*SONAME.*\[\(.*\)\]/\1/p')" "libfolkmote.so.$(project_version | cut -d . -f 1)"
check "libstdc++ of gcc 12 is enough" no_newer GLIBCXX 3.4.30
check "no executable stack" bash -c "readelf -lW '$library' | grep GNU_STACK | grep -qv 'RWE'"
check "no text relocations" bash -c "! readelf -d '$library' | grep -q TEXTREL"
check "no run path" bash -c "! readelf -d '$library' | grep -qE 'RPATH|RUNPATH'"
echo "needs: $(newest GLIBCXX), $(newest CXXABI), $(newest GLIBC)"

# ---- What the header promises ----

doc=$(fact doc)
lines=$(fact lines)
echo "header: $doc of $lines lines carry documentation ($((100 * doc / lines)) %)"
check "two thirds of the header are documentation" test $((3 * doc)) -ge $((2 * lines))
check "every function has documentation" is "$(awk '$1 == "bare" { print $2 }' "$work/facts")" ""
check "header and CMake agree on the version" is "$(fact constant FOLKMOTE_VERSION)" "$(project_version)"
check "header is C99" gcc -std=c99 -pedantic -Wall -Wextra -Werror -fsyntax-only -x c "$header"
check "header is C++20" g++ -std=c++20 -pedantic -Wall -Wextra -Werror -fsyntax-only -x c++ "$header"
check "header is C++11" g++ -std=c++11 -pedantic -Wall -Wextra -Werror -fsyntax-only -x c++ "$header"

# ---- Programs ----

link=(-L"$build" "-Wl,-rpath,$build" -lfolkmote -lm -pthread)
check "contract builds" gcc "${c_flags[@]}" "${contract_sources[@]}" -o "$work/contract" "${link[@]}"
check "dlopen builds" gcc "${c_flags[@]}" "$here/test_dlopen.c" -o "$work/dlopen" -ldl
check "memory builds" gcc "${c_flags[@]}" "$here/test_memory.c" "$here/build_tables.c" -o "$work/memory" "${link[@]}"
program "$work/contract"
program "$work/dlopen" "$library" "$root/capi/symbols.txt"
program "$work/memory"
if [ -n "$valgrind" ]; then
  check "no errors or leaks under valgrind" \
    valgrind -q --error-exitcode=9 --leak-check=full --show-leak-kinds=all --errors-for-leak-kinds=all "$work/contract"
fi

# ---- What is installed ----

prefix=$work/prefix
check "install" cmake --install "$build" --prefix "$prefix"
installed=$(cd "$prefix" 2>/dev/null && find . -name folkmote.pc -print -quit)
libraries=$prefix/$(dirname "$(dirname "${installed#./}")")
check "the header is installed as it is" cmp "$prefix/include/folkmote.h" "$header"
check "nothing else is installed in include" is "$(ls "$prefix/include")" folkmote.h

check "find_package" cmake -S "$here/install" -B "$work/use" -DCMAKE_PREFIX_PATH="$prefix"
check "a project that found it builds" cmake --build "$work/use"
check "C program of that project" "$work/use/use_c"
check "C++ program of that project" "$work/use/use_cpp"

# The .pc file finds its prefix from where it stands.
export PKG_CONFIG_PATH=$libraries/pkgconfig LD_LIBRARY_PATH=$libraries
pc() { pkg-config "$@" folkmote; }
check "pkg-config version" is "$(pc --modversion)" "$(project_version)"
# shellcheck disable=SC2046
check "one line through pkg-config, C" gcc -std=c99 "$here/install/use.c" -o "$work/use_pc" $(pc --cflags --libs)
# shellcheck disable=SC2046
check "one line through pkg-config, C++" g++ -std=c++20 "$here/install/use.cpp" -o "$work/use_pc_cpp" $(pc --cflags --libs)
check "C program built through pkg-config" is "$("$work/use_pc")" "folkmote $(project_version)"
check "C++ program built through pkg-config" is "$("$work/use_pc_cpp")" "folkmote $(project_version)"

finish
