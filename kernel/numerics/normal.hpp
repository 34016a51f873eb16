// The standard normal distribution: density, distribution function, its logarithm and its inverse.
//
// The same bits on every machine. Relative errors in units in the last place (ulp), measured against 50-digit
// values in tests/kernel/test_normal.cpp: distribution function below 2 for x >= -8.4 and below 3 in the tail,
// subnormal results included; density below 2, quantile below 3, the other two below 4.
#pragma once

#include "numerics/strict.hpp"

#include <span>

namespace folkmote {

double normal_density(double x);
double normal_cdf(double x);
double normal_upper(double x);    // 1 - normal_cdf(x) without cancellation
double log_normal_cdf(double x);  // finite down to x = -1.3e154
double normal_mills(double x);    // density(x) / cdf(x), the derivative of log_normal_cdf

// Inverse of normal_cdf: 0 gives -inf, 1 gives +inf, anything outside [0, 1] and NaN give NaN.
double normal_quantile(double p);

// out[i] = normal_cdf(x[i]), the very same bits as the scalar form. `out` has the length of `x` and is either
// the same memory or does not overlap it.
void normal_cdf(std::span<const double> x, std::span<double> out);

// Likewise for the quantile.
void normal_quantile(std::span<const double> p, std::span<double> out);

}  // namespace folkmote
