// Prints the digests of tests/kernel/numeric_digests.hpp in the form of golden_numerics.txt. The same text must come
// out of every compiler, optimisation level and processor; the golden file changes only when a numerical function
// changes on purpose.
#include "numerics/strict.hpp"

#include "numeric_digests.hpp"

int main() {
  std::printf("# FNV-1a digests of numerical results; see tests/kernel/numeric_digests.hpp\n");
  for (const auto& [name, digest] : digests::all()) std::printf("%s %s\n", name.c_str(), digest.c_str());
  return 0;
}
