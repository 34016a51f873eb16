// The standard bivariate normal distribution function and its derivatives.
//
// X and Y are standard normal with correlation rho. Absolute error below 5e-16 everywhere and relative error below
// 1e-12 wherever the value exceeds 1e-290, far tails and correlations next to -1 and 1 included
// (tests/kernel/test_binormal.cpp). Symmetric in h and k to the bit.
#pragma once

#include "numerics/strict.hpp"

namespace folkmote {

// P(X <= h, Y <= k) for rho in [-1, 1], where -1 and 1 are the exact limits; h and k may be infinite.
// NaN for a NaN argument or a correlation outside [-1, 1].
double binormal_cdf(double h, double k, double rho);

// Cov(1{X <= h}, 1{Y <= k}) = binormal_cdf(h, k, rho) - Phi(h) Phi(k). For |rho| <= 0.8 it is integrated directly: no
// cancellation (relative error below 1e-11 for |h|, |k| <= 4), the sign of rho, and half the time; beyond, the
// difference.
double binormal_covariance(double h, double k, double rho);

// The density at (h, k) for |rho| < 1.
double binormal_density(double h, double k, double rho);

// The partial derivatives of binormal_cdf for |rho| < 1 (Plackett 1954, Biometrika 41:351-360):
//   dh = phi(h) Phi((k - rho h)/s), dk likewise, s = sqrt(1 - rho^2), and drho = the density.
struct BinormalGradient {
  double dh;
  double dk;
  double drho;
};
BinormalGradient binormal_gradient(double h, double k, double rho);

}  // namespace folkmote
