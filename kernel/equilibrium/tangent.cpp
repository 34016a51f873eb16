#include "equilibrium/tangent.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "numerics/gmres.hpp"
#include "numerics/sums.hpp"

namespace folkmote {

namespace {

/// Errors of the cutoffs of a few roundings, amplified twice (in the cutoffs, and in the derivative through the
/// curvature of the gains), stay below 1e-6 up to here.
constexpr double most_amplified = 1e5;

double largest(std::span<const double> v) {
  double result = 0.0;
  for (double entry : v) result = std::max(result, std::fabs(entry));
  return result;
}

}  // namespace

bool Tangent::set(GainRows& game, std::span<const double> cutoffs) {
  const std::size_t n = cutoffs.size();
  gains_.resize(n);
  diagonal_.resize(n);
  passed_.resize(n * n);
  GainRow derivatives;
  for (std::size_t i = 0; i < n; ++i) {
    if (!game.fill(static_cast<int>(i), cutoffs, derivatives)) return false;
    gains_[i] = derivatives.gain;
    diagonal_[i] = -derivatives.cutoff[i];
    for (std::size_t j = 0; j < n; ++j) passed_[i * n + j] = derivatives.cutoff[j] / diagonal_[i];
    passed_[i * n + i] = 0.0;
  }
  return true;
}

std::vector<double> Tangent::apply(std::span<const double> v) const {
  std::vector<double> result(v.begin(), v.end());
  for (std::size_t i = 0; i < v.size(); ++i) result[i] -= ordered_dot(row(static_cast<int>(i)), v);
  return result;
}

std::vector<double> Tangent::apply_transposed(std::span<const double> v) const {
  std::vector<double> result(v.begin(), v.end());
  for (std::size_t i = 0; i < v.size(); ++i) {
    const std::span<const double> passed = row(static_cast<int>(i));
    for (std::size_t j = 0; j < v.size(); ++j) result[j] -= v[i] * passed[j];
  }
  return result;
}

std::optional<std::vector<double>> Tangent::moved(std::span<const double> right) const {
  std::vector<double> scaled(right.size());
  for (std::size_t i = 0; i < right.size(); ++i) scaled[i] = right[i] / diagonal_[i];
  return gmres([this](std::span<const double> v) { return apply(v); }, scaled);
}

std::optional<std::vector<double>> Tangent::worth(std::span<const double> right) const {
  auto found = gmres([this](std::span<const double> v) { return apply_transposed(v); }, right);
  if (!found) return found;
  for (std::size_t i = 0; i < right.size(); ++i) (*found)[i] /= diagonal_[i];
  return found;
}

double Tangent::amplification() const {
  const std::vector<double> ones(diagonal_.size(), 1.0);
  const auto found = gmres([this](std::span<const double> v) { return apply(v); }, ones);
  if (!found || *std::min_element(found->begin(), found->end()) <= 0.0) {
    return std::numeric_limits<double>::infinity();
  }
  return *std::max_element(found->begin(), found->end());
}

Polished polish(GainRows& game, std::span<const double> cutoffs, double tolerance) {
  constexpr int most = 20;
  constexpr double last = 1e-9;  // a step of this size leaves an error of its square
  Polished result{Polished::Outcome::singular, {cutoffs.begin(), cutoffs.end()}, {}};
  const double scale = std::max(1.0, largest(cutoffs));
  const double furthest = std::max(tolerance, 1e-12 * scale);
  for (int step = 0; step < most; ++step) {
    if (!result.tangent.set(game, result.cutoffs)) {
      result.outcome = Polished::Outcome::jumps;
      return result;
    }
    const auto moved = result.tangent.moved(result.tangent.gains());
    if (!moved) return result;
    for (std::size_t i = 0; i < cutoffs.size(); ++i) {
      result.cutoffs[i] += (*moved)[i];
      if (!(std::fabs(result.cutoffs[i] - cutoffs[i]) <= furthest)) return result;
    }
    if (largest(*moved) > last * scale) continue;
    result.tangent.set(game, result.cutoffs);
    if (result.tangent.amplification() <= most_amplified) result.outcome = Polished::Outcome::solved;
    return result;
  }
  return result;
}

}  // namespace folkmote
