// The three ways in which binormal_cdf computes: each has a file of its own.
#pragma once

#include "numerics/strict.hpp"

#include <cmath>

#include "numerics/bits.hpp"

namespace folkmote::binormal {

inline constexpr double pi = 0x1.921fb54442d18p+1;

// sqrt(1 - rho^2) without cancellation.
inline double complement_root(double rho) { return std::sqrt((1.0 - rho) * (1.0 + rho)); }

// k - rho x to twice the precision: near |rho| = 1 it is divided by a small number, and its rounding would show.
inline Pair residual(double k, double rho, double x) {
  const Pair product = exact_product(rho, x);
  const Pair difference = exact_sum(k, -product.high);
  return exact_sum(difference.high, difference.low - product.low);
}

// binormal_plackett.cpp: binormal_cdf(h, k, rho) - Phi(h) Phi(k), for |rho| up to `plackett_limit`.
inline constexpr double plackett_limit = 0.8;
double plackett_part(double h, double k, double rho);

// binormal_series.cpp, from this |rho| on: |binormal_cdf(h, k, rho) - its limit at the nearer of rho = -1 and 1|.
// The error is about 1e-16 * `scale`. Not usable (scale infinite) far from the limit at large h, k.
inline constexpr double series_start = 0.7;
struct SeriesPart {
  double value;
  double scale;
};
SeriesPart series_part(double h, double k, double rho);

// binormal_panels.cpp: binormal_cdf(h, k, rho) itself, relative error below 1e-12, 0 < |rho| < 1, |h| and |k| at
// most 39.
double panel_cdf(double h, double k, double rho);

}  // namespace folkmote::binormal
