// Evaluation of one row of a piecewise polynomial (see tables/make_tables.cpp).
#pragma once

#include "numerics/strict.hpp"

#include <cstddef>

namespace folkmote {

// c0 + t (c1 + t^2 O(t^2)) + t^2 E(t^2): even and odd powers are two chains that run side by side, and the
// constant is added last, so that the result carries little more than the two roundings of c0 and of that sum.
template <std::size_t n>
inline double row_value(const double (&c)[n], double t) {
  static_assert(n >= 6 && n % 2 == 0);
  const double s = t * t;
  double even = c[n - 2], odd = c[n - 1];
  for (std::size_t j = n - 2; j > 2; j -= 2) {
    even = even * s + c[j - 2];
    odd = odd * s + c[j - 1];
  }
  return c[0] + (even * s + t * (c[1] + odd * s));
}

}  // namespace folkmote
