// Roots of non-increasing functions of one variable, by bracketing.
//
// The function may jump downwards: the point of the jump is then the answer, for no bracket ever loses it.
#pragma once

#include "numerics/strict.hpp"

#include <utility>

#include "numerics/bits.hpp"

namespace folkmote {

namespace roots {

inline double midpoint(double low, double high) { return low + 0.5 * (high - low); }

// The width at which a bracket is done: the caller's tolerance, never less than about one ulp of its ends.
inline double final_width(double low, double high, double tolerance) {
  const double scale = magnitude(low) > magnitude(high) ? magnitude(low) : magnitude(high);
  const double ulp = scale * 0x1p-52;
  return tolerance > ulp ? tolerance : ulp;
}

inline double clamp(double x, double low, double high) { return x < low ? low : (x > high ? high : x); }

}  // namespace roots

// The root of f between low and high, where f(low) >= 0 >= f(high), to the given width or about one ulp of the larger
// end. If f(low) <= 0 the answer is low, if f(high) >= 0 it is high. Values may be infinite. The ITP method of Oliveira
// and Takahashi (2021), ACM Trans. Math. Software 47(1):5, with kappa1 = 0.2/(high - low), kappa2 = 2, n0 = 1:
// interpolate, truncate towards the middle, project so that no more than one step beyond bisection's count is ever
// taken.
template <class F>
double decreasing_root(F&& f, double low, double high, double tolerance = 0.0) {
  if (!(low < high)) return low;
  double value_low = f(low), value_high = f(high);
  if (!(value_low > 0)) return low;
  if (!(value_high < 0)) return high;
  const double truncation = 0.2 / (high - low);
  double reach = high - low;  // bisection's width at this step, doubled once for n0 = 1
  while (high - low > roots::final_width(low, high, tolerance)) {
    const double middle = roots::midpoint(low, high), half = 0.5 * (high - low);
    double x = middle;
    const double fall = value_low - value_high;
    if (is_finite(fall)) {
      const double interpolated = low + (high - low) * (value_low / fall);
      const double towards = interpolated < middle ? 1.0 : -1.0;
      const double shift = truncation * (high - low) * (high - low);
      const double smallest = 0.5 * roots::final_width(low, high, tolerance);
      const double pull = shift > smallest ? shift : smallest;
      const double truncated = pull < magnitude(middle - interpolated) ? interpolated + towards * pull : middle;
      const double radius = reach - half > 0 ? reach - half : 0.0;
      x = magnitude(truncated - middle) <= radius ? truncated : middle - towards * radius;
    }
    if (!(x > low && x < high)) x = middle;
    if (!(x > low && x < high)) break;  // no double in between
    const double value = f(x);
    if (value > 0) {
      low = x;
      value_low = value;
    } else if (value < 0) {
      high = x;
      value_high = value;
    } else {
      return x;
    }
    reach *= 0.5;
  }
  return roots::midpoint(low, high);
}

// The same with slopes: f returns {value, slope}. Newton's step where it stays inside the bracket and the last step
// halved it or better, bisection otherwise (Press et al. 2007, Numerical Recipes, section 9.4, describe the idea).
template <class F>
double decreasing_root_newton(F&& f, double low, double high, double start, double tolerance = 0.0) {
  double x = roots::clamp(start, low, high), previous_step = high - low;
  while (high - low > roots::final_width(low, high, tolerance)) {
    const auto [value, slope] = f(x);
    if (value > 0)
      low = x;
    else if (value < 0)
      high = x;
    else
      return x;
    double step = slope < 0 ? -value / slope : infinity;
    double next = x + step;
    if (!(next > low && next < high) || magnitude(step) > 0.5 * previous_step) {
      next = roots::midpoint(low, high);
      step = next - x;
    }
    if (magnitude(next - x) <= 0.25 * roots::final_width(low, high, tolerance) || next == x) return next;
    previous_step = magnitude(step);
    x = next;
  }
  return roots::midpoint(low, high);
}

}  // namespace folkmote
