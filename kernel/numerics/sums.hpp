// Sums in one fixed order, so that their bits depend on the numbers alone.
//
// Eight lanes run side by side: lane j adds the entries j, j+8, j+16, ... in that order, from 0. Then one tree:
//   ((l0 + l4) + (l2 + l6)) + ((l1 + l5) + (l3 + l7)).
// The order is part of the project's promise: another lane count would change the last bits of most sums.
#pragma once

#include "numerics/strict.hpp"

#include <span>

namespace folkmote {

double ordered_sum(std::span<const double> x);
double ordered_dot(std::span<const double> x, std::span<const double> y);  // sum of x[i] * y[i], equal lengths

}  // namespace folkmote
