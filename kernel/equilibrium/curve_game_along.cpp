#include "numerics/strict.hpp"

#include <algorithm>
#include <cmath>

#include "equilibrium/curve_game.hpp"
#include "equilibrium/independent_bound.hpp"
#include "numerics/elementary.hpp"

// How gains move when all cutoffs move together: R_i(v) from the curve's own derivative, with the pairs that share
// information corrected as in curve_game.cpp, and a bound on how fast R_i(v) itself can change, from |phi'| <= 0.242.

namespace folkmote {

namespace {

constexpr double inverse_sqrt_two_pi = 0x1.9884533d43651p-2;
constexpr double steepest_density = 0.2419708;  // max |phi'| = phi(1), rounded up
constexpr double unit = 0x1p-53;

}  // namespace

bool CurveGame::set_direction(std::span<const double> direction, const Execution& execution) {
  if (curvature_.empty()) bound_curvature(execution);
  if (has_step_) return false;
  direction_.assign(direction.begin(), direction.end());
  return stakes_.mix == 1.0 || curve_.tabulate_direction(direction, execution);
}

void CurveGame::bound_curvature(const Execution& execution) {
  const IndependentBound independent(curve_.laws(), stakes_.weight);
  curvature_.assign(size(), 0.0);
  std::vector<char> steps(size(), 0);
  for_members(execution, [&](int i) {
    const Overlap::Row row = overlap_.row(i);
    double all = independent.inverse_variances(i), heard = 0.0;
    for (std::size_t k = 0; k < row.member.size(); ++k) {
      steps[i] |= row.sd[k] == 0.0;
      const double term = stakes_.weight[Overlap::partner(row.member[k])] / (row.sd[k] * row.sd[k]);
      all += term;
      if (Overlap::heard(row.member[k])) heard += term;
    }
    const double others = curve_.total() - stakes_.weight[i];
    double sum = stakes_.mix < 1.0 && others > 0.0 ? (1.0 - stakes_.mix) * all / others : 0.0;
    if (stakes_.mix > 0.0 && heard_weight_[i] > 0.0) sum += stakes_.mix * heard / heard_weight_[i];
    curvature_[i] = stakes_.benefit[i] > 0.0 ? 1.01 * steepest_density * stakes_.benefit[i] * sum : 0.0;
  });
  has_step_ = std::any_of(steps.begin(), steps.end(), [](char step) { return step != 0; });
}

/// The share's derivative by the pairs of the row, and what rounding can have done to it.
double CurveGame::pairs_along(int member, double& error) const {
  const Overlap::Row row = overlap_.row(member);
  const ThetaLaws& laws = curve_.laws();
  const double t = partners_[member].cutoff, v = direction_[member];
  const double others = curve_.total() - stakes_.weight[member];
  const double reached = stakes_.mix < 1.0 ? (1.0 - stakes_.mix) / others : 0.0;
  const double of_heard = stakes_.mix > 0.0 && heard_weight_[member] > 0.0 ? stakes_.mix / heard_weight_[member] : 0.0;
  const double rounding = unit * (8.0 + static_cast<double>(row.member.size()));
  double sum = 0.0;
  for (std::size_t k = 0; k < row.member.size(); ++k) {
    const int other = Overlap::partner(row.member[k]);
    const Partner& j = partners_[other];
    const double z = ((j.cutoff - t) + row.one_less_rho[k] * (t - prior_mean_)) / row.sd[k];
    const double change = (direction_[other] - (1.0 - row.one_less_rho[k]) * v) / row.sd[k];
    const double exact = j.weight * inverse_sqrt_two_pi * exponential(-0.5 * z * z) * change;
    const double factor = reached + (Overlap::heard(row.member[k]) ? of_heard : 0.0);
    sum += factor * exact;
    const double apart_sd = reached > 0.0 ? std::sqrt(laws.variance(member, other)) : 1.0;
    if (reached > 0.0) {
      const double z0 = curve_.independent_z(member, other, t);
      const double change0 = (direction_[other] - laws.slope(member, other) * v) / apart_sd;
      sum -= reached * j.weight * inverse_sqrt_two_pi * exponential(-0.5 * z0 * z0) * change0;
    }
    const double narrow = std::min(row.sd[k], apart_sd);
    error += factor * j.weight * (rounding + 4.0 * unit * largest_ / narrow) / narrow;
  }
  return sum;
}

double CurveGame::along(int member, double outward) const {
  const double benefit = stakes_.benefit[member];
  if (benefit == 0.0) return 0.0;
  const double t = partners_[member].cutoff, weight = stakes_.weight[member];
  double error = 0.0;
  double sum = pairs_along(member, error);
  const double others = curve_.total() - weight;
  if (stakes_.mix < 1.0 && others > 0.0) {
    const ThetaLaws& laws = curve_.laws();
    const double z = curve_.independent_z(member, member, t), sd = std::sqrt(laws.variance(member, member));
    const double own = weight * inverse_sqrt_two_pi * exponential(-0.5 * z * z) / sd * direction_[member] *
                       (1.0 - laws.slope(member, member));
    sum += (1.0 - stakes_.mix) / others * (curve_.along(member, t) - own);
    error += (1.0 - stakes_.mix) / others * curve_.error_along();
  }
  return benefit * (sum + outward * error);
}

}  // namespace folkmote
