#!/usr/bin/env bash
# The golden bits under other compilers, optimisation levels, instruction sets and processors: the same test program is
# built and run in every way. Prints "bits: N passed, N failed", one per way.
set -uo pipefail
cd "$(dirname "${BASH_SOURCE[0]}")/../.."
root=$PWD
build=${FOLKMOTE_BUILD:-$root/build}/bits
pcg=$(dirname "$(find /usr/include /usr/local/include -name pcg_random.hpp -print -quit)")
passed=0
failed=0

# The kernel, and the tests that compare with golden files.
sources=(kernel/*/*.cpp tests/kernel/main.cpp tests/kernel/test_bits.cpp tests/kernel/test_random_golden.cpp
  tests/kernel/test_golden_solutions.cpp)

# way <name> <runner or ""> <compiler> <flags...>
way() {
  local name=$1 runner=$2
  shift 2
  local folder=$build/$name
  mkdir -p "$folder"
  # Only the PCG and Catch2 headers come from outside; a cross compiler must not see the rest of /usr/include.
  mkdir -p "$build/include"
  ln -sfn /usr/include/catch2 "$build/include/catch2"
  ln -sf "$pcg"/pcg_*.hpp "$build/include/"
  {
    printf 'rule cc\n  command = %s -std=c++20 -MD -MF $out.d %s -c $in -o $out\n  depfile = $out.d\n' "$*" \
      "-DFOLKMOTE_REFERENCE_DIR='\"$root/tests/reference\"' -I$root/kernel -I$root/tests/kernel -isystem $build/include"
    printf 'rule link\n  command = %s $in -o $out -lpthread\n' "$*"
    local objects=() source
    for source in "${sources[@]}"; do
      printf 'build %s.o: cc %s\n' "${source//\//_}" "$root/$source"
      objects+=("${source//\//_}.o")
    done
    printf 'build program: link %s\n' "${objects[*]}"
  } >"$folder/build.ninja"
  if ninja -C "$folder" >"$folder/log" 2>&1 && $runner "$folder/program" '[golden]' >"$folder/out" 2>&1; then
    echo "$name: the golden bits"
    passed=$((passed + 1))
  else
    tail -n 25 "$folder/log" "$folder/out" 2>/dev/null
    echo "$name: failed"
    failed=$((failed + 1))
  fi
}

way gcc-O3-avx2-fma "" g++ -O3 -march=x86-64-v3
way clang-O2 "" clang++ -O2
way clang-O3-avx2-fma "" clang++ -O3 -march=x86-64-v3
way aarch64-gcc-O2 "qemu-aarch64 -L /usr/aarch64-linux-gnu" aarch64-linux-gnu-g++ -O2

echo "bits: $passed passed, $failed failed"
[ "$failed" = 0 ]
