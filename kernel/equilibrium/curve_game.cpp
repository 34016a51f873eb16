#include "equilibrium/curve_game.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "equilibrium/independent_bound.hpp"
#include "equilibrium/reply.hpp"
#include "information/two_sum.hpp"
#include "numerics/normal.hpp"
#include "numerics/sums.hpp"
#include "numerics/two.hpp"

// S_i(t) = (1 - mix) [ X_i(t) - omega_i Phi(z0_ii) + sum over overlapping j of omega_j (Phi(z_ij) - Phi(z0_ij)) ] /
// (Omega - omega_i)
//        + mix sum over heard j of omega_j Phi(z_ij) / (sum of omega over heard j),
// with X_i from the turnout curve, z_ij the exact law of the pair, and z0_ij the law that it would have without shared
// information: what the curve has counted for it.

namespace folkmote {

namespace {

constexpr int block = 256;  // pairs at a time
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

double sum_of_heard(std::span<const std::uint32_t> entries, std::span<const double> weight,
                    std::span<const double> chance) {
  double sum = 0.0;
  for (std::size_t k = 0; k < entries.size(); ++k) {
    if (Overlap::heard(entries[k])) sum += weight[k] * chance[k];
  }
  return sum;
}

/// margins / sd; where sd is 0 the index is certain, and decides by the side on which it lies.
void divide_by_sd(std::span<double> margins, std::span<const double> sd, bool steps_act) {
  std::size_t k = 0;
  for (; k + 2 <= margins.size(); k += 2) store_two(&margins[k], load_two(&margins[k]) / load_two(&sd[k]));
  for (; k < margins.size(); ++k) margins[k] /= sd[k];
  for (k = 0; k < margins.size(); ++k) {
    if (sd[k] > 0.0) continue;
    // margin / 0: NaN at the cutoff itself, else an infinity of the right sign already.
    if (std::isnan(margins[k])) margins[k] = steps_act ? infinity : -infinity;
  }
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

CurveGame::CurveGame(const Knowledge& knowledge, Stakes stakes, const Execution& execution, std::size_t least_audience)
    : prior_mean_(knowledge.prior_mean),
      stakes_(std::move(stakes)),
      common_(common_report(knowledge, least_audience)),
      overlap_(knowledge, common_, stakes_.mix == 1.0, execution),
      heard_weight_(heard_weights(knowledge, stakes_)),
      lowest_(negated(stakes_.cost)),
      highest_(highest_cutoffs(stakes_, heard_weight_)),
      curve_(knowledge.prior_mean, ThetaLaws(knowledge, common_), stakes_.weight, lowest_, highest_, {}) {
  for (int j = 0; j < size(); ++j) {
    partners_.push_back({0.0, curve_.laws().pull[j], curve_.laws().spread[j], stakes_.weight[j]});
    largest_ = std::max({largest_, std::fabs(lowest_[j]), std::fabs(highest_[j])});
  }
  if (!serves()) return;
  error_.resize(size());
  for_members(execution, [&](int i) { error_[i] = error_bound(i); });
}

void CurveGame::set(std::span<const double> cutoffs, BestReply::Limit at_jump, const Execution& execution) {
  for (std::size_t j = 0; j < cutoffs.size(); ++j) partners_[j].cutoff = cutoffs[j];
  limit_ = at_jump;
  if (stakes_.mix < 1.0) curve_.tabulate(cutoffs, at_jump == BestReply::Limit::left, execution);
}

CurveGame::Pairs CurveGame::pairs(int member, double t) const {
  const Overlap::Row row = overlap_.row(member);
  const double above_mean = t - prior_mean_;
  const bool steps_act = limit_ == BestReply::Limit::left;
  double exact[block], apart[block], sd[block], weight[block];
  TwoSum correction, heard;
  for (std::size_t first = 0; first < row.member.size(); first += block) {
    const std::size_t count = std::min<std::size_t>(block, row.member.size() - first);
    const auto entries = row.member.subspan(first, count);
    for (std::size_t k = 0; k < count; ++k) {
      const Partner& j = partners_[Overlap::partner(entries[k])];
      weight[k] = j.weight;
      exact[k] = (j.cutoff - t) + row.one_less_rho[first + k] * above_mean;
    }
    divide_by_sd({exact, count}, row.sd.subspan(first, count), steps_act);
    normal_cdf({exact, count}, {exact, count});
    if (stakes_.mix > 0.0) heard.add(sum_of_heard(entries, {weight, count}, {exact, count}));
    if (stakes_.mix == 1.0) continue;
    lay_apart(member, t, entries, {apart, count}, {sd, count});
    divide_by_sd({apart, count}, {sd, count}, steps_act);
    normal_cdf({apart, count}, {apart, count});
    for (std::size_t k = 0; k < count; ++k) exact[k] -= apart[k];
    correction.add(ordered_dot({weight, count}, {exact, count}));
  }
  return {heard.value(), correction.value()};
}

/// What the curve has counted for the members of these entries: margins, and standard deviations.
void CurveGame::lay_apart(int member, double t, std::span<const std::uint32_t> entries, std::span<double> margin,
                          std::span<double> sd) const {
  const ThetaLaws& laws = curve_.laws();
  const double above_mean = t - prior_mean_;
  const double foreseen = laws.trust[member] * above_mean, doubt = laws.doubt[member];
  for (std::size_t k = 0; k < entries.size(); ++k) {
    const int other = Overlap::partner(entries[k]);
    const Partner& j = partners_[other];
    if (laws.common) {
      margin[k] = (j.cutoff - prior_mean_) - laws.slope(member, other) * above_mean;
      sd[k] = std::sqrt(laws.variance(member, other));
    } else {
      margin[k] = (j.cutoff - prior_mean_) - j.pull * foreseen;
      sd[k] = std::sqrt(j.spread + j.pull * j.pull * doubt);
    }
  }
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

/// What rounding can do to the sums over pairs, beside the curve's own error. Phi errs by a few units in its value, and
/// by phi times the error of z, whose numerator is a difference of numbers of the size of cutoffs. Sums run over
/// blocks.
double CurveGame::error_bound(int member) const {
  constexpr double unit = 0x1p-53, in_value = 8.0, in_sums = block + 8.0;
  const double size = std::fabs(prior_mean_) + std::max(std::fabs(largest_), std::fabs(prior_mean_));
  const auto of_term = [&](double sd) { return sd > 0.0 ? std::min(1.0, unit * (in_value + 2.0 * size / sd)) : 0.0; };
  const Overlap::Row row = overlap_.row(member);
  const ThetaLaws& laws = curve_.laws();
  double all = 0.0, heard = 0.0, weight_of_all = 0.0;
  for (std::size_t k = 0; k < row.member.size(); ++k) {
    const Partner& j = partners_[Overlap::partner(row.member[k])];
    const double exact = j.weight * of_term(row.sd[k]);
    const double apart = laws.common ? laws.variance(member, Overlap::partner(row.member[k]))
                                     : j.spread + j.pull * j.pull * laws.doubt[member];
    all += exact + j.weight * of_term(std::sqrt(apart));
    weight_of_all += j.weight;
    if (Overlap::heard(row.member[k])) heard += exact;
  }
  double error = in_value * unit;
  const double others = curve_.total() - stakes_.weight[member];
  if (stakes_.mix < 1.0 && others > 0.0) error += (all + unit * in_sums * weight_of_all + curve_.error()) / others;
  if (heard_weight_[member] > 0.0) error += stakes_.mix * (heard / heard_weight_[member] + unit * in_sums);
  return 1.01 * (stakes_.benefit[member] * error + 4.0 * unit * size);
}

double CurveGame::contraction_bound(const Execution& execution) const {
  const IndependentBound independent(curve_.laws(), stakes_.weight);
  std::vector<double> bounds(size());
  for_members(execution, [&](int i) { bounds[i] = contraction_of(i, independent); });
  // Sums of up to 10^6 terms in a few lanes, and terms of a relative error of a few roundings.
  return *std::max_element(bounds.begin(), bounds.end()) * (1.0 + 1e-9);
}

double CurveGame::contraction_of(int i, const IndependentBound& independent) const {
  if (stakes_.benefit[i] == 0.0) return 0.0;
  const Overlap::Row row = overlap_.row(i);
  double heard = 0.0, others = stakes_.mix < 1.0 ? independent.sum(i) : 0.0;
  if (stakes_.mix < 1.0) others -= partners_[i].weight * independent.term(i, partners_[i].pull, partners_[i].spread);
  for (std::size_t k = 0; k < row.member.size(); ++k) {
    const Partner& j = partners_[Overlap::partner(row.member[k])];
    const double exact = row.sd[k] > 0.0 ? row.one_less_rho[k] / row.sd[k] : infinity;
    if (Overlap::heard(row.member[k])) heard += j.weight * exact;
    if (stakes_.mix < 1.0) others += j.weight * (exact - independent.term(i, j.pull, j.spread));
  }
  double sum = 0.0;
  if (stakes_.mix < 1.0 && size() > 1) sum += (1.0 - stakes_.mix) * others / (curve_.total() - stakes_.weight[i]);
  if (stakes_.mix > 0.0 && heard_weight_[i] > 0.0) sum += stakes_.mix * heard / heard_weight_[i];
  // A difference of infinities says nothing: no proof.
  return std::isnan(sum) ? infinity : stakes_.benefit[i] * sum * inverse_sqrt_two_pi;
}

}  // namespace folkmote
