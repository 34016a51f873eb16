#include "turnout/large_turnout.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <new>

#include "numerics/binormal.hpp"
#include "numerics/normal.hpp"
#include "numerics/quadrature.hpp"
#include "numerics/sums.hpp"
#include "turnout/chance.hpp"

// Given theta, and M where a large audience shares a report (see ThetaLaws), members who share nothing else are
// independent. With A(theta, M) the curve and r0_ij the correlation of e_i and e_j through theta and M alone,
//   Var(A) Omega^2 = Var(A(theta, M)) Omega^2 + sum_i omega_i^2 (p_i - Phi2(z_i, z_i; r0_ii))
//                  + sum over overlapping i, j of omega_i omega_j (Phi2(z_i, z_j; r_ij) - Phi2(z_i, z_j; r0_ij)):
// what independent members would have, and a correction by pairs. The first term is integrated by the trapezoidal rule,
// its step set by the narrowest member as in turnout_curve.cpp (A^2 is half as wide).

namespace folkmote {

namespace {

constexpr int most_dense = 2000;
constexpr double most_pairs = 4e8;
constexpr double reach = 8.3;
constexpr double most_nodes = 4000.0;  // reached only where somebody knows theta, or M, to 1/500 of its spread

double standardised(double margin, double variance) {
  if (variance > 0.0) return margin / std::sqrt(variance);
  return margin >= 0.0 ? std::numeric_limits<double>::infinity() : -std::numeric_limits<double>::infinity();
}

double correlation(double covariance, double variance_i, double variance_j) {
  if (covariance == 0.0 || variance_i == 0.0 || variance_j == 0.0) return 0.0;
  return std::clamp(covariance / (std::sqrt(variance_i) * std::sqrt(variance_j)), -1.0, 1.0);
}

/// Nodes z and weights of a standard normal expectation of something of width `width`, in units of z.
struct Trapezoid {
  explicit Trapezoid(double width) {
    const double narrow2 = 0.5 * width * width;
    const double step = std::max(0.74 * std::sqrt(narrow2 / (1.0 + narrow2)), 2.0 * reach / most_nodes);
    for (double z = -reach; z <= reach; z += step) {
      nodes.push_back(z);
      weights.push_back(step * normal_density(z));
    }
  }
  std::vector<double> nodes, weights;
};

}  // namespace

bool is_large_for_turnout(int size) { return size > most_dense; }

LargeTurnout::LargeTurnout(const Knowledge& knowledge, std::span<const double> weights, const Execution& execution,
                           std::size_t least_audience)
    : knowledge_(knowledge),
      weights_(weights.begin(), weights.end()),
      execution_(execution),
      common_(common_report(knowledge, least_audience)),
      laws_(knowledge, common_),
      overlap_(Overlap::pairs_at_most(knowledge, common_) <= most_pairs ? Overlap(knowledge, common_, false, execution)
                                                                        : throw std::bad_alloc()) {
  const double alpha = knowledge.prior_precision;
  if (common_) common_variance_ = common_->precision / alpha / alpha;
}

/// A(theta, M) at theta - mu and M - mu.
double LargeTurnout::mean_at(std::span<const double> cutoffs, double above_mean, double shift) const {
  std::vector<double> z(weights_.size());
  for (std::size_t j = 0; j < z.size(); ++j) {
    const double margin = (cutoffs[j] - knowledge_.prior_mean) - laws_.pull[j] * above_mean - laws_.sway[j] * shift;
    z[j] = standardised(margin, laws_.spread[j]);
  }
  normal_cdf(z, z);
  return weighted_mean(weights_, z);
}

/// Width of the steepest member along theta, or along M, in units of that normal's standard deviation.
double LargeTurnout::narrowest(bool of_theta) const {
  const double scale = of_theta ? 1.0 / std::sqrt(knowledge_.prior_precision) : std::sqrt(common_variance_);
  double narrow = std::numeric_limits<double>::max();
  for (std::size_t j = 0; j < weights_.size(); ++j) {
    const double slope = of_theta ? laws_.pull[j] : laws_.sway[j];
    if (slope > 0.0) narrow = std::min(narrow, std::sqrt(laws_.spread[j]) / slope / scale);
  }
  return narrow;
}

/// Var(A(theta, M)), theta at `above_mean` unless it varies too.
double LargeTurnout::variance_of_curve(std::span<const double> cutoffs, bool theta_too, double above_mean) const {
  const Trapezoid over_theta(theta_too ? narrowest(true) : 1.0), over_m(common_ ? narrowest(false) : 1.0);
  const std::size_t rows = theta_too ? over_theta.nodes.size() : 1, columns = common_ ? over_m.nodes.size() : 1;
  const double theta_sd = 1.0 / std::sqrt(knowledge_.prior_precision), m_sd = std::sqrt(common_variance_);
  std::vector<double> first(rows * columns), weight(first.size());
  run_tasks(static_cast<std::int64_t>(first.size()), execution_, [&](std::int64_t k, const StopFlag&) {
    const std::size_t row = static_cast<std::size_t>(k) / columns, column = static_cast<std::size_t>(k) % columns;
    const double theta = theta_too ? theta_sd * over_theta.nodes[row] : above_mean;
    first[k] = mean_at(cutoffs, theta, common_ ? m_sd * over_m.nodes[column] : 0.0);
    weight[k] = (theta_too ? over_theta.weights[row] : 1.0) * (common_ ? over_m.weights[column] : 1.0);
  });
  const double mean = ordered_dot(first, weight) / ordered_sum(weight);
  for (double& value : first) value = (value - mean) * (value - mean);
  return ordered_dot(first, weight) / ordered_sum(weight);
}

Moments LargeTurnout::add_pairs(std::span<const double> z, std::span<const double> variance, const Base& base,
                                const Base& exact, double of_curve, double mean) const {
  const int n = knowledge_.size;
  std::vector<double> rows(n);
  constexpr int block = 1024;
  run_tasks((n + block - 1) / block, execution_, [&](std::int64_t task, const StopFlag& stop) {
    const int first = static_cast<int>(task) * block;
    for (int i = first; i < std::min(n, first + block) && !stop.raised(); ++i) {
      const double chance = normal_cdf(z[i]), own = correlation(base(i, i), variance[i], variance[i]);
      double sum = weights_[i] * (chance * (1.0 - chance) - (own == 0.0 ? 0.0 : binormal_covariance(z[i], z[i], own)));
      const Overlap::Row row = overlap_.row(i);
      for (std::size_t k = 0; k < row.member.size(); ++k) {
        const int j = Overlap::partner(row.member[k]);
        const double through = base(i, j);
        const double r0 = correlation(through, variance[i], variance[j]);
        const double r = correlation(exact(i, j) + (1.0 - row.one_less_rho[k]) * knowledge_.index_variance[i],
                                     variance[i], variance[j]);
        if (r == r0) continue;
        sum += weights_[j] *
               (binormal_covariance(z[i], z[j], r) - (r0 == 0.0 ? 0.0 : binormal_covariance(z[i], z[j], r0)));
      }
      rows[i] = weights_[i] * sum;
    }
  });
  const double total = ordered_sum(weights_);
  const double all = of_curve + ordered_sum(rows) / total / total;
  return {mean, all > 0.0 ? std::sqrt(all) : 0.0};
}

Moments LargeTurnout::moments(std::span<const double> cutoffs) const {
  std::vector<double> z(weights_.size());
  for (std::size_t i = 0; i < z.size(); ++i) {
    z[i] = standardised(cutoffs[i] - knowledge_.prior_mean, knowledge_.index_variance[i]);
  }
  const double alpha = knowledge_.prior_precision;
  const Base through = [&](int i, int j) {
    return laws_.pull[i] * laws_.pull[j] / alpha + laws_.sway[i] * laws_.sway[j] * common_variance_;
  };
  const Base nothing = [](int, int) { return 0.0; };
  return add_pairs(z, knowledge_.index_variance, through, nothing, variance_of_curve(cutoffs, true, 0.0),
                   weighted_mean(weights_, chances(knowledge_, cutoffs)));
}

Moments LargeTurnout::moments_given(std::span<const double> cutoffs, double obstacle) const {
  const double alpha = knowledge_.prior_precision, above_mean = obstacle - knowledge_.prior_mean;
  std::vector<double> z(weights_.size()), variance(z.size());
  for (std::size_t i = 0; i < z.size(); ++i) {
    variance[i] = laws_.spread[i] + laws_.sway[i] * laws_.sway[i] * common_variance_;
    z[i] = standardised((cutoffs[i] - knowledge_.prior_mean) - laws_.pull[i] * above_mean, variance[i]);
  }
  const Base through = [&](int i, int j) { return laws_.sway[i] * laws_.sway[j] * common_variance_; };
  // Cov(e_i, e_j | theta) is the pair's covariance less the part that comes through theta.
  const Base less = [&](int i, int j) { return -laws_.pull[i] * laws_.pull[j] / alpha; };
  const double of_curve = common_ ? variance_of_curve(cutoffs, false, above_mean) : 0.0;
  return add_pairs(z, variance, through, less, of_curve,
                   weighted_mean(weights_, chances_given(knowledge_, cutoffs, obstacle)));
}

/// The threshold, with half a member of continuity correction where weights are equal.
double LargeTurnout::bar(double threshold) const {
  const bool equal = std::all_of(weights_.begin(), weights_.end(), [&](double w) { return w == weights_[0]; });
  if (!equal) return threshold;
  return (members_needed(knowledge_.size, threshold) - 0.5) / knowledge_.size;
}

double LargeTurnout::chance_given(std::span<const double> cutoffs, double threshold, double obstacle) const {
  if (threshold <= 0.0) return 1.0;
  const Moments found = moments_given(cutoffs, obstacle);
  if (found.sd == 0.0) return found.mean >= threshold ? 1.0 : 0.0;
  return normal_cdf((found.mean - bar(threshold)) / found.sd);
}

/// Expected turnout falls in theta: the chance is 1 well below the theta at which it meets the bar, and 0 well above.
/// Only in between, where the standard deviation matters, is it integrated.
double LargeTurnout::chance(std::span<const double> cutoffs, double threshold) const {
  constexpr double far = 8.0;
  if (threshold <= 0.0) return 1.0;
  const double scale = 1.0 / std::sqrt(knowledge_.prior_precision), meets = bar(threshold);
  const auto obstacle = [&](double z) { return knowledge_.prior_mean + scale * z; };
  const auto above = [&](double z) {
    return weighted_mean(weights_, chances_given(knowledge_, cutoffs, obstacle(z))) - meets;
  };
  double low = -far, high = far;
  if (above(low) > 0.0 && above(high) < 0.0) {
    for (int step = 0; step < 60; ++step) {
      const double middle = 0.5 * (low + high);
      (above(middle) > 0.0 ? low : high) = middle;
    }
  }
  // Outwards from the crossing to where eight and more standard deviations lie between.
  const auto settled = [&](double z) {
    const Moments found = moments_given(cutoffs, obstacle(z));
    return std::fabs(found.mean - meets) > reach * found.sd;
  };
  double room = 1.0 / 64.0;
  while (low > -far && !settled(std::max(-far, low - room))) low = std::max(-far, low - room), room *= 2.0;
  low = std::max(-far, low - room);
  room = 1.0 / 64.0;
  while (high < far && !settled(std::min(far, high + room))) high = std::min(far, high + room), room *= 2.0;
  high = std::min(far, high + room);
  const QuadratureRule rule = gauss_legendre(10);
  const int panels = std::clamp(static_cast<int>(2.0 * (high - low)) + 4, 4, 24);
  double sum = normal_cdf(low);
  for (int p = 0; p < panels; ++p) {
    const double half = 0.5 * (high - low) / panels, centre = low + half * (2.0 * p + 1.0);
    for (std::size_t k = 0; k < rule.nodes.size(); ++k) {
      const double z = centre + half * rule.nodes[k];
      sum += half * rule.weights[k] * normal_density(z) * chance_given(cutoffs, threshold, obstacle(z));
    }
  }
  return std::clamp(sum, 0.0, 1.0);
}

}  // namespace folkmote
