// Moves of bits between doubles and integers, and exact powers of two.
#pragma once

#include "numerics/strict.hpp"

#include <bit>
#include <cstdint>
#include <limits>

namespace folkmote {

inline constexpr double infinity = std::numeric_limits<double>::infinity();
inline constexpr double not_a_number = std::numeric_limits<double>::quiet_NaN();

inline std::uint64_t bits_of(double x) { return std::bit_cast<std::uint64_t>(x); }
inline double double_of(std::uint64_t bits) { return std::bit_cast<double>(bits); }

// |x| and "is NaN" by bits, so that no compiler setting can argue them away.
inline double magnitude(double x) { return double_of(bits_of(x) & 0x7fffffffffffffffU); }
inline bool is_nan(double x) { return (bits_of(x) & 0x7fffffffffffffffU) > 0x7ff0000000000000U; }
inline bool is_finite(double x) { return (bits_of(x) & 0x7ff0000000000000U) != 0x7ff0000000000000U; }

// 2^k for -1022 <= k <= 1023.
inline double power_of_two(int k) { return double_of(static_cast<std::uint64_t>(k + 1023) << 52); }

// x * 2^k for any k; rounded once where |x| is at least 2^-22.
inline double scale_by_power_of_two(double x, int k) {
  if (k >= -1021 && k <= 1022) return x * power_of_two(k);
  k = k < -2200 ? -2200 : (k > 2200 ? 2200 : k);
  for (; k > 1000; k -= 1000) x *= power_of_two(1000);
  for (; k < -1000; k += 1000) x *= power_of_two(-1000);
  return x * power_of_two(k);
}

// The product x y = high + low without error (Dekker 1971, Numerische Mathematik 18:224-242, section 5):
// the fused instruction that would give `low` at once is not portable. Safe for |x|, |y| < 2^995.
struct Pair {
  double high;
  double low;
};

inline Pair exact_product(double x, double y) {
  constexpr double splitter = 134217729.0;  // 2^27 + 1
  const double cx = splitter * x, cy = splitter * y;
  const double x1 = cx - (cx - x), y1 = cy - (cy - y);
  const double x2 = x - x1, y2 = y - y1;
  const double p = x * y;
  return {p, ((x1 * y1 - p) + x1 * y2 + x2 * y1) + x2 * y2};
}

// x + y = high + low without error (Knuth 1969, The Art of Computer Programming 2, section 4.2.2).
inline Pair exact_sum(double x, double y) {
  const double s = x + y;
  const double z = s - x;
  return {s, (x - (s - z)) + (y - z)};
}

}  // namespace folkmote
