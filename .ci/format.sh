#!/usr/bin/env bash
# Checks that every file follows the house's form; --fix rewrites C and C++.
set -uo pipefail
cd "$(dirname "${BASH_SOURCE[0]}")/.."
failed=0
mapfile -t native < <(git ls-files '*.cpp' '*.hpp' '*.c' '*.h' | grep -v '_rows.hpp$')
if [ "${1:-}" = --fix ]; then
  clang-format -i "${native[@]}"
else
  clang-format --dry-run -Werror "${native[@]}" 2>&1 | grep -m 20 error && failed=1
fi
# All languages: no tabs (but in make files), no trailing blanks, a newline at the end.
while IFS= read -r file; do
  case $file in *.png | *.csv | *.ipynb | *Makevars* | *.rds) continue ;; esac
  grep -nHP '[ \t]+$' "$file" && failed=1
  grep -nHP '\t' "$file" && failed=1
  [ -z "$(tail -c 1 "$file")" ] || { echo "$file: no newline at the end"; failed=1; }
done < <(git ls-files)
# Contraction is switched off by the first include of every file of the kernel and of the C interface, or by the first
# include of the header that it starts with.
while IFS= read -r file; do
  first=$(grep -m 1 '^#include' "$file")
  case $file:$first in
    *strict.hpp:* | *numerics/tables/* | *:*numerics/strict.hpp*) ;;
    *.cpp:*\"*\"*) ;;
    *) echo "$file: include numerics/strict.hpp first" && failed=1 ;;
  esac
done < <(git ls-files 'kernel/*.hpp' 'kernel/*.cpp' 'capi/*.hpp' 'capi/*.cpp')
exit $failed
