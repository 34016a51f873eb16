#include "equilibrium/wide_slopes.hpp"

#include <algorithm>
#include <cmath>

#include "numerics/normal.hpp"
#include "numerics/sums.hpp"

// S_i = reach_i { X_i - omega_i Phi(z0_ii) + sum over pairs of omega_j [Phi(z_ij) - Phi(z0_ij)] }
//       + contacts_i sum over heard j of omega_j Phi(z_ij),
// as in curve_game.cpp. X_i, an integral of the turnout curve over what i expects of theta, depends on i through
// trust_i = V_i / E_i and doubt_i = spread_i / (alpha E_i), and on j through pull_j = K_j / p_j and
// spread_j = K_j / p_j^2 + sigma_j^2; every derivative of it is one pass to a grid and one back (ThetaKernel).

namespace folkmote {

namespace {

constexpr double most_pairs = 5e7;

/// d(spread_j)/dK_j and d(spread_j)/dalpha.
double spread_by_held(const Knowledge& k, int j) {
  const double p = k.posterior_precision[j];
  return (1.0 - 2.0 * k.held[j] / p) / p / p;
}
double spread_by_prior(const Knowledge& k, int j) {
  const double p = k.posterior_precision[j];
  return -2.0 * k.held[j] / p / p / p;
}

}  // namespace

bool wide_slopes_serve(const Knowledge& knowledge) {
  return Overlap::pairs_at_most(knowledge, std::nullopt) <= most_pairs;
}

WideSlopes::WideSlopes(const Knowledge& knowledge, const InformationSlopes& slopes, const Stakes& stakes,
                       const StopFlag* stop)
    : Tangent(stop),
      knowledge_(knowledge),
      slopes_(slopes),
      stakes_(stakes),
      laws_(knowledge, std::nullopt),
      overlap_(knowledge, std::nullopt, false, {}),
      silent_(knowledge.size) {
  const double total = ordered_sum(stakes.weight);
  std::vector<char> listed(knowledge.size, 0);
  for (int i = 0; i < knowledge.size; ++i) {
    const Overlap::Row row = overlap_.row(i);
    double heard = 0.0;
    listed[i] = 1;
    for (std::uint32_t entry : row.member) {
      listed[Overlap::partner(entry)] = 1;
      if (Overlap::heard(entry)) heard += stakes.weight[Overlap::partner(entry)];
    }
    slopes.each_silent_partner(i, [&](int j) {
      if (listed[j] == 0) silent_[i].push_back(j);
      listed[j] = 1;
    });
    for (std::uint32_t entry : row.member) listed[Overlap::partner(entry)] = 0;
    for (int j : silent_[i]) listed[j] = 0;
    listed[i] = 0;
    reach_.push_back((1.0 - stakes.mix) / (total - stakes.weight[i]));
    contacts_.push_back(heard > 0.0 ? stakes.mix / heard : 0.0);
  }
}

ConditionalLaw WideSlopes::apart(int i, int j) const {
  const double pull = laws_.pull[j], trust = laws_.trust[i];
  return {(1.0 - pull) + pull * (1.0 - trust), std::sqrt(laws_.variance(i, j))};
}

/// `law`: nullptr where the exact law is that of independent members.
WideSlopes::Pair WideSlopes::make_pair(int i, int j, const ConditionalLaw* law, bool heard,
                                       std::span<const double> cutoffs) const {
  const double variance = knowledge_.index_variance[i], above_mean = cutoffs[i] - knowledge_.prior_mean;
  const double weight = stakes_.weight[j];
  const auto argument = [&](const ConditionalLaw& of) {
    return ((cutoffs[j] - cutoffs[i]) + of.one_less_rho * above_mean) / of.sd;
  };
  const ConditionalLaw independent = apart(i, j);
  const double z0 = argument(independent);
  Pair pair{};
  pair.member = j;
  pair.apart_weight = -weight * reach_[i];
  pair.apart_covariance = (1.0 - independent.one_less_rho) * variance;
  pair.apart_chance = normal_cdf(z0);
  pair.apart = pair_slopes(z0, independent, above_mean, variance);
  if (j == i) return pair;
  pair.exact_weight = weight * (reach_[i] + (heard ? contacts_[i] : 0.0));
  const ConditionalLaw exact = law != nullptr ? *law : independent;
  const double z = argument(exact);
  pair.exact_covariance = (1.0 - exact.one_less_rho) * variance;
  pair.exact_chance = normal_cdf(z);
  pair.exact = pair_slopes(z, exact, above_mean, variance);
  return pair;
}

template <class Visit>
void WideSlopes::each_pair(int i, std::span<const double> cutoffs, const Visit& visit) const {
  const Overlap::Row row = overlap_.row(i);
  visit(make_pair(i, i, nullptr, false, cutoffs));
  for (std::size_t k = 0; k < row.member.size(); ++k) {
    const ConditionalLaw law{row.one_less_rho[k], row.sd[k]};
    visit(make_pair(i, Overlap::partner(row.member[k]), &law, Overlap::heard(row.member[k]), cutoffs));
  }
  for (int j : silent_[i]) visit(make_pair(i, j, nullptr, false, cutoffs));
}

/// Whether somebody's index is certain, at all or given another's: there the gain jumps.
bool WideSlopes::certain() const {
  for (int i = 0; i < knowledge_.size; ++i) {
    if (knowledge_.index_variance[i] == 0.0) return true;
    for (double sd : overlap_.row(i).sd) {
      if (sd == 0.0) return true;
    }
  }
  return false;
}

bool WideSlopes::set(std::span<const double> cutoffs) {
  if (certain()) return false;
  const std::size_t n = cutoffs.size();
  centre_.resize(n);
  margin_.resize(n);
  for (std::size_t i = 0; i < n; ++i) {
    margin_[i] = cutoffs[i] - knowledge_.prior_mean;
    centre_[i] = laws_.trust[i] * margin_[i];
  }
  kernel_.emplace(ThetaKernel::Members{centre_, laws_.doubt, margin_, laws_.pull, laws_.spread});
  const std::vector<double> curve = kernel_->chances(stakes_.weight);
  gains_.resize(n);
  diagonal_.resize(n);
  share_.resize(n);
  expected_.clear();
  start_.assign(1, 0);
  partner_.clear();
  beside_.clear();
  for (int i = 0; i < knowledge_.size; ++i) {
    expected_.push_back(kernel_->expected(i, curve));
    take_row(i, cutoffs);
    start_.push_back(static_cast<std::int64_t>(partner_.size()));
  }
  return true;
}

/// Gain, slope and the entries beside the grid of one member.
void WideSlopes::take_row(int i, std::span<const double> cutoffs) {
  const double benefit = stakes_.benefit[i];
  double beside = 0.0, carried = 0.0;  // of the pairs
  each_pair(i, cutoffs, [&](const Pair& pair) {
    beside += pair.exact_weight * pair.exact_chance + pair.apart_weight * pair.apart_chance;
    carried += pair.exact_weight * pair.exact.carried + pair.apart_weight * pair.apart.carried;
    partner_.push_back(static_cast<std::uint32_t>(pair.member));
    beside_.push_back(benefit * (pair.exact_weight * pair.exact.cutoff + pair.apart_weight * pair.apart.cutoff));
  });
  share_[i] = reach_[i] * expected_[i].value + beside;
  gains_[i] = benefit * share_[i] - stakes_.cost[i] - cutoffs[i];
  diagonal_[i] = 1.0 + benefit * (carried - reach_[i] * laws_.trust[i] * expected_[i].by_centre);
}

std::vector<double> WideSlopes::passed(std::span<const double> v) const {
  const std::size_t n = v.size();
  std::vector<double> weighted(n), result(n);
  for (std::size_t j = 0; j < n; ++j) weighted[j] = stakes_.weight[j] * v[j];
  const std::vector<double> moved = kernel_->densities(weighted);
  for (std::size_t i = 0; i < n; ++i) {
    double sum = stakes_.benefit[i] * reach_[i] * kernel_->value(static_cast<int>(i), moved);
    for (std::int64_t k = start_[i]; k < start_[i + 1]; ++k) sum += beside_[k] * v[partner_[k]];
    result[i] = sum / diagonal_[i];
  }
  return result;
}

std::vector<double> WideSlopes::passed_back(std::span<const double> v) const {
  const std::size_t n = v.size();
  std::vector<double> weighted(n), result(n, 0.0);
  for (std::size_t i = 0; i < n; ++i) {
    const double scaled = v[i] / diagonal_[i];
    weighted[i] = scaled * stakes_.benefit[i] * reach_[i];
    for (std::int64_t k = start_[i]; k < start_[i + 1]; ++k) result[partner_[k]] += scaled * beside_[k];
  }
  const std::vector<double> view = kernel_->views(weighted);
  for (std::size_t j = 0; j < n; ++j) {
    result[j] += stakes_.weight[j] * kernel_->density(static_cast<int>(j), view);
  }
  return result;
}

GameGradient WideSlopes::gradient(std::span<const double> cutoffs, std::span<const double> multipliers) {
  GameGradient gradient(knowledge_);
  std::vector<double> by_shared(cutoffs.size(), 0.0);
  const auto add_covariance = [&](int i, int j, double by, const CovarianceSlopes& slopes) {
    gradient.held[i] += by * slopes.held_i;
    gradient.held[j] += by * slopes.held_j;
    gradient.prior_precision += by * slopes.prior_precision;
  };
  for (int i = 0; i < knowledge_.size; ++i) {
    const double x = multipliers[i] * stakes_.benefit[i];
    gradient.benefit[i] = multipliers[i] * share_[i];
    each_pair(i, cutoffs, [&](const Pair& pair) {
      const int j = pair.member;
      const double exact = x * pair.exact_weight, apart = x * pair.apart_weight;
      gradient.variance[j] += exact * pair.exact.other + apart * pair.apart.other;
      gradient.variance[i] += exact * pair.exact.own + apart * pair.apart.own;
      gradient.prior_mean -= exact * pair.exact.kept + apart * pair.apart.kept;
      const CovarianceSlopes slopes = covariance_slopes(knowledge_, pair.exact_covariance, i, j);
      add_covariance(i, j, exact * pair.exact.covariance, slopes);
      by_shared[j] = exact * pair.exact.covariance * slopes.shared;
      add_covariance(i, j, apart * pair.apart.covariance, covariance_slopes(knowledge_, pair.apart_covariance, i, j));
    });
    slopes_.add_row(i, by_shared, 1.0, gradient.sources);
    for (std::int64_t k = start_[i]; k < start_[i + 1]; ++k) by_shared[partner_[k]] = 0.0;
  }
  add_curve(cutoffs, multipliers, gradient);
  return gradient;
}

/// Through X_i.
void WideSlopes::add_curve(std::span<const double> cutoffs, std::span<const double> multipliers,
                           GameGradient& gradient) const {
  const Knowledge& k = knowledge_;
  const double alpha = k.prior_precision;
  std::vector<double> weight(cutoffs.size()), by_spread(cutoffs.size(), 0.0);
  for (int i = 0; i < k.size; ++i) {
    weight[i] = multipliers[i] * stakes_.benefit[i] * reach_[i];
    const double variance = k.index_variance[i], p = k.posterior_precision[i];
    const double by_centre = weight[i] * expected_[i].by_centre, by_doubt = weight[i] * expected_[i].by_doubt;
    const double by_trust = by_centre * margin_[i];
    gradient.prior_mean -= by_centre * laws_.trust[i];
    gradient.held[i] += by_trust / variance / p / p;
    gradient.prior_precision += by_trust / variance * variance_by_prior(k, i) - by_doubt * laws_.doubt[i] / alpha;
    gradient.variance[i] -= (by_trust * laws_.trust[i] + by_doubt * laws_.doubt[i]) / variance;
    by_spread[i] = by_doubt / alpha / variance;
  }
  const std::vector<double> view = kernel_->views(weight);
  for (int j = 0; j < k.size; ++j) {
    const ThetaKernel::Collected by = kernel_->collected(j, view);
    const double omega = stakes_.weight[j], p = k.posterior_precision[j];
    const double by_pull = omega * by.by_pull;
    by_spread[j] += omega * by.by_spread;
    gradient.prior_mean -= omega * by.by_margin;
    gradient.held[j] += by_pull * alpha / p / p + by_spread[j] * spread_by_held(k, j);
    gradient.prior_precision += by_spread[j] * spread_by_prior(k, j) - by_pull * k.held[j] / p / p;
    gradient.stake_sd[j] += by_spread[j] * 2.0 * k.stake_sd[j];
  }
}

std::vector<double> WideSlopes::raised(std::span<const double> cutoffs, const GameShift& shift) {
  std::vector<double> result = raised_curve(cutoffs, shift), shared(cutoffs.size(), 0.0);
  const auto moved = [&](int i, int j, double covariance, double own_shared) {
    const CovarianceSlopes slopes = covariance_slopes(knowledge_, covariance, i, j);
    return slopes.shared * own_shared + slopes.held_i * shift.held[i] + slopes.held_j * shift.held[j] +
           slopes.prior_precision * shift.prior_precision;
  };
  for (int i = 0; i < knowledge_.size; ++i) {
    slopes_.each_shared(shift.change, shift.broadcast, i, [&](int j, double part) { shared[j] += part; });
    shared[i] = 0.0;
    double sum = 0.0;
    each_pair(i, cutoffs, [&](const Pair& pair) {
      const int j = pair.member;
      const auto along = [&](const PairSlopes& slopes, double covariance) {
        return slopes.covariance * covariance + slopes.other * shift.variance[j] + slopes.own * shift.variance[i] -
               slopes.kept * shift.prior_mean;
      };
      sum += pair.exact_weight * along(pair.exact, moved(i, j, pair.exact_covariance, shared[j])) +
             pair.apart_weight * along(pair.apart, moved(i, j, pair.apart_covariance, 0.0));
    });
    slopes_.each_shared(shift.change, shift.broadcast, i, [&](int j, double) { shared[j] = 0.0; });
    result[i] += stakes_.benefit[i] * sum + share_[i] * shift.benefit - shift.cost;
  }
  return result;
}

/// What X_i gains.
std::vector<double> WideSlopes::raised_curve(std::span<const double> cutoffs, const GameShift& shift) const {
  const Knowledge& k = knowledge_;
  const double alpha = k.prior_precision;
  std::vector<double> pull, spread, result(cutoffs.size());
  for (int j = 0; j < k.size; ++j) {
    const double p = k.posterior_precision[j];
    pull.push_back((shift.held[j] * alpha - shift.prior_precision * k.held[j]) / p / p);
    spread.push_back(shift.held[j] * spread_by_held(k, j) + shift.prior_precision * spread_by_prior(k, j) +
                     shift.stake_sd * 2.0 * k.stake_sd[j]);
  }
  const std::vector<double> moved = kernel_->directions(stakes_.weight, -shift.prior_mean, pull, spread);
  for (int i = 0; i < k.size; ++i) {
    const double variance = k.index_variance[i], p = k.posterior_precision[i];
    const double estimate = shift.held[i] / p / p + shift.prior_precision * variance_by_prior(k, i);
    const double trust = (estimate - laws_.trust[i] * shift.variance[i]) / variance;
    const double doubt =
        spread[i] / alpha / variance - laws_.doubt[i] * (shift.prior_precision / alpha + shift.variance[i] / variance);
    result[i] =
        stakes_.benefit[i] * reach_[i] *
        (kernel_->value(i, moved) + expected_[i].by_centre * (trust * margin_[i] - laws_.trust[i] * shift.prior_mean) +
         expected_[i].by_doubt * doubt);
  }
  return result;
}

}  // namespace folkmote
