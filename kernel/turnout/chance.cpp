#include "turnout/chance.hpp"

#include <algorithm>
#include <cmath>
#include <vector>

#include "numerics/adaptive.hpp"
#include "numerics/normal.hpp"
#include "turnout/moments.hpp"

namespace folkmote {

namespace {

constexpr int exact_limit = 500;

/// P(at least `needed` of independent events happen), one event at a time (Poisson-binomial law; the recursion is
/// that of Barlow & Heidtmann 1984). Once `needed` have happened the count no longer matters.
double poisson_binomial_tail(std::span<const double> chance, int needed) {
  if (needed <= 0) return 1.0;
  if (needed > static_cast<int>(chance.size())) return 0.0;
  std::vector<double> count(static_cast<std::size_t>(needed), 0.0);
  count[0] = 1.0;
  double reached = 0.0;
  for (double p : chance) {
    reached += count[needed - 1] * p;
    for (int k = needed - 1; k > 0; --k) count[k] = count[k] * (1.0 - p) + count[k - 1] * p;
    count[0] *= 1.0 - p;
  }
  return reached;
}

}  // namespace

int members_needed(int size, double threshold) {
  int needed = static_cast<int>(std::floor(threshold * size));
  while (needed > 0 && static_cast<double>(needed - 1) / size >= threshold) --needed;
  while (needed <= size && static_cast<double>(needed) / size < threshold) ++needed;
  return needed;
}

bool chance_is_exact(const SharedInformation& shared, std::span<const double> weights) {
  const bool equal = std::all_of(weights.begin(), weights.end(), [&](double w) { return w == weights[0]; });
  return equal && !shared.any() && weights.size() <= exact_limit;
}

double chance_at_least_given(const Knowledge& knowledge, const SharedInformation& shared,
                             std::span<const double> weights, std::span<const double> cutoffs, double threshold,
                             double obstacle) {
  if (threshold <= 0.0) return 1.0;
  if (chance_is_exact(shared, weights)) {
    return poisson_binomial_tail(chances_given(knowledge, cutoffs, obstacle),
                                 members_needed(knowledge.size, threshold));
  }
  const Moments moments = turnout_given(knowledge, shared, weights, cutoffs, obstacle);
  if (moments.sd == 0.0) return moments.mean >= threshold ? 1.0 : 0.0;
  // With equal weights turnout is a multiple of 1/n: half a member of continuity correction.
  const bool equal = std::all_of(weights.begin(), weights.end(), [&](double w) { return w == weights[0]; });
  double bar = threshold;
  if (equal) bar = (members_needed(knowledge.size, threshold) - 0.5) / knowledge.size;
  return normal_cdf((moments.mean - bar) / moments.sd);
}

double chance_at_least(const Knowledge& knowledge, const SharedInformation& shared, std::span<const double> weights,
                       std::span<const double> cutoffs, double threshold, const StopFlag* stop) {
  if (threshold <= 0.0) return 1.0;
  const double scale = 1.0 / std::sqrt(knowledge.prior_precision);
  const auto integrand = [&](double z) {
    if (stop != nullptr && stop->raised()) return 0.0;
    return normal_density(z) *
           chance_at_least_given(knowledge, shared, weights, cutoffs, threshold, knowledge.prior_mean + scale * z);
  };
  return std::min(1.0, adaptive_integral(integrand, -8.0, 8.0, 8, 1e-9));
}

}  // namespace folkmote
