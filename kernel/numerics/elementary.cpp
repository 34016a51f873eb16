#include "numerics/strict.hpp"

#include "numerics/elementary.hpp"

#include <cmath>
#include <cstddef>

#include "numerics/tables/elementary_rows.hpp"
#include "numerics/two.hpp"

namespace folkmote {

// Exponential: Tang (1989), ACM Trans. Math. Software 15:144-157. x = (64 m + j) (log 2)/64 + r with
// |r| <= (log 2)/128, exp x = 2^m 2^(j/64) exp r; the table holds 2^(j/64) to twice the precision.
ScaledExponential scaled_exponential(double high, double low) {
  constexpr double shift = 6755399441055744.0;  // 1.5 * 2^52: adding it rounds to an integer held in the low bits
  const double shifted = high * tables::log2_64th[2] + shift;
  const double n = shifted - shift;
  const int index = static_cast<int>(static_cast<std::uint32_t>(bits_of(shifted)));
  const double r = (high - n * tables::log2_64th[0]) + (low - n * tables::log2_64th[1]);
  const double r2 = r * r;
  // exp(r) - 1 by its Taylor series: the first omitted term is below 3e-20.
  const double p = r + (r2 * (0.5 + r * (1.0 / 6)) + (r2 * r2) * ((1.0 / 24 + r * (1.0 / 120)) + r2 * (1.0 / 720)));
  const double* power = tables::power_rows[index & 63];
  return {power[0] + (power[1] + power[0] * p), index >> 6};
}

double exponential(double x) {
  if (!(magnitude(x) < 746.0)) {
    if (is_nan(x)) return x + x;
    return x > 0 ? infinity : 0.0;
  }
  const ScaledExponential e = scaled_exponential(x, 0.0);
  return scale_by_power_of_two(e.mantissa, e.power);
}

void exponentials(std::span<const double> x, std::span<double> out) {
  std::size_t i = 0;
  for (; i + 2 <= x.size(); i += 2) {
    const double first = x[i], second = x[i + 1];
    if (magnitude(first) <= 700 && magnitude(second) <= 700) {
      store_two(&out[i], exponential_of_two(Two{first, second}));
    } else {
      out[i] = exponential(first);
      out[i + 1] = exponential(second);
    }
  }
  if (i < x.size()) out[i] = exponential(x[i]);
}

namespace {

// log(1 + r) - r for |r| < 0.012: the Taylor series, first omitted term below r^2 * 2e-19.
double log_series(double r) {
  const double r2 = r * r;
  const double odd = 1.0 / 3 + r2 * (1.0 / 5 + r2 * (1.0 / 7 + r2 * (1.0 / 9)));
  const double even = 1.0 / 4 + r2 * (1.0 / 6 + r2 * (1.0 / 8 + r2 * (1.0 / 10)));
  return r2 * (r * (odd - r * even) - 0.5);
}

// Logarithm by table: Tang (1990), ACM Trans. Math. Software 16:378-400. x = 2^k m with m in [0.7, 1.42),
// c the centre of m's cell: log x = k log 2 + log c + log(1 + r), r = (m - c)/c. `extra` is added to m.
double log_of(double x, int k, double extra) {
  const std::uint64_t bits = bits_of(x);
  const int cell = static_cast<int>((bits >> 45) & 127U);
  const int halved = static_cast<int>((static_cast<std::uint32_t>(cell) + 75U) >> 7);  // cell >= 53, without a branch
  k += static_cast<int>(bits >> 52) - 1023 + halved;
  const std::uint64_t exponent = static_cast<std::uint64_t>(1023 - halved) << 52;
  const double m = double_of((bits & 0x000fffffffffffffU) | exponent);
  const double* row = tables::logarithm_rows[cell];
  const double r = (m - row[0]) * row[1];
  const double first = static_cast<double>(k) * tables::log2_split[0] + row[2];  // exact: few bits in each
  const double sum = first + r;
  const double rest = (first - sum) + r;  // exact, since |first| > |r| or first = 0
  const double small = (row[3] + static_cast<double>(k) * tables::log2_split[1]) + extra;
  return sum + (rest + (small + log_series(r)));
}

}  // namespace

double logarithm(double x) {
  if (!(x >= 2.2250738585072014e-308)) {
    if (x == 0) return -infinity;
    if (!(x > 0)) return not_a_number;
    return log_of(x * 18014398509481984.0, -54, 0.0);  // subnormal: times 2^54
  }
  if (x == infinity) return x;
  return log_of(x, 0, 0.0);
}

double logarithm_of_one_plus(double x) {
  if (!(x > -1.0)) return x == -1.0 ? -infinity : not_a_number;
  if (magnitude(x) < 0.0078125) return x + log_series(x);
  if (!(x < 1e300)) return logarithm(x);
  // 1 + x = s + e exactly, and log(s + e) = log s + e/s up to e^2.
  const Pair s = exact_sum(1.0, x);
  return log_of(s.high, 0, s.low / s.high);
}

// asin x = x + x^3 P(x^2) for |x| <= 1/2; beyond, asin x = pi/2 - 2 asin(sqrt((1-x)/2)) (Abramowitz & Stegun 4.4.33,
// half-angle), with the square root carried to twice the precision.
double arcsine(double x) {
  const auto series = [](double s) {
    double p = tables::arcsine_row[13];
    for (int j = 12; j >= 0; --j) p = p * s + tables::arcsine_row[j];
    return p * s;
  };
  const double a = magnitude(x);
  if (!(a <= 1.0)) return not_a_number;
  if (a <= 0.5) return x + x * series(x * x);
  const double z = 0.5 * (1.0 - a);  // exact
  const double root = std::sqrt(z);
  const Pair square = exact_product(root, root);
  const double correction = root > 0 ? ((z - square.high) - square.low) / (2 * root) : 0.0;
  const double tail = correction + root * series(z);
  const double half_pi = tables::half_pi_split[0];
  const double value = half_pi - (2 * root - (tables::half_pi_split[1] - 2 * tail));
  return x < 0 ? -value : value;
}

}  // namespace folkmote
