#include "numerics/gmres.hpp"

#include <cmath>

#include "numerics/sums.hpp"

// GMRES (Saad & Schultz 1986): orthonormal directions by modified Gram-Schmidt, the small least-squares problem by
// Givens rotations as the directions come. Restarted from the true residual, which also gives back the digits that one
// cycle loses to rounding. Every sum has a fixed order.

namespace folkmote {

namespace {

constexpr int directions = 120;  // of one cycle
constexpr int cycles = 5;

double norm(std::span<const double> v) { return std::sqrt(ordered_dot(v, v)); }

void add_multiple(std::vector<double>& to, double factor, std::span<const double> v) {
  for (std::size_t i = 0; i < to.size(); ++i) to[i] += factor * v[i];
}

/// One cycle: the directions, and the triangular factor with its right side.
struct Cycle {
  std::vector<std::vector<double>> direction;
  std::vector<std::vector<double>> column;  // of the triangular factor
  std::vector<double> cosine, sine, right;

  /// Takes A times the last direction as the next one; what is left of the residual.
  double extend(std::vector<double> image) {
    std::vector<double> entries;
    for (const std::vector<double>& v : direction) {
      entries.push_back(ordered_dot(v, image));
      add_multiple(image, -entries.back(), v);
    }
    for (std::size_t k = 0; k < cosine.size(); ++k) {
      const double upper = cosine[k] * entries[k] + sine[k] * entries[k + 1];
      entries[k + 1] = cosine[k] * entries[k + 1] - sine[k] * entries[k];
      entries[k] = upper;
    }
    const double length = norm(image);
    const double pivot = std::sqrt(entries.back() * entries.back() + length * length);
    cosine.push_back(pivot > 0.0 ? entries.back() / pivot : 1.0);
    sine.push_back(pivot > 0.0 ? length / pivot : 0.0);
    entries.back() = pivot;
    column.push_back(std::move(entries));
    right.push_back(-sine.back() * right.back());
    right[right.size() - 2] *= cosine.back();
    if (length > 0.0) {
      for (double& entry : image) entry /= length;
      direction.push_back(std::move(image));
    }
    return std::fabs(right.back());
  }

  /// Adds the cycle's step to x; false where the factor is singular.
  bool step(std::vector<double>& x) const {
    const std::size_t m = column.size();
    std::vector<double> y(right.begin(), right.begin() + static_cast<std::ptrdiff_t>(m));
    for (std::size_t k = m; k-- > 0;) {
      for (std::size_t c = k + 1; c < m; ++c) y[k] -= column[c][k] * y[c];
      if (column[k][k] == 0.0) return false;
      y[k] /= column[k][k];
    }
    for (std::size_t k = 0; k < m; ++k) add_multiple(x, y[k], direction[k]);
    return true;
  }
};

}  // namespace

std::optional<std::vector<double>> gmres(const LinearMap& map, std::span<const double> right) {
  constexpr double enough = 1e-14;
  std::vector<double> x(right.size(), 0.0);
  std::vector<double> residual(right.begin(), right.end());
  const double size = norm(right);
  for (int cycle = 0;; ++cycle) {
    const double left = norm(residual);
    if (!std::isfinite(left)) return std::nullopt;
    if (left <= enough * (size + norm(x))) return x;
    if (cycle == cycles) return std::nullopt;
    Cycle now;
    now.right.push_back(left);
    for (double& entry : residual) entry /= left;
    now.direction.push_back(residual);
    double rest = left;
    while (rest > 0.1 * enough * size && now.direction.size() > now.column.size() &&
           static_cast<int>(now.column.size()) < directions) {
      rest = now.extend(map(now.direction.back()));
    }
    if (!now.step(x)) return std::nullopt;
    const std::vector<double> image = map(x);
    for (std::size_t i = 0; i < residual.size(); ++i) residual[i] = right[i] - image[i];
  }
}

}  // namespace folkmote
