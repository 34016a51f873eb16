#include "equilibrium/dense_slopes.hpp"

#include "numerics/sums.hpp"

namespace folkmote {

bool DenseTangent::set(std::span<const double> cutoffs) {
  const std::size_t n = cutoffs.size();
  gains_.resize(n);
  diagonal_.resize(n);
  matrix_.resize(n * n);
  GainRow derivatives;
  for (std::size_t i = 0; i < n; ++i) {
    if (!game_.fill(static_cast<int>(i), cutoffs, derivatives)) return false;
    gains_[i] = derivatives.gain;
    diagonal_[i] = -derivatives.cutoff[i];
    for (std::size_t j = 0; j < n; ++j) matrix_[i * n + j] = derivatives.cutoff[j] / diagonal_[i];
    matrix_[i * n + i] = 0.0;
  }
  return true;
}

std::vector<double> DenseTangent::passed(std::span<const double> v) const {
  std::vector<double> result(v.size());
  for (std::size_t i = 0; i < v.size(); ++i) result[i] = ordered_dot(row(i), v);
  return result;
}

std::vector<double> DenseTangent::passed_back(std::span<const double> v) const {
  std::vector<double> result(v.size(), 0.0);
  for (std::size_t i = 0; i < v.size(); ++i) {
    const std::span<const double> passed = row(i);
    for (std::size_t j = 0; j < v.size(); ++j) result[j] += v[i] * passed[j];
  }
  return result;
}

GameGradient DenseSlopes::gradient(std::span<const double> cutoffs, std::span<const double> multipliers) {
  const std::size_t n = cutoffs.size();
  GameGradient gradient(knowledge_);
  std::vector<double> by_covariance(n * n);
  GainRow row;
  for (std::size_t i = 0; i < n; ++i) {
    game_.fill(static_cast<int>(i), cutoffs, row);
    const double x = multipliers[i];
    gradient.prior_mean += x * row.prior_mean;
    gradient.benefit[i] = x * row.benefit;
    for (std::size_t j = 0; j < n; ++j) {
      gradient.variance[j] += x * row.variance[j];
      by_covariance[i * n + j] = x * row.covariance[j];
    }
  }
  add_pairs(by_covariance, gradient);
  return gradient;
}

void DenseSlopes::add_pairs(std::span<const double> by_covariance, GameGradient& gradient) const {
  const std::size_t n = gradient.held.size();
  gradient.shared.assign(n * n, 0.0);
  for (std::size_t i = 0; i < n; ++i) {
    for (std::size_t j = i + 1; j < n; ++j) {
      const double by = by_covariance[i * n + j] + by_covariance[j * n + i];
      if (by == 0.0) continue;
      const int a = static_cast<int>(i), b = static_cast<int>(j);
      const CovarianceSlopes slopes = covariance_slopes(knowledge_, shared_.covariance(a, b), a, b);
      gradient.shared[i * n + j] = gradient.shared[j * n + i] = by * slopes.shared;
      gradient.held[i] += by * slopes.held_i;
      gradient.held[j] += by * slopes.held_j;
      gradient.prior_precision += by * slopes.prior_precision;
    }
  }
}

std::vector<double> DenseSlopes::raised(std::span<const double> cutoffs, const GameShift& shift) {
  std::vector<double> result, shared(cutoffs.size());
  GainRow row;
  for (int i = 0; i < knowledge_.size; ++i) {
    game_.fill(i, cutoffs, row);
    slopes_.shared(shift.change, shift.broadcast, i, shared);
    double sum = ordered_dot(row.variance, shift.variance);
    for (int j = 0; j < knowledge_.size; ++j) {
      if (row.covariance[j] == 0.0) continue;
      const CovarianceSlopes slopes = covariance_slopes(knowledge_, shared_.covariance(i, j), i, j);
      sum += row.covariance[j] * (slopes.shared * shared[j] + slopes.held_i * shift.held[i] +
                                  slopes.held_j * shift.held[j] + slopes.prior_precision * shift.prior_precision);
    }
    result.push_back(sum + row.prior_mean * shift.prior_mean + row.benefit * shift.benefit - shift.cost);
  }
  return result;
}

}  // namespace folkmote
