#include "equilibrium/turnout_curve.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "information/two_sum.hpp"
#include "numerics/elementary.hpp"
#include "numerics/normal.hpp"
#include "numerics/sums.hpp"

// Normal distributions convolve, so that doubt is split in two parts u + s_i^2 = doubt_i: a part u, common to all,
// smooths the curve before it is tabulated,
//   T(theta) = integral A dN(theta, u) = sum_j omega_j Phi( (kappa_j - mu - pull_j (theta - mu)) / sqrt(spread_j + u
//   pull_j^2) ),
// and the rest is integrated by the trapezoidal rule, X_i(t) = sum_k h T(theta_k) phi((theta_k - m)/s_i)/s_i. However
// steep a member is, its term of T has width w >= sqrt(u + least spread/pull^2): there is no step that the nodes could
// miss.
//
// Error (Poisson summation; Trefethen & Weideman 2014, SIAM Review 56:385, sections 3, 5). Completing the square,
//   integral Phi((a - x)/w) N(x; m, s^2) exp(-i x f) dx = exp(-i f m - f^2 s^2/2) Phi( (a - m + i f s^2)/sqrt(w^2 +
//   s^2) ),
// and |Phi(x + i y)| <= 1 + phi(x) integral_0^y exp(v^2/2) dv <= 1 + 0.31 exp(y^2/2) (Dawson's integral is at most
// 0.5411). At the frequencies f = 2 pi k/h, k != 0, that the rule cannot tell from 0, this sums to less than 2.7
// exp(-E) with
//   E = (2 pi/h)^2 H/2,   H = w^2 s^2/(w^2 + s^2).
// h is set for E = 36: 6.3e-16 of the total weight. H is largest where w^2 and s^2 are alike, which decides u.
//
// A common report adds the integral over M, again by the trapezoidal rule: given e_i, what is left of j's chance is
// Phi of a straight line in M of width sqrt(spread_j + pull_j^2 doubt_i) / |sway_j - pull_j grip_i sway_i|, so that the
// same bound holds with the narrowest of these as w and the smallest haze_i as s^2.
//
// Members with so little doubt that h would have to be very small (hubs that know theta almost exactly) are summed over
// everybody in closed form instead; which, is decided by counting operations.

namespace folkmote {

namespace {

constexpr double inverse_sqrt_two_pi = 0x1.9884533d43651p-2;
constexpr double reach = 8.3;               // Phi(-8.3) = 5.2e-17
constexpr double step_per_root = 0.740480;  // 2 pi / sqrt(2 * 36), rounded down
constexpr double aliasing = 2.7 * 2.32e-16;
constexpr double most_nodes = 4194304.0;
constexpr int chunk = 128;  // members summed before their sum is added to the block's
constexpr int blocks = 64;

}  // namespace

TurnoutCurve::TurnoutCurve(double prior_mean, ThetaLaws laws, std::vector<double> weight,
                           std::span<const double> lowest, std::span<const double> highest, const Layout& layout)
    : prior_mean_(prior_mean), laws_(std::move(laws)), weight_(std::move(weight)), total_(ordered_sum(weight_)) {
  if (laws_.common) lay_layers(lowest, highest);
  if (std::isinf(layers_)) return;
  lay_out(lowest, highest, layout);
  bound_error(lowest, highest);
}

/// Places the values of M.
void TurnoutCurve::lay_layers(std::span<const double> lowest, std::span<const double> highest) {
  constexpr double most_layers = 256.0;
  const std::size_t n = weight_.size();
  double least_doubt = infinity, least_haze = infinity, low = infinity, high = -infinity;
  double least_turn = infinity, most_turn = 0.0;  // grip_i sway_i
  for (std::size_t i = 0; i < n; ++i) {
    const double around = reach * std::sqrt(laws_.haze[i]);
    least_doubt = std::min(least_doubt, laws_.doubt[i]);
    least_haze = std::min(least_haze, laws_.haze[i]);
    least_turn = std::min(least_turn, laws_.grip[i] * laws_.sway[i]);
    most_turn = std::max(most_turn, laws_.grip[i] * laws_.sway[i]);
    low = std::min(low, laws_.hint[i] * (lowest[i] - prior_mean_) - around);
    high = std::max(high, laws_.hint[i] * (highest[i] - prior_mean_) + around);
  }
  double w2 = infinity;
  for (std::size_t j = 0; j < n; ++j) {
    const double across = std::max(std::fabs(laws_.sway[j] - laws_.pull[j] * least_turn),
                                   std::fabs(laws_.sway[j] - laws_.pull[j] * most_turn));
    if (!(across > 0.0)) continue;
    w2 = std::min(w2, (laws_.spread[j] + laws_.pull[j] * laws_.pull[j] * least_doubt) / across / across);
  }
  layer_step_ = step_per_root * std::sqrt(std::isinf(w2) ? least_haze : w2 / (w2 + least_haze) * least_haze);
  first_shift_ = low - layer_step_;
  layers_ = std::floor((high - low) / layer_step_) + 3.0;
  if (!(layers_ <= most_layers)) layers_ = infinity;
}

/// The grid that serves every member with at least that much doubt.
TurnoutCurve::Grid TurnoutCurve::grid_for(double least_doubt, std::span<const double> lowest,
                                          std::span<const double> highest) const {
  Grid grid;
  grid.smoothing = least_width2_ < least_doubt ? 0.5 * (least_doubt - least_width2_) : 0.0;
  const double s2 = least_doubt - grid.smoothing;
  const double w2 = std::isinf(least_width2_) ? infinity : least_width2_ + grid.smoothing;
  grid.step = step_per_root * std::sqrt(std::isinf(w2) ? s2 : w2 / (w2 + s2) * s2);
  double low = infinity, high = -infinity;
  for (std::size_t i = 0; i < weight_.size(); ++i) {
    if (laws_.doubt[i] < least_doubt) continue;
    const double around = reach * std::sqrt(laws_.doubt[i] - grid.smoothing);
    const double turned = laws_.grip[i] * laws_.sway[i] * reach * std::sqrt(laws_.haze[i]);
    low = std::min(low, prior_mean_ + laws_.trust[i] * (lowest[i] - prior_mean_) - turned - around);
    high = std::max(high, prior_mean_ + laws_.trust[i] * (highest[i] - prior_mean_) + turned + around);
  }
  grid.first = low - 2.0 * grid.step;
  grid.nodes = std::floor((high - low) / grid.step) + 5.0;
  return grid;
}

/// Puts on the grid the members with most doubt, as many as make a pass over everybody cheapest.
void TurnoutCurve::lay_out(std::span<const double> lowest, std::span<const double> highest, const Layout& layout) {
  const std::size_t n = weight_.size();
  least_width2_ = infinity;
  for (std::size_t j = 0; j < n; ++j) {
    if (laws_.pull[j] > 0.0) least_width2_ = std::min(least_width2_, laws_.spread[j] / laws_.pull[j] / laws_.pull[j]);
  }
  std::vector<double> doubts = laws_.doubt;
  std::sort(doubts.begin(), doubts.end());
  double cheapest = layout.direct_cost * static_cast<double>(n) * static_cast<double>(n);
  least_doubt_ = infinity;
  for (std::size_t left_out = 0; left_out < n; left_out = left_out == 0 ? 1 : 2 * left_out) {
    const double doubt = doubts[left_out];
    if (!(doubt > 0.0)) continue;
    const Grid grid = grid_for(doubt, lowest, highest);
    if (!(grid.nodes * layers_ <= most_nodes)) continue;
    const double direct = static_cast<double>(std::lower_bound(doubts.begin(), doubts.end(), doubt) - doubts.begin());
    const double cost = static_cast<double>(n) * (2.0 * grid.nodes * layers_ + layout.direct_cost * direct);
    if (cost >= cheapest) continue;
    cheapest = cost;
    grid_ = grid;
    least_doubt_ = doubt;
  }
  nodes_ = static_cast<std::size_t>(grid_.nodes);
  table_.resize(nodes_ * static_cast<std::size_t>(layers_));
  for (double doubt : laws_.doubt) direct_members_ += doubt < least_doubt_;
}

/// Rounding: of the sums, term by term, and of z, whose numerator is a difference of numbers of the size of cutoffs.
void TurnoutCurve::bound_error(std::span<const double> lowest, std::span<const double> highest) {
  constexpr double unit = 0x1p-53;
  double size = std::fabs(prior_mean_), narrow = infinity;
  for (std::size_t i = 0; i < weight_.size(); ++i) {
    size = std::max({size, std::fabs(lowest[i]), std::fabs(highest[i])});
    narrow = std::min(narrow, laws_.doubt[i]);
  }
  const double furthest = std::max(std::fabs(grid_.first), std::fabs(node(nodes_)));
  const double width = std::sqrt((std::isinf(least_width2_) ? 0.0 : least_width2_) + std::min(grid_.smoothing, narrow));
  const double in_z = nodes_ > 0 || !std::isinf(least_width2_) ? 6.0 * (size + furthest) / width : 0.0;
  const double in_sums = 16.0 + chunk + static_cast<double>(nodes_) / 8.0 + static_cast<double>(block_size()) / chunk;
  const double rules = laws_.common ? 2.0 : 1.0;  // one over theta, one over M
  error_ = total_ * (rules * (aliasing + 2.0 * 5.3e-17) + unit * (in_sums + layers_ + 0.4 * std::min(in_z, 1e12)));
}

int TurnoutCurve::block_size() const {
  const int n = static_cast<int>(weight_.size());
  return std::max(4096, (n + blocks - 1) / blocks);
}

void TurnoutCurve::tabulate(std::span<const double> cutoffs, bool steps_act, const Execution& execution) {
  cutoffs_.assign(cutoffs.begin(), cutoffs.end());
  steps_act_ = steps_act;
  if (nodes_ == 0) return;
  sum_blocks(table_, execution,
             [&](int block, std::size_t layer, std::span<double> table) { tabulate_layer(block, layer, table); });
}

void TurnoutCurve::tabulate_layer(int block, std::size_t layer, std::span<double> table) const {
  const int first = block * block_size();
  const int last = std::min(static_cast<int>(weight_.size()), first + block_size());
  std::vector<double> chances(nodes_), above(nodes_ + 1), z(nodes_);
  for (int start = first; start < last; start += chunk) {
    std::fill(chances.begin(), chances.end(), 0.0);
    std::fill(above.begin(), above.end(), 0.0);
    for (int j = start; j < std::min(last, start + chunk); ++j) {
      add_member(j, laws_.sway[j] * shift(layer), chances, above, z);
    }
    TwoSum acting;  // those whose chance is 1 at this node and below
    for (std::size_t k = nodes_; k-- > 0;) {
      if (above[k + 1] != 0.0) acting.add(above[k + 1]);
      table[k] += chances[k] + acting.value();
    }
  }
}

TurnoutCurve::Zone TurnoutCurve::zone_of(int j, double shift) const {
  const double margin = (cutoffs_[j] - prior_mean_) - shift;
  const double pull = laws_.pull[j];
  const double width = std::sqrt(laws_.spread[j] + grid_.smoothing * pull * pull);
  const double nodes = static_cast<double>(nodes_);
  double from = 0.0, to = nodes;
  if (width == 0.0) {  // the index is mu for certain
    const bool acts = steps_act_ ? margin >= 0.0 : margin > 0.0;
    from = to = acts ? nodes : 0.0;
  } else if (pull > 0.0) {
    const double middle = (prior_mean_ + margin / pull - grid_.first) / grid_.step;
    const double around = reach * width / pull / grid_.step;
    from = std::min(nodes, std::max(0.0, std::floor(middle - around)));
    to = std::min(nodes, std::max(from, std::floor(middle + around) + 2.0));
  }
  return {static_cast<std::size_t>(from), static_cast<std::size_t>(to) - static_cast<std::size_t>(from), margin, width};
}

/// Adds one member's chance of acting at every node. `above[k]` takes the weight of those for whom k is the first node
/// in doubt.
void TurnoutCurve::add_member(int j, double shift, std::span<double> chances, std::span<double> above,
                              std::span<double> z) const {
  const Zone zone = zone_of(j, shift);
  const double pull = laws_.pull[j], weight = weight_[j];
  above[zone.begin] += weight;
  const std::span<double> chance = z.first(zone.count);
  for (std::size_t k = 0; k < zone.count; ++k) {
    chance[k] = (zone.margin - pull * (node(zone.begin + k) - prior_mean_)) / zone.width;
  }
  normal_cdf(chance, chance);
  for (std::size_t k = 0; k < zone.count; ++k) chances[zone.begin + k] += weight * chance[k];
}

double TurnoutCurve::evaluations() const {
  double count = 0.0;
  for (int j = 0; nodes_ > 0 && j < static_cast<int>(weight_.size()); ++j) {
    for (double layer = 0.0; layer < layers_; layer += 1.0) {
      count += static_cast<double>(zone_of(j, laws_.sway[j] * shift(static_cast<std::size_t>(layer))).count);
    }
  }
  return count;
}

double TurnoutCurve::independent_z(int i, int j, double t) const {
  const double margin = (cutoffs_[j] - prior_mean_) - laws_.slope(i, j) * (t - prior_mean_);
  const double variance = laws_.variance(i, j);
  if (variance > 0.0) return margin / std::sqrt(variance);
  return (steps_act_ ? margin >= 0.0 : margin > 0.0) ? infinity : -infinity;
}

TurnoutCurve::Value TurnoutCurve::expect(int i, double t) const {
  return laws_.doubt[i] < least_doubt_ ? directly(i, t) : from_table(table_, i, t);
}

TurnoutCurve::Value TurnoutCurve::from_table(const std::vector<double>& table, int i, double t) const {
  if (laws_.common) return over_layers(table, i, t);
  return on_grid(table, i, 0, prior_mean_ + laws_.trust[i] * (t - prior_mean_));
}

/// The integral over M of what on_grid gives at each layer.
TurnoutCurve::Value TurnoutCurve::over_layers(const std::vector<double>& table, int i, double t) const {
  const double s = std::sqrt(laws_.haze[i]);
  const double centre = laws_.hint[i] * (t - prior_mean_);
  const double low = std::max(0.0, std::floor((centre - reach * s - first_shift_) / layer_step_));
  const double high = std::min(layers_ - 1.0, std::floor((centre + reach * s - first_shift_) / layer_step_) + 1.0);
  TwoSum share, slope;
  for (std::size_t l = static_cast<std::size_t>(low); l <= static_cast<std::size_t>(high); ++l) {
    const double z = (shift(l) - centre) / s;
    const double weight = layer_step_ / s * normal_density(z);
    const double turned = (t - prior_mean_) - laws_.sway[i] * shift(l);
    const Value value = on_grid(table, i, l, prior_mean_ + laws_.grip[i] * turned);
    share.add(weight * value.share);
    slope.add(weight * (value.slope + z / s * laws_.hint[i] * value.share));
  }
  return {share.value(), slope.value()};
}

TurnoutCurve::Value TurnoutCurve::on_grid(const std::vector<double>& all, int i, std::size_t layer,
                                          double centre) const {
  const double* table = all.data() + layer * nodes_;
  constexpr std::size_t most = 256;
  const double s = std::sqrt(laws_.doubt[i] - grid_.smoothing);
  const double low = std::max(0.0, std::floor((centre - reach * s - grid_.first) / grid_.step));
  const double high = std::min(grid_.nodes - 1.0, std::floor((centre + reach * s - grid_.first) / grid_.step) + 1.0);
  double weights[most], moments[most];
  TwoSum share, slope;
  const std::size_t end = static_cast<std::size_t>(high) + 1;
  for (std::size_t k = static_cast<std::size_t>(low); k < end; k += most) {
    const std::size_t count = std::min(most, end - k);
    for (std::size_t l = 0; l < count; ++l) {
      moments[l] = (node(k + l) - centre) / s;
      weights[l] = -0.5 * moments[l] * moments[l];
    }
    exponentials({weights, count}, {weights, count});
    share.add(ordered_dot({weights, count}, {table + k, count}));
    for (std::size_t l = 0; l < count; ++l) moments[l] *= weights[l];
    slope.add(ordered_dot({moments, count}, {table + k, count}));
  }
  const double scale = grid_.step / s * inverse_sqrt_two_pi;
  return {scale * share.value(), scale * slope.value() * laws_.grip[i] / s};
}

TurnoutCurve::Value TurnoutCurve::directly(int i, double t) const {
  constexpr int most = 256;
  double z[most];
  TwoSum share;
  const int n = static_cast<int>(weight_.size());
  for (int j = 0; j < n; j += most) {
    const std::size_t count = static_cast<std::size_t>(std::min(most, n - j));
    for (std::size_t l = 0; l < count; ++l) z[l] = independent_z(i, j + static_cast<int>(l), t);
    normal_cdf({z, count}, {z, count});
    share.add(ordered_dot({weight_.data() + j, count}, {z, count}));
  }
  return {share.value(), 0.0};
}

}  // namespace folkmote
