#include "equilibrium/best_reply.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "equilibrium/reply.hpp"
#include "numerics/normal.hpp"
#include "numerics/sums.hpp"

namespace folkmote {

namespace {

constexpr double infinity = std::numeric_limits<double>::infinity();
constexpr double inverse_sqrt_two_pi = 0x1.9884533d43651p-2;

}  // namespace

BestReply::BestReply(const Knowledge& knowledge, const SharedInformation& shared, const Stakes& stakes)
    : prior_mean_(knowledge.prior_mean) {
  rows_.reserve(knowledge.size);
  for (int i = 0; i < knowledge.size; ++i) {
    ReachRow reach = reach_of(stakes, knowledge, i);
    Row row{stakes.benefit[i], stakes.cost[i], std::move(reach.member), std::move(reach.weight), {}, {}, false};
    for (int j : row.member) {
      const ConditionalLaw law = shared.law(i, j);
      row.one_less_rho.push_back(law.one_less_rho);
      row.sd.push_back(law.sd);
      row.has_step = row.has_step || law.sd == 0.0;
    }
    rows_.push_back(std::move(row));
  }
  scratch_.resize(knowledge.size);
  moved_.resize(knowledge.size);
}

/// z_ij = [ (kappa_j - t) + (1 - rho_ij)(t - mu) ] / s_ij.
void BestReply::standardise(const Row& row, double t, std::span<const double> cutoffs, std::span<double> z) const {
  const double above_mean = t - prior_mean_;
  for (std::size_t k = 0; k < z.size(); ++k) {
    z[k] = ((cutoffs[row.member[k]] - t) + row.one_less_rho[k] * above_mean) / row.sd[k];
  }
}

double BestReply::expected_share(const Row& row, double t, std::span<const double> cutoffs, Limit at_jump) {
  const std::size_t count = row.member.size();
  const std::span<double> z(scratch_.data(), count);
  standardise(row, t, cutoffs, z);
  if (row.has_step) apply_steps(row, t, cutoffs, at_jump, z);
  normal_cdf(z, z);
  return ordered_dot(row.weight, z);
}

/// No spread: j acts for certain when its cutoff lies above its index, and not at all below.
void BestReply::apply_steps(const Row& row, double t, std::span<const double> cutoffs, Limit at_jump,
                            std::span<double> z) const {
  for (std::size_t k = 0; k < z.size(); ++k) {
    if (row.sd[k] > 0.0) continue;
    const double margin = (cutoffs[row.member[k]] - t) + row.one_less_rho[k] * (t - prior_mean_);
    const bool acts = at_jump == Limit::left ? margin >= 0.0 : margin > 0.0;
    z[k] = acts ? infinity : -infinity;
  }
}

double BestReply::gain(int member, double t, std::span<const double> cutoffs, Limit at_jump) {
  const Row& row = rows_[member];
  return row.benefit * expected_share(row, t, cutoffs, at_jump) - row.cost - t;
}

double BestReply::reply(int member, double from, std::span<const double> cutoffs, Limit at_jump) {
  return reply_from(from, [&](double t) { return gain(member, t, cutoffs, at_jump); });
}

double BestReply::steepest(int member, std::span<const double> cutoffs, std::span<const double> direction,
                           double step) {
  const Row& row = rows_[member];
  if (row.has_step) return infinity;
  const std::size_t count = row.member.size();
  const std::span<double> here(scratch_.data(), count);
  const std::span<double> there(moved_.data(), count);
  standardise(row, cutoffs[member], cutoffs, here);
  double sum = 0.0;
  for (std::size_t k = 0; k < count; ++k) {
    const double pull = ((1.0 - row.one_less_rho[k]) * direction[member] - direction[row.member[k]]) / row.sd[k];
    there[k] = here[k] - step * pull;
    // z moves along a line, so that the density is least at one of its ends, and greatest at 0 if that lies between.
    const double far = std::max(std::fabs(here[k]), std::fabs(there[k]));
    const bool crosses = (here[k] < 0.0) != (there[k] < 0.0);
    const double near = crosses ? 0.0 : std::min(std::fabs(here[k]), std::fabs(there[k]));
    sum += row.weight[k] * pull * normal_density(pull < 0.0 ? far : near);
  }
  return direction[member] + row.benefit * sum;
}

double BestReply::surviving(int member, std::span<const double> least, std::span<const double> greatest,
                            std::span<const double> v) const {
  const Row& row = rows_[member];
  if (row.benefit == 0.0) return 0.0;
  double sum = 0.0;
  for (std::size_t k = 0; k < row.member.size(); ++k) {
    if (row.weight[k] == 0.0) continue;
    if (row.sd[k] == 0.0) return infinity;
    const int j = row.member[k];
    const double rho = 1.0 - row.one_less_rho[k];
    // kappa_j - mu - rho (kappa_i - mu) over the box; rho lies in [0, 1].
    const double low = (least[j] - prior_mean_) - rho * (greatest[member] - prior_mean_);
    const double high = (greatest[j] - prior_mean_) - rho * (least[member] - prior_mean_);
    const double change = (v[j] - rho * v[member]) / row.sd[k];
    const bool crosses = low < 0.0 && high > 0.0;
    const double near = crosses ? 0.0 : std::min(std::fabs(low), std::fabs(high));
    const double far = std::max(std::fabs(low), std::fabs(high));
    sum += row.weight[k] * change * normal_density((change > 0.0 ? near : far) / row.sd[k]);
  }
  return row.benefit * sum;
}

bool BestReply::derivatives(int member, std::span<const double> cutoffs, std::span<double> out) {
  const Row& row = rows_[member];
  if (row.has_step) return false;
  const std::span<double> z(scratch_.data(), row.member.size());
  standardise(row, cutoffs[member], cutoffs, z);
  std::fill(out.begin(), out.end(), 0.0);
  double own = 0.0;
  for (std::size_t k = 0; k < z.size(); ++k) {
    const double pull = row.benefit * row.weight[k] * normal_density(z[k]) / row.sd[k];
    out[row.member[k]] = pull;
    own += pull * (1.0 - row.one_less_rho[k]);
  }
  out[member] = -1.0 - own;
  return true;
}

double BestReply::highest(int member) const {
  const Row& row = rows_[member];
  return row.benefit * ordered_sum(row.weight) - row.cost;
}

double BestReply::contraction_bound() const {
  double bound = 0.0;
  for (const Row& row : rows_) {
    double sum = 0.0;
    for (std::size_t k = 0; k < row.member.size(); ++k) {
      if (row.weight[k] > 0.0) sum += row.weight[k] * (row.sd[k] > 0.0 ? row.one_less_rho[k] / row.sd[k] : infinity);
    }
    if (row.benefit > 0.0) bound = std::max(bound, row.benefit * sum * inverse_sqrt_two_pi);
  }
  // At most a few thousand roundings of 2^-53 each: 1e-12 covers them.
  return bound * (1.0 + 1e-12);
}

}  // namespace folkmote
