#include "turnout/moments.hpp"

#include <cmath>
#include <limits>

#include "numerics/binormal.hpp"
#include "numerics/normal.hpp"
#include "numerics/sums.hpp"

namespace folkmote {

namespace {

/// (cutoff - centre) / sd, with the step at sd = 0: acts for certain at the cutoff, never above it.
double standardised(double margin, double variance) {
  if (variance > 0.0) return margin / std::sqrt(variance);
  return margin >= 0.0 ? std::numeric_limits<double>::infinity() : -std::numeric_limits<double>::infinity();
}

std::vector<double> standardised_cutoffs(const Knowledge& knowledge, std::span<const double> cutoffs) {
  std::vector<double> z(knowledge.size);
  for (int i = 0; i < knowledge.size; ++i) {
    z[i] = standardised(cutoffs[i] - knowledge.prior_mean, knowledge.index_variance[i]);
  }
  return z;
}

/// Var(e_i | theta) = K_i / p_i^2 + sigma_i^2.
double variance_given(const Knowledge& knowledge, int i) {
  const double p = knowledge.posterior_precision[i];
  return knowledge.held[i] / p / p + knowledge.stake_sd[i] * knowledge.stake_sd[i];
}

std::vector<double> standardised_given(const Knowledge& knowledge, std::span<const double> cutoffs, double obstacle) {
  std::vector<double> z(knowledge.size);
  for (int i = 0; i < knowledge.size; ++i) {
    const double pull = knowledge.held[i] / knowledge.posterior_precision[i];
    const double margin = (cutoffs[i] - knowledge.prior_mean) - pull * (obstacle - knowledge.prior_mean);
    z[i] = standardised(margin, variance_given(knowledge, i));
  }
  return z;
}

/// Mean and standard deviation of sum omega a / sum omega from standardised cutoffs `z` and the correlation of each
/// pair (0 where a pair is independent).
template <class Correlation>
Moments moments_of(std::span<const double> weights, std::vector<double> z, const Correlation& correlation) {
  const std::size_t n = z.size();
  std::vector<double> chance(n);
  normal_cdf(z, chance);
  std::vector<double> rows(n);
  for (std::size_t i = 0; i < n; ++i) {
    double pairs = 0.0;
    for (std::size_t j = i + 1; j < n; ++j) {
      const double r = correlation(static_cast<int>(i), static_cast<int>(j));
      if (r != 0.0) pairs += weights[j] * binormal_covariance(z[i], z[j], r);
    }
    rows[i] = weights[i] * (weights[i] * chance[i] * (1.0 - chance[i]) + 2.0 * pairs);
  }
  const double variance = ordered_sum(rows);
  return {weighted_mean(weights, chance), variance > 0.0 ? std::sqrt(variance) / ordered_sum(weights) : 0.0};
}

/// Covariance over the product of standard deviations; rounding may not carry it beyond 1.
double correlation_of(double covariance, double variance_i, double variance_j) {
  if (covariance == 0.0 || variance_i == 0.0 || variance_j == 0.0) return 0.0;
  const double r = covariance / (std::sqrt(variance_i) * std::sqrt(variance_j));
  return r < 1.0 ? r : 1.0;
}

}  // namespace

double weighted_mean(std::span<const double> weights, std::span<const double> chance) {
  return ordered_dot(weights, chance) / ordered_sum(weights);
}

std::vector<double> chances(const Knowledge& knowledge, std::span<const double> cutoffs) {
  std::vector<double> z = standardised_cutoffs(knowledge, cutoffs);
  normal_cdf(z, z);
  return z;
}

std::vector<double> chances_given(const Knowledge& knowledge, std::span<const double> cutoffs, double obstacle) {
  std::vector<double> z = standardised_given(knowledge, cutoffs, obstacle);
  normal_cdf(z, z);
  return z;
}

Moments turnout_moments(const Knowledge& knowledge, const SharedInformation& shared, std::span<const double> weights,
                        std::span<const double> cutoffs) {
  return moments_of(weights, standardised_cutoffs(knowledge, cutoffs), [&](int i, int j) {
    return correlation_of(shared.covariance(i, j), knowledge.index_variance[i], knowledge.index_variance[j]);
  });
}

Moments turnout_given(const Knowledge& knowledge, const SharedInformation& shared, std::span<const double> weights,
                      std::span<const double> cutoffs, double obstacle) {
  return moments_of(weights, standardised_given(knowledge, cutoffs, obstacle), [&](int i, int j) {
    return correlation_of(shared.covariance_given_obstacle(i, j), variance_given(knowledge, i),
                          variance_given(knowledge, j));
  });
}

}  // namespace folkmote
