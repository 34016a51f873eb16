#pragma once
// Enclosing the least and the greatest cutoff equilibrium of one community, and the verdict (MODEL.md, sections 4, 5).
#include "numerics/strict.hpp"

#include <cstdint>
#include <vector>

#include "equilibrium/best_reply.hpp"
#include "parallel/workers.hpp"

namespace folkmote {

enum class Verdict { proved_unique, bracketed, several, not_converged };

/// As users read it: "proved unique", "bracketed", "several", "not converged".
const char* verdict_text(Verdict verdict);

struct SolveRule {
  double tolerance = 1e-10;      // widest enclosure of a cutoff that counts as found
  std::int64_t sweeps = 100000;  // cap on sweeps and leaps of each end
};

/// Every cutoff equilibrium lies between `least` and `greatest`. Unless the verdict is "not converged", each of the
/// two is within a quarter of the tolerance of the extremal equilibrium that it bounds, or the whole enclosure is
/// narrower than the tolerance (64 roundings of the largest cutoff, where that is wider).
struct Enclosure {
  std::vector<double> least;
  std::vector<double> greatest;
  Verdict verdict = Verdict::not_converged;
  double contraction_bound = 0.0;  // below 1: a proof; see enclosure.cpp for the two bounds tried
  double width = 0.0;              // max_i greatest_i - least_i
  std::int64_t iterations = 0;     // sweeps and leaps of the end that took more
};

Enclosure enclose(BestReply& game, const SolveRule& rule, const StopFlag& stop);

}  // namespace folkmote
