#include "equilibrium/enclosure.hpp"

#include <algorithm>
#include <cmath>

#include "equilibrium/end.hpp"
#include "equilibrium/uniqueness.hpp"

namespace folkmote {

namespace {

double width_between(const std::vector<double>& least, const std::vector<double>& greatest) {
  double width = 0.0;
  for (std::size_t i = 0; i < least.size(); ++i) width = std::max(width, greatest[i] - least[i]);
  return width;
}

Verdict decide(double bound, double width, double tolerance, bool both_certified) {
  if (width <= tolerance) return bound < 1.0 ? Verdict::proved_unique : Verdict::bracketed;
  // Each end is within a quarter of the tolerance of its equilibrium, so that the two equilibria differ.
  if (both_certified && bound >= 1.0) return Verdict::several;
  return Verdict::not_converged;
}

/// Cutoffs of size x cannot be told apart below a few roundings of x.
double attainable(const BestReply& game, double tolerance) {
  double scale = 0.0;
  for (int i = 0; i < game.size(); ++i) {
    scale = std::max({scale, std::fabs(game.lowest(i)), std::fabs(game.highest(i))});
  }
  return std::max(tolerance, 64.0 * 0x1p-52 * scale);
}

}  // namespace

const char* verdict_text(Verdict verdict) {
  switch (verdict) {
    case Verdict::proved_unique:
      return "proved unique";
    case Verdict::bracketed:
      return "bracketed";
    case Verdict::several:
      return "several";
    default:
      return "not converged";
  }
}

Enclosure enclose(BestReply& game, const SolveRule& rule, const StopFlag& stop) {
  const double tolerance = attainable(game, rule.tolerance);
  End greatest(game, Side::greatest, tolerance);
  End least(game, Side::least, tolerance);
  double width = width_between(least.cutoffs(), greatest.cutoffs());
  while (width > tolerance && !stop.raised()) {
    bool moved = false;
    for (End* end : {&greatest, &least}) {
      if (end->finished() || end->iterations() >= rule.sweeps) continue;
      end->advance(width);
      moved = true;
    }
    width = width_between(least.cutoffs(), greatest.cutoffs());
    if (!moved) break;
  }
  Enclosure result;
  result.contraction_bound = game.contraction_bound();
  // Every equilibrium lies in the enclosure: once that is narrow, a bound on it decides what the global one could not.
  if (result.contraction_bound >= 1.0 && width <= tolerance) {
    result.contraction_bound = std::min(result.contraction_bound, box_bound(game, least.cutoffs(), greatest.cutoffs()));
  }
  result.width = width;
  result.iterations = std::max(greatest.iterations(), least.iterations());
  result.verdict = decide(result.contraction_bound, width, tolerance, greatest.certified() && least.certified());
  result.least = least.cutoffs();
  result.greatest = greatest.cutoffs();
  return result;
}

}  // namespace folkmote
