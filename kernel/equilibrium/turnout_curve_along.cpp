#include "numerics/strict.hpp"

#include <algorithm>
#include <cmath>

#include "equilibrium/turnout_curve.hpp"
#include "numerics/elementary.hpp"
#include "numerics/sums.hpp"

// When every cutoff moves by r v_j, and t by r v_i, X_i moves at the rate
//   sum_j omega_j phi(z_ij) (v_j - rho_ij v_i) / s_ij = integral of D dN + v_i dX_i/dt,
//   D(theta, M) = sum_j omega_j v_j phi( (kappa_j - mu - pull_j (theta - mu) - sway_j (M - mu)) / w_j ) / w_j,
// D tabulated and integrated as the curve is. The bound of turnout_curve.cpp holds for it too, over the narrowest w_j:
// |phi(x + i y)| <= 0.4 exp(y^2/2). That of the slope is the curve's, times the lowest frequency that the rule misses.

namespace folkmote {

namespace {

constexpr double inverse_sqrt_two_pi = 0x1.9884533d43651p-2;

}  // namespace

bool TurnoutCurve::tabulate_direction(std::span<const double> direction, const Execution& execution) {
  const std::size_t n = weight_.size();
  double narrow = HUGE_VAL, steep = 0.0;
  for (std::size_t j = 0; j < n; ++j) {
    const double pull2 = laws_.pull[j] * laws_.pull[j];
    if (laws_.spread[j] == 0.0 && pull2 == 0.0) return false;
    const double width = std::sqrt(laws_.spread[j] + pull2 * grid_.smoothing);
    narrow = std::min(narrow, width);
    const double doubt = laws_.doubt[j];
    if (doubt >= least_doubt_) steep = std::max(steep, laws_.grip[j] / std::sqrt(doubt - grid_.smoothing));
  }
  // Members summed directly meet others at s_ij, which is at least the narrowest spread.
  for (std::size_t j = 0; direct_members_ > 0 && j < n; ++j) narrow = std::min(narrow, std::sqrt(laws_.spread[j]));
  if (!(narrow > 0.0)) return false;
  direction_.assign(direction.begin(), direction.end());
  error_along_ = error_ * (4.0 / narrow + 8.0 * steep + (nodes_ > 0 ? 16.0 / grid_.step : 0.0));
  direction_table_.resize(table_.size());
  sum_blocks(direction_table_, execution, [&](int block, std::size_t layer, std::span<double> table) {
    tabulate_direction_layer(block, layer, table);
  });
  return true;
}

void TurnoutCurve::tabulate_direction_layer(int block, std::size_t layer, std::span<double> table) const {
  const int first = block * block_size();
  const int last = std::min(static_cast<int>(weight_.size()), first + block_size());
  std::vector<double> density(nodes_);
  for (int j = first; j < last; ++j) {
    const Zone zone = zone_of(j, laws_.sway[j] * shift(layer));
    const std::span<double> in_zone = std::span<double>(density).first(zone.count);
    for (std::size_t k = 0; k < zone.count; ++k) {
      const double z = (zone.margin - laws_.pull[j] * (node(zone.begin + k) - prior_mean_)) / zone.width;
      in_zone[k] = -0.5 * z * z;
    }
    exponentials(in_zone, in_zone);
    const double scale = weight_[j] * direction_[j] * inverse_sqrt_two_pi / zone.width;
    for (std::size_t k = 0; k < zone.count; ++k) table[zone.begin + k] += scale * in_zone[k];
  }
}

double TurnoutCurve::along(int i, double t) const {
  if (laws_.doubt[i] < least_doubt_) return directly_along(i, t);
  return from_table(direction_table_, i, t).share + direction_[i] * from_table(table_, i, t).slope;
}

double TurnoutCurve::directly_along(int i, double t) const {
  TwoSum sum;
  for (int j = 0; j < static_cast<int>(weight_.size()); ++j) {
    const double sd = std::sqrt(laws_.variance(i, j));
    const double z = independent_z(i, j, t);
    const double density = inverse_sqrt_two_pi * exponential(-0.5 * z * z) / sd;
    sum.add(weight_[j] * density * (direction_[j] - laws_.slope(i, j) * direction_[i]));
  }
  return sum.value();
}

}  // namespace folkmote
