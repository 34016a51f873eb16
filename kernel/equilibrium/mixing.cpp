#include "equilibrium/mixing.hpp"

#include <cmath>
#include <utility>

#include "numerics/sums.hpp"

// With f = image - present, the next iterate is image - sum_k gamma_k (change of image k), where gamma minimises
// |f - sum_k gamma_k (change of f k)|. At most five changes are kept, so the normal equations are small; a ridge of
// 1e-14 of their trace keeps them solvable when changes become alike.

namespace folkmote {

namespace {

std::vector<double> difference(std::span<const double> a, std::span<const double> b) {
  std::vector<double> result(a.size());
  for (std::size_t i = 0; i < a.size(); ++i) result[i] = a[i] - b[i];
  return result;
}

/// Solves a small symmetric positive definite system by Gaussian elimination without pivoting.
std::vector<double> solve_small(std::vector<std::vector<double>> matrix, std::vector<double> right) {
  const std::size_t m = right.size();
  for (std::size_t p = 0; p < m; ++p) {
    for (std::size_t r = p + 1; r < m; ++r) {
      const double factor = matrix[r][p] / matrix[p][p];
      for (std::size_t c = p; c < m; ++c) matrix[r][c] -= factor * matrix[p][c];
      right[r] -= factor * right[p];
    }
  }
  for (std::size_t p = m; p-- > 0;) {
    for (std::size_t c = p + 1; c < m; ++c) right[p] -= matrix[p][c] * right[c];
    right[p] /= matrix[p][p];
  }
  return right;
}

}  // namespace

std::vector<double> Mixing::next(std::span<const double> present, std::span<const double> image) {
  std::vector<double> residual = difference(image, present);
  if (!last_residual_.empty()) {
    residual_changes_.push_back(difference(residual, last_residual_));
    image_changes_.push_back(difference(image, last_image_));
    if (residual_changes_.size() > depth) {
      residual_changes_.pop_front();
      image_changes_.pop_front();
    }
  }
  last_image_.assign(image.begin(), image.end());
  last_residual_ = residual;
  const std::size_t m = residual_changes_.size();
  std::vector<std::vector<double>> normal(m, std::vector<double>(m));
  std::vector<double> right(m);
  double trace = 0.0;
  for (std::size_t a = 0; a < m; ++a) {
    right[a] = ordered_dot(residual_changes_[a], residual);
    for (std::size_t b = 0; b < m; ++b) normal[a][b] = ordered_dot(residual_changes_[a], residual_changes_[b]);
    trace += normal[a][a];
  }
  for (std::size_t a = 0; a < m; ++a) normal[a][a] += 1e-14 * trace;
  std::vector<double> result(image.begin(), image.end());
  if (m == 0 || !(trace > 0.0)) return result;
  const std::vector<double> gamma = solve_small(std::move(normal), std::move(right));
  for (std::size_t a = 0; a < m; ++a) {
    if (!std::isfinite(gamma[a])) return {image.begin(), image.end()};
    for (std::size_t i = 0; i < result.size(); ++i) result[i] -= gamma[a] * image_changes_[a][i];
  }
  return result;
}

}  // namespace folkmote
