#pragma once
// The root of one member's net gain, from the side on which the iterate lies.
#include "numerics/strict.hpp"

#include <cmath>

namespace folkmote {

/// The root of `gain`, decreasing with slope at most -1, from the side on which `from` lies: never beyond the root, and
/// at least 49/50 of the way to it.
template <class Gain>
double reply_from(double from, const Gain& gain) {
  double outer = from;
  double outer_gain = gain(outer);
  if (outer_gain == 0.0) return outer;
  // The slope of the gain is at most -1, so that the root lies between `from` and `from + gain(from)`.
  double inner = outer + outer_gain;
  double inner_gain = gain(inner);
  const bool from_above = outer_gain < 0.0;
  const auto on_outer_side = [from_above](double g) { return from_above ? g < 0.0 : g > 0.0; };
  if (on_outer_side(inner_gain)) return inner;  // by rounding only: the bracket has closed
  for (int step = 0; std::fabs(outer - inner) > 0.02 * std::fabs(from - inner) && inner_gain != 0.0; ++step) {
    // False position, aimed a little short of the root so that the outer end moves, then exactly, then a bisection
    // against one-sided creeping and jumps.
    const double bisected = 0.5 * (outer + inner);
    if (bisected == outer || bisected == inner) break;
    double middle = outer + (inner - outer) * (outer_gain / (outer_gain - inner_gain));
    if (step % 3 == 0) middle += 0.01 * (outer - middle);
    if (step % 3 == 2 || middle == outer || middle == inner) middle = bisected;
    const double middle_gain = gain(middle);
    if (on_outer_side(middle_gain)) {
      outer = middle;
      outer_gain = middle_gain;
    } else {
      inner = middle;
      inner_gain = middle_gain;
    }
  }
  return inner_gain == 0.0 ? inner : outer;
}

}  // namespace folkmote
