// Adaptive integration of a smooth function over an interval.
#pragma once

#include "numerics/strict.hpp"

#include <cmath>
#include <cstddef>

#include "numerics/quadrature.hpp"

namespace folkmote {

/// Integral of f over [low, high] by Gauss-Legendre panels, halved until both halves agree with the whole within
/// `error`.
template <class F>
double adaptive_integral(const F& f, const QuadratureRule& rule, double low, double high, double whole, double error,
                         int depth) {
  const auto panel = [&](double a, double b) {
    double sum = 0.0;
    for (std::size_t k = 0; k < rule.nodes.size(); ++k) {
      sum += rule.weights[k] * f(0.5 * (a + b) + 0.5 * (b - a) * rule.nodes[k]);
    }
    return 0.5 * (b - a) * sum;
  };
  const double middle = 0.5 * (low + high);
  const double left = panel(low, middle);
  const double right = panel(middle, high);
  if (depth == 0 || std::fabs(left + right - whole) <= error) return left + right;
  return adaptive_integral(f, rule, low, middle, left, 0.5 * error, depth - 1) +
         adaptive_integral(f, rule, middle, high, right, 0.5 * error, depth - 1);
}

/// The same from `panels` equal panels, each halved at least once: no first guess can be met by chance.
template <class F>
double adaptive_integral(const F& f, double low, double high, int panels, double error) {
  const QuadratureRule rule = gauss_legendre(10);
  const double width = (high - low) / panels;
  double sum = 0.0;
  for (int k = 0; k < panels; ++k) {
    const double end = k + 1 == panels ? high : low + width * (k + 1);
    sum += adaptive_integral(f, rule, low + width * k, end, HUGE_VAL, error / panels, 12);
  }
  return sum;
}

}  // namespace folkmote
