#include "equilibrium/tangent.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "numerics/gmres.hpp"

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

/// v - P v, or v - P^T v.
std::vector<double> Tangent::kept(std::span<const double> v, bool back) const {
  if (stop_ != nullptr && stop_->raised()) throw Stopped{};
  std::vector<double> result = back ? passed_back(v) : passed(v);
  for (std::size_t i = 0; i < v.size(); ++i) result[i] = v[i] - result[i];
  return result;
}

std::optional<std::vector<double>> Tangent::moved(std::span<const double> right) const {
  std::vector<double> scaled(right.size());
  for (std::size_t i = 0; i < right.size(); ++i) scaled[i] = right[i] / diagonal_[i];
  return gmres([this](std::span<const double> v) { return kept(v, false); }, scaled);
}

std::optional<std::vector<double>> Tangent::worth(std::span<const double> right) const {
  auto found = gmres([this](std::span<const double> v) { return kept(v, true); }, right);
  if (!found) return found;
  for (std::size_t i = 0; i < right.size(); ++i) (*found)[i] /= diagonal_[i];
  return found;
}

double Tangent::amplification() const {
  const std::vector<double> ones(diagonal_.size(), 1.0);
  const auto found = gmres([this](std::span<const double> v) { return kept(v, false); }, ones);
  if (!found || *std::min_element(found->begin(), found->end()) <= 0.0) {
    return std::numeric_limits<double>::infinity();
  }
  return *std::max_element(found->begin(), found->end());
}

Outcome polish(Tangent& tangent, std::vector<double>& cutoffs, double tolerance) {
  constexpr int most = 20;
  constexpr double last = 1e-9;  // a step of this size leaves an error of its square
  const std::vector<double> start = cutoffs;
  const double scale = std::max(1.0, largest(cutoffs));
  const double furthest = std::max(tolerance, 1e-12 * scale);
  for (int step = 0; step < most; ++step) {
    if (!tangent.set(cutoffs)) return Outcome::jumps;
    const auto moved = tangent.moved(tangent.gains());
    if (!moved) return Outcome::singular;
    for (std::size_t i = 0; i < cutoffs.size(); ++i) {
      cutoffs[i] += (*moved)[i];
      if (!(std::fabs(cutoffs[i] - start[i]) <= furthest)) return Outcome::singular;
    }
    if (largest(*moved) > last * scale) continue;
    tangent.set(cutoffs);
    return tangent.amplification() <= most_amplified ? Outcome::solved : Outcome::singular;
  }
  return Outcome::singular;
}

}  // namespace folkmote
