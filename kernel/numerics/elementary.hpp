// Exponential, logarithm and arcsine with the same bits on every machine.
//
// The system's own versions differ between processors and library releases; these are built from
// + - * / sqrt and moves of bits only. Errors stay below one unit in the last place (arcsine: two).
// Infinities, NaN, zeros and subnormal numbers follow the usual conventions.
#pragma once

#include "numerics/strict.hpp"

#include <span>

#include "numerics/bits.hpp"

namespace folkmote {

double exponential(double x);
void exponentials(std::span<const double> x, std::span<double> out);  // equal lengths, in place or apart, same bits
double logarithm(double x);                                           // log 0 = -inf, log of a negative number is NaN
double logarithm_of_one_plus(double x);
double arcsine(double x);  // NaN outside [-1, 1]

// exp(high + low) = mantissa * 2^power with the mantissa near [1, 2): for callers that hold the exponent to
// more than double precision or that scale once at the end. Needs |high| <= 1e5 and |low| <= 1e-3 or so.
struct ScaledExponential {
  double mantissa;
  int power;
};
ScaledExponential scaled_exponential(double high, double low);

}  // namespace folkmote
