#include "numerics/strict.hpp"

#include "numerics/normal.hpp"

#include <cstddef>

#include "numerics/normal_tail.hpp"
#include "numerics/rows.hpp"
#include "numerics/two.hpp"

namespace folkmote {
namespace {

constexpr double inverse_sqrt_two_pi = 0x1.9884533d43651p-2;

// Adding this to 0 <= a < 2^40 rounds a to a multiple of 1/64 and leaves 64 a, rounded, in the low bits.
constexpr double grid = 1.5 * 70368744177664.0;  // 1.5 * 2^46

// Phi(-a) for 0 <= a <= table_edge: the row nearest to a.
inline double lower_half(double a) {
  const double shifted = a + grid;
  const double t = a - (shifted - grid);  // exact
  return row_value(tables::normal_rows[static_cast<std::uint32_t>(bits_of(shifted))], t);
}

// Anything the rows do not hold: the lower tail and NaN. (The upper tail is 1 there, by the last row.)
inline bool off_the_table(double x) { return !(x >= -tail::table_edge); }

double tail_or_nan(double x) { return is_nan(x) ? x + x : tail::probability(-x); }

}  // namespace

double normal_density(double x) {
  if (!(magnitude(x) < 39.0)) return is_nan(x) ? x + x : 0.0;
  const ScaledExponential e = tail::half_square_exponential(x);
  return scale_by_power_of_two(e.mantissa * inverse_sqrt_two_pi, e.power);
}

double normal_cdf(double x) {
  if (off_the_table(x)) return tail_or_nan(x);
  const double a = magnitude(x);
  const double q = lower_half(a < tail::table_edge ? a : tail::table_edge);
  // x > 0: 1 - q; otherwise 0 + q. A branch would be taken at random.
  const std::uint64_t positive = std::uint64_t{0} - static_cast<std::uint64_t>(x > 0);
  return double_of(bits_of(1.0) & positive) + double_of(bits_of(q) ^ (positive & (std::uint64_t{1} << 63)));
}

double normal_upper(double x) { return normal_cdf(-x); }

double log_normal_cdf(double x) {
  if (off_the_table(x)) {
    if (is_nan(x)) return x + x;
    // log Phi(-a) = -a^2/2 - log(a / scaled Mills ratio)
    return x == -infinity ? x : -0.5 * (x * x) + logarithm(tail::scaled_mills(-x) / -x);
  }
  if (x > 0) return logarithm_of_one_plus(-normal_cdf(-x));
  return logarithm(normal_cdf(x));
}

double normal_mills(double x) {
  if (off_the_table(x)) {
    if (is_nan(x)) return x + x;
    return x == -infinity ? infinity : -x * (inverse_sqrt_two_pi / tail::scaled_mills(-x));
  }
  return normal_density(x) / normal_cdf(x);
}

// The array form: two values at a time in the operations common to both, row by row in between. Each lane goes
// through the operations of lower_half and row_value in the same order, so the bits are those of the scalar form.
namespace {

// Phi of two values, neither of them off the table.
inline Two on_the_table(Two x) {
  const TwoBits sign = (TwoBits)x & (TwoBits{1, 1} << 63);
  const Two edge = both(tail::table_edge);
  const Two a = (Two)((TwoBits)x ^ sign);
  const Two clipped = a < edge ? a : edge;
  const Two shifted = clipped + grid;
  const Two t = clipped - (shifted - grid);
  const Two s = t * t;
  const double* row0 = tables::normal_rows[static_cast<std::uint32_t>(((TwoBits)shifted)[0])];
  const double* row1 = tables::normal_rows[static_cast<std::uint32_t>(((TwoBits)shifted)[1])];
  const Two s0 = both(s[0]), s1 = both(s[1]);
  // Even and odd coefficients side by side, one row each.
  const Two chain0 = (load_two(row0 + 6) * s0 + load_two(row0 + 4)) * s0 + load_two(row0 + 2);
  const Two chain1 = (load_two(row1 + 6) * s1 + load_two(row1 + 4)) * s1 + load_two(row1 + 2);
  const Two first0 = load_two(row0), first1 = load_two(row1);
  const Two even = first_lanes(chain0, chain1), odd = second_lanes(chain0, chain1);
  const Two q = first_lanes(first0, first1) + (even * s + t * (second_lanes(first0, first1) + odd * s));
  // x > 0: 1 - q; otherwise 0 + q.
  const TwoBits positive = x > Two{0, 0};
  const Two base = (Two)(positive & (TwoBits)Two{1, 1});
  return base + (Two)((TwoBits)q ^ (positive & (TwoBits{1, 1} << 63)));
}

// Four values; false if one of them is off the table, and nothing is written then.
inline bool four_on_the_table(const double* x, double* out) {
  const Two x0 = load_two(x), x1 = load_two(x + 2);
  const Two edge = both(-tail::table_edge);
  const TwoBits on = (x0 >= edge) & (x1 >= edge);
  if ((on[0] & on[1]) == 0) return false;
  const Two y0 = on_the_table(x0), y1 = on_the_table(x1);
  store_two(out, y0);
  store_two(out + 2, y1);
  return true;
}

}  // namespace

void normal_cdf(std::span<const double> x, std::span<double> out) {
  const std::size_t n = x.size(), fours = n - n % 4;
  for (std::size_t i = 0; i < fours; i += 4)
    if (!four_on_the_table(&x[i], &out[i]))
      for (std::size_t j = i; j < i + 4; ++j) out[j] = normal_cdf(x[j]);
  for (std::size_t i = fours; i < n; ++i) out[i] = normal_cdf(x[i]);
}

}  // namespace folkmote
