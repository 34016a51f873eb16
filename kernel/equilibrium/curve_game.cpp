#include "equilibrium/curve_game.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "equilibrium/independent_bound.hpp"
#include "equilibrium/reply.hpp"
#include "numerics/normal.hpp"
#include "numerics/sums.hpp"

// S_i(t) = (1 - mix) [ X_i(t) - omega_i Phi(z0_ii) + sum over overlapping j of omega_j (Phi(z_ij) - Phi(z0_ij)) ] /
// (Omega - omega_i)
//        + mix sum over heard j of omega_j Phi(z_ij) / (sum of omega over heard j),
// with X_i from the turnout curve, z_ij the exact law of the pair, and z0_ij the law that it would have without shared
// information: what the curve has counted for it.

namespace folkmote {

namespace {

constexpr double infinity = std::numeric_limits<double>::infinity();
constexpr double inverse_sqrt_two_pi = 0x1.9884533d43651p-2;

std::vector<double> heard_weights(const Knowledge& knowledge, const Stakes& stakes) {
  std::vector<double> totals;
  for (int i = 0; i < knowledge.size; ++i) {
    std::vector<double> weights;
    for (std::int64_t k = knowledge.start[i]; k < knowledge.start[i + 1]; ++k) {
      weights.push_back(stakes.weight[knowledge.speaker[k]]);
    }
    totals.push_back(ordered_sum(weights));
  }
  return totals;
}

std::vector<double> negated(std::vector<double> values) {
  for (double& value : values) value = -value;
  return values;
}

/// b_i (sum of w_ij) - c_i.
std::vector<double> highest_cutoffs(const Stakes& stakes, std::span<const double> heard_weight) {
  std::vector<double> highest;
  for (std::size_t i = 0; i < stakes.benefit.size(); ++i) {
    const double community = stakes.benefit.size() > 1 ? 1.0 - stakes.mix : 0.0;
    const double contacts = heard_weight[i] > 0.0 ? stakes.mix : 0.0;
    highest.push_back(stakes.benefit[i] * (community + contacts) - stakes.cost[i]);
  }
  return highest;
}

}  // namespace

CurveGame::CurveGame(const Knowledge& knowledge, Stakes stakes)
    : prior_mean_(knowledge.prior_mean),
      stakes_(std::move(stakes)),
      overlap_(knowledge, stakes_.mix == 1.0),
      heard_weight_(heard_weights(knowledge, stakes_)),
      lowest_(negated(stakes_.cost)),
      highest_(highest_cutoffs(stakes_, heard_weight_)),
      curve_(knowledge.prior_mean, ThetaLaws(knowledge), stakes_.weight, lowest_, highest_, {}) {}

void CurveGame::set(std::span<const double> cutoffs, BestReply::Limit at_jump, const Execution& execution) {
  cutoffs_.assign(cutoffs.begin(), cutoffs.end());
  limit_ = at_jump;
  if (stakes_.mix < 1.0) curve_.tabulate(cutoffs, at_jump == BestReply::Limit::left, execution);
}

CurveGame::Pairs CurveGame::pairs(int member, double t) const {
  constexpr std::size_t most = 256;
  const Overlap::Row row = overlap_.row(member);
  const double above_mean = t - prior_mean_;
  double exact[most], apart[most];
  Pairs sums;
  for (std::size_t first = 0; first < row.member.size(); first += most) {
    const std::size_t count = std::min(most, row.member.size() - first);
    for (std::size_t k = 0; k < count; ++k) {
      const int j = Overlap::partner(row.member[first + k]);
      const double margin = (cutoffs_[j] - t) + row.one_less_rho[first + k] * above_mean;
      const double sd = row.sd[first + k];
      const bool acts = limit_ == BestReply::Limit::left ? margin >= 0.0 : margin > 0.0;
      exact[k] = sd > 0.0 ? margin / sd : (acts ? infinity : -infinity);
      apart[k] = stakes_.mix < 1.0 ? curve_.independent_z(member, j, t) : 0.0;
    }
    normal_cdf({exact, count}, {exact, count});
    normal_cdf({apart, count}, {apart, count});
    for (std::size_t k = 0; k < count; ++k) {
      const std::uint32_t entry = row.member[first + k];
      const double weight = stakes_.weight[Overlap::partner(entry)];
      sums.correction += weight * (exact[k] - apart[k]);
      if (Overlap::heard(entry)) sums.heard += weight * exact[k];
    }
  }
  return sums;
}

double CurveGame::gain(int member, double t) const {
  const Pairs sums = pairs(member, t);
  double share = 0.0;
  if (stakes_.mix < 1.0 && size() > 1) {
    const double weight = stakes_.weight[member];
    const double own = weight * normal_cdf(curve_.independent_z(member, member, t));
    const double others = curve_.expect(member, t).share - own + sums.correction;
    share += (1.0 - stakes_.mix) * others / (curve_.total() - weight);
  }
  if (stakes_.mix > 0.0 && heard_weight_[member] > 0.0) share += stakes_.mix * sums.heard / heard_weight_[member];
  return stakes_.benefit[member] * share - stakes_.cost[member] - t;
}

double CurveGame::reply(int member, double from) const {
  return reply_from(from, [&](double t) { return gain(member, t); });
}

double CurveGame::error(int member) const {
  // Rounding of the pairs' sums beside the curve's own error.
  const double pairs = 0x1p-50 * static_cast<double>(overlap_.row(member).member.size() + 8);
  const double others = curve_.total() - stakes_.weight[member];
  const double of_curve = stakes_.mix < 1.0 && others > 0.0 ? curve_.error() / others : 0.0;
  return stakes_.benefit[member] * (of_curve + pairs);
}

double CurveGame::contraction_bound() const {
  const IndependentBound independent(curve_.laws(), stakes_.weight);
  double bound = 0.0;
  for (int i = 0; i < size(); ++i) {
    if (stakes_.benefit[i] == 0.0) continue;
    const Overlap::Row row = overlap_.row(i);
    double heard = 0.0, others = stakes_.mix < 1.0 ? independent.sum(i) : 0.0;
    if (stakes_.mix < 1.0) others -= stakes_.weight[i] * independent.term(i, i);
    for (std::size_t k = 0; k < row.member.size(); ++k) {
      const int j = Overlap::partner(row.member[k]);
      const double exact = row.sd[k] > 0.0 ? row.one_less_rho[k] / row.sd[k] : infinity;
      if (Overlap::heard(row.member[k])) heard += stakes_.weight[j] * exact;
      if (stakes_.mix < 1.0) others += stakes_.weight[j] * (exact - independent.term(i, j));
    }
    double sum = 0.0;
    if (stakes_.mix < 1.0 && size() > 1) sum += (1.0 - stakes_.mix) * others / (curve_.total() - stakes_.weight[i]);
    if (stakes_.mix > 0.0 && heard_weight_[i] > 0.0) sum += stakes_.mix * heard / heard_weight_[i];
    // A difference of infinities says nothing: no proof.
    bound = std::max(bound, std::isnan(sum) ? infinity : stakes_.benefit[i] * sum * inverse_sqrt_two_pi);
  }
  // Sums of up to 10^6 terms in a few lanes, and terms of a relative error of a few roundings.
  return bound * (1.0 + 1e-9);
}

}  // namespace folkmote
