#include "equilibrium/uniqueness.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <vector>

// Let k and k' be equilibria in the box, v > 0, and M = max_i |k_i - k'_i| / v_i, attained at i, say with k_i - k'_i =
// M v_i. Both gains of i are 0, and along the segment from k' to k
//   0 = F_i(k) - F_i(k') <= M { -v_i + b_i sum_j w_ij integral phi(z_ij) (v_j - rho_ij v_i) / s_ij }.
// With phi replaced by its largest value on the box where v_j > rho_ij v_i, and its smallest elsewhere, the sum is
// R_i(v) (BestReply::surviving). If R_i(v) < v_i for every i, then M = 0. For v = 1 and the whole line as the box this
// is the sup-norm contraction of Morris & Shin's (2003) condition; a v near the Perron vector of R and the narrow box
// of a finished enclosure prove more.

namespace folkmote {

namespace {

/// R(v).
std::vector<double> surviving(const BestReply& game, std::span<const double> least, std::span<const double> greatest,
                              std::span<const double> v) {
  std::vector<double> result(v.size());
  for (int i = 0; i < game.size(); ++i) result[i] = game.surviving(i, least, greatest, v);
  return result;
}

double worst_ratio(std::span<const double> image, std::span<const double> v) {
  double worst = 0.0;
  for (std::size_t i = 0; i < v.size(); ++i) worst = std::max(worst, image[i] / v[i]);
  return worst;
}

}  // namespace

double box_bound(const BestReply& game, std::span<const double> least, std::span<const double> greatest) {
  constexpr int rounds = 30;
  std::vector<double> low(least.begin(), least.end()), high(greatest.begin(), greatest.end());
  // The iterates carry roundings of their own: the box is widened by more than they can come to.
  for (std::size_t i = 0; i < low.size(); ++i) {
    const double pad = 1e-12 * std::max({1.0, std::fabs(low[i]), std::fabs(high[i])});
    low[i] -= pad;
    high[i] += pad;
  }
  std::vector<double> v(low.size(), 1.0);
  double best = std::numeric_limits<double>::infinity();
  for (int round = 0; round < rounds; ++round) {
    const std::vector<double> image = surviving(game, low, high, v);
    const double worst = worst_ratio(image, v);
    if (!std::isfinite(worst)) break;
    best = std::min(best, worst);
    if (best < 1.0) break;
    // Power iteration on (I + R) / 2, kept positive.
    double largest = 0.0;
    for (std::size_t i = 0; i < v.size(); ++i) {
      v[i] = std::max(0.5 * (v[i] + image[i]), 1e-6 * v[i]);
      largest = std::max(largest, v[i]);
    }
    for (double& entry : v) entry = std::max(entry / largest, 1e-6);
  }
  return best * (1.0 + 1e-12);
}

}  // namespace folkmote
