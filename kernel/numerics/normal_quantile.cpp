// Inverse of the normal distribution function.
//
// The plan is that of Wichura (1988), Algorithm AS 241, Applied Statistics 37:477-484: in the centre x/q is a
// smooth function of q^2, q = p - 1/2, which keeps full relative precision where the quantile is near zero; in
// the tails x is a smooth function of sqrt(-log p). Here each of the two is a row table in place of a rational
// function.
#include "numerics/strict.hpp"

#include <array>
#include <cmath>
#include <cstddef>

#include "numerics/elementary.hpp"
#include "numerics/normal.hpp"
#include "numerics/rows.hpp"
#include "numerics/tables/quantile_rows.hpp"
#include "numerics/two.hpp"

namespace folkmote {
namespace {

constexpr double half_width = 0.44;  // of the centre, in q

// Rounds 0 <= y < 2^20 to a multiple of 1/cells; the count stays in the low bits.
template <int cells>
inline Pair nearest_cell(double y, std::uint32_t& index) {
  constexpr double grid = 6755399441055744.0 / cells;
  const double shifted = y + grid;
  index = static_cast<std::uint32_t>(bits_of(shifted));
  return {shifted - grid, y - (shifted - grid)};
}

double centre(double q) {
  std::uint32_t row = 0;
  const double t = nearest_cell<128>(q * q, row).low;
  return q * row_value(tables::quantile_centre[row], t);
}

// -x for a tail probability 0 < p < 0.06, so 1.677 < r < 27.29.
double tail_distance(double p) {
  std::uint32_t row = 0;
  const double t = nearest_cell<8>(std::sqrt(-logarithm(p)), row).low;
  return row_value(tables::quantile_tail[row - 13], t);
}

double beyond_the_centre(double p) {
  if (!(p > 0.0 && p < 1.0)) return p == 0.0 ? -infinity : (p == 1.0 ? infinity : not_a_number);
  const std::uint64_t upper = static_cast<std::uint64_t>(p > 0.5);
  const double distance = tail_distance(upper != 0 ? 1.0 - p : p);  // 1 - p is exact here
  return double_of(bits_of(distance) ^ ((upper ^ 1U) << 63));       // minus below
}

}  // namespace

double normal_quantile(double p) {
  const double q = p - 0.5;
  return magnitude(q) <= half_width ? centre(q) : beyond_the_centre(p);
}

namespace {

// centre() of two values, the same operations lane by lane. Beyond the centre the result is meaningless.
inline Two centre_of_two(Two q) {
  constexpr double grid = 6755399441055744.0 / 128;
  const Two square = q * q, edge = both(half_width * half_width);
  const Two y = square < edge ? square : edge;
  const Two shifted = y + grid;
  const Two t = y - (shifted - grid);
  const Two s = t * t, s0 = both(s[0]), s1 = both(s[1]);
  const double* row0 = tables::quantile_centre[static_cast<std::uint32_t>(((TwoBits)shifted)[0])];
  const double* row1 = tables::quantile_centre[static_cast<std::uint32_t>(((TwoBits)shifted)[1])];
  const Two chain0 =
      ((load_two(row0 + 8) * s0 + load_two(row0 + 6)) * s0 + load_two(row0 + 4)) * s0 + load_two(row0 + 2);
  const Two chain1 =
      ((load_two(row1 + 8) * s1 + load_two(row1 + 6)) * s1 + load_two(row1 + 4)) * s1 + load_two(row1 + 2);
  const Two first0 = load_two(row0), first1 = load_two(row1);
  const Two even = first_lanes(chain0, chain1), odd = second_lanes(chain0, chain1);
  return q * (first_lanes(first0, first1) + (even * s + t * (second_lanes(first0, first1) + odd * s)));
}

}  // namespace

// In blocks: first all values as if they lay in the centre, with the others written to a list, then that list. No
// branch depends on the side on which a value falls, which would be guessed wrong once in four times.
void normal_quantile(std::span<const double> p, std::span<double> out) {
  constexpr std::size_t block = 256;
  std::array<double, block> kept;
  std::array<std::size_t, block> place;
  for (std::size_t start = 0; start < p.size(); start += block) {
    const std::size_t end = p.size() - start < block ? p.size() : start + block;
    std::size_t others = 0;
    const auto note = [&](std::size_t i, double value, double q) {
      kept[others] = value;
      place[others] = i;
      others += magnitude(q) <= half_width ? 0U : 1U;
    };
    std::size_t i = start;
    for (; i + 2 <= end; i += 2) {
      const Two values = load_two(&p[i]), q = values - 0.5;
      note(i, values[0], q[0]);
      note(i + 1, values[1], q[1]);
      store_two(&out[i], centre_of_two(q));
    }
    if (i < end) out[i] = normal_quantile(p[i]);
    for (std::size_t j = 0; j < others; ++j) out[place[j]] = beyond_the_centre(kept[j]);
  }
}

}  // namespace folkmote
