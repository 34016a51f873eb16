// Two doubles side by side. The vector type is an extension of gcc and clang that every target understands: one
// register where there is one of that width, two scalars elsewhere. Each operation acts on each lane exactly as the
// scalar operation does, so results do not depend on the target.
#pragma once

#include "numerics/strict.hpp"

#include <cstring>

#include "numerics/bits.hpp"
#include "numerics/tables/elementary_rows.hpp"

namespace folkmote {

typedef double Two __attribute__((vector_size(16)));
typedef std::int64_t TwoBits __attribute__((vector_size(16)));

inline Two load_two(const double* p) {
  Two v;
  std::memcpy(&v, p, sizeof v);
  return v;
}

inline void store_two(double* p, Two v) { std::memcpy(p, &v, sizeof v); }

inline Two both(double x) { return Two{x, x}; }
inline Two first_lanes(Two a, Two b) { return Two{a[0], b[0]}; }
inline Two second_lanes(Two a, Two b) { return Two{a[1], b[1]}; }

// exponential of both lanes, the bits of the scalar form, for -700 <= x <= 700; smaller x count as -700.
inline Two exponential_of_two(Two x) {
  constexpr double shift = 6755399441055744.0;
  const Two floor = both(-700.0);
  x = x > floor ? x : floor;
  const Two shifted = x * tables::log2_64th[2] + shift;
  const Two n = shifted - shift;
  const Two r = (x - n * tables::log2_64th[0]) + (0.0 - n * tables::log2_64th[1]);
  const Two r2 = r * r;
  const Two p = r + (r2 * (0.5 + r * (1.0 / 6)) + (r2 * r2) * ((1.0 / 24 + r * (1.0 / 120)) + r2 * (1.0 / 720)));
  const TwoBits index = (TwoBits)shifted;
  const Two row0 = load_two(tables::power_rows[index[0] & 63]), row1 = load_two(tables::power_rows[index[1] & 63]);
  const Two high = first_lanes(row0, row1), low = second_lanes(row0, row1);
  const Two mantissa = high + (low + high * p);
  return (Two)((TwoBits)mantissa + ((index >> 6) << 52));
}

}  // namespace folkmote
