// Plackett (1954, Biometrika 41:351-360): d/d(rho) of the distribution function is the density, so
//   binormal_cdf(h, k, rho) = Phi(h) Phi(k) + integral over r from 0 to rho of the density with correlation r.
// Drezner and Wesolowsky (1990, J. Statist. Comput. Simul. 35:101-107) integrate it by Gauss-Legendre rules; Genz
// (2004, Statistics and Computing 14:251-260) substitutes r = sin t, which removes a square root. Here u = tan(t/2) in
// addition, r = 2u/(1+u^2): no sine is needed and the singular point r = 1 stays further from the interval:
//   (1/pi) * integral from 0 to U of exp(-(h^2 + k^2 - 2hkr)/(2(1-r^2))) du/(1+u^2),  U = rho/(1 + sqrt(1-rho^2)).
#include "numerics/strict.hpp"

#include <cstddef>

#include "numerics/binormal_parts.hpp"
#include "numerics/tables/legendre_rows.hpp"
#include "numerics/two.hpp"

namespace folkmote::binormal {
namespace {

template <std::size_t half_order>
double rule(double h, double k, double rho, const double (&nodes)[half_order], const double (&weights)[half_order]) {
  const double half = 0.5 * rho / (1.0 + complement_root(rho));
  const double squares = 0.5 * (h * h + k * k), product = 2.0 * (h * k);
  Two sum = both(0.0);
  for (std::size_t i = half_order; i-- > 0;) {  // the two nodes left and right of the middle, smallest weights first
    const Two u = half * (1.0 + Two{-nodes[i], nodes[i]});
    const Two plus = 1.0 + u * u, minus = 1.0 - u * u;
    const Two exponent = ((product * u - squares * plus) * plus) / (minus * minus);
    sum += weights[i] * (exponential_of_two(exponent) / plus);
  }
  return half * (sum[0] + sum[1]) / pi;
}

}  // namespace

// The smallest rule that errs by less than 5e-14 of Phi(h) Phi(k) or of the answer, whichever is larger, for |h| and
// |k| up to 6 (measured against the panels at 20,000 points per correlation).
double plackett_part(double h, double k, double rho) {
  const double size = magnitude(rho);
  if (size < 0.07) return rule(h, k, rho, tables::legendre_nodes_6, tables::legendre_weights_6);
  if (size < 0.16) return rule(h, k, rho, tables::legendre_nodes_8, tables::legendre_weights_8);
  if (size < 0.42) return rule(h, k, rho, tables::legendre_nodes_12, tables::legendre_weights_12);
  if (size < 0.65) return rule(h, k, rho, tables::legendre_nodes_16, tables::legendre_weights_16);
  return rule(h, k, rho, tables::legendre_nodes_20, tables::legendre_weights_20);
}

}  // namespace folkmote::binormal
