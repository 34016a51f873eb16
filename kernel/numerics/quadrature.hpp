// Gaussian quadrature rules computed at run time with the same bits everywhere.
#pragma once

#include "numerics/strict.hpp"

#include <cstddef>
#include <vector>

namespace folkmote {

struct QuadratureRule {
  std::vector<double> nodes;  // ascending, symmetric about 0 to the bit
  std::vector<double> weights;
};

// Integral of f over [-1, 1] = sum of weights * f(nodes), exact for polynomials of degree 2n - 1.
QuadratureRule gauss_legendre(std::size_t n);

// Expectation of f(Z), Z standard normal (the probabilists' rule): the weights sum to 1. n at most 300.
QuadratureRule gauss_hermite(std::size_t n);

}  // namespace folkmote
