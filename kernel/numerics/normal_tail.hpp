// The far tail of the normal distribution, shared by the distribution function and its logarithm.
#pragma once

#include "numerics/strict.hpp"

#include "numerics/elementary.hpp"
#include "numerics/tables/normal_rows.hpp"

namespace folkmote::tail {

inline constexpr double table_edge = 538.0 / 64;  // the rows of Phi end here

// exp(-x^2/2) with x^2 to twice the precision: a rounded x^2 alone would cost x^2/4 ulp (Cody 1969, Math. Comp.
// 23:631-637).
inline ScaledExponential half_square_exponential(double x) {
  const Pair square = exact_product(x, x);
  return scaled_exponential(-0.5 * square.high, -0.5 * square.low);
}

// a Phi(-a) / exp(-a^2/2) for a >= table_edge.
inline double scaled_mills(double a) {
  const double u = 1.0 / (a * a);
  double p = tables::normal_tail[11];
  for (int j = 10; j >= 0; --j) p = p * u + tables::normal_tail[j];
  return p;
}

// Phi(-a) for a > table_edge.
inline double probability(double a) {
  if (a > 38.6) return 0.0;
  const ScaledExponential e = half_square_exponential(a);
  return scale_by_power_of_two(e.mantissa * scaled_mills(a) / a, e.power);
}

}  // namespace folkmote::tail
