// Plackett's integral from rho to the nearer end, 1 or -1, as a series (compare Vasicek 1998, J. Computational Finance
// 1(4):5-10, and the expansion at |r| = 1 in Genz 2004, Statistics and Computing 14:251-260).
//
// With v^2 = (1-r)/(1+r), A = (h-k)^2/8 and B = (h+k)^2/8 the integral from rho to 1 of the density is
//   (1/pi) exp(-A-B) * integral from 0 to c of exp(-A/v^2) exp(-B v^2)/(1+v^2) dv,   c^2 = (1-rho)/(1+rho).
// The smooth factor is expanded in powers of v^2,
//   exp(-B q)/(1+q) = g_0 + g_1 q + ...,   g_j = -g_(j-1) + (-B)^j/j!,
// and the moments m_j = c^-(2j+1) * integral of v^(2j) exp(-A/v^2) come by parts, with a = A/c^2:
//   m_0 = exp(-a) - 2 sqrt(pi a) Phi(-sqrt(2a)),   (2j+1) m_j = exp(-a) - 2a m_(j-1).
// For negative rho, h+k and h-k change places.
#include "numerics/strict.hpp"

#include <array>
#include <cstddef>
#include <utility>

#include "numerics/binormal_parts.hpp"
#include "numerics/elementary.hpp"
#include "numerics/normal.hpp"

namespace folkmote::binormal {
namespace {

constexpr std::size_t most_terms = 40;
constexpr double largest_growth = 1.0;  // of B c^2: beyond, the alternating series loses digits

// 1/(2j+1) and 1/j, j from 0 (the latter 0 at j = 0).
struct Inverses {
  std::array<double, most_terms> odd{}, whole{};
  constexpr Inverses() {
    for (std::size_t j = 0; j < most_terms; ++j) {
      odd[j] = 1.0 / static_cast<double>(2 * j + 1);
      whole[j] = j == 0 ? 0.0 : 1.0 / static_cast<double>(j);
    }
  }
};
constexpr Inverses inverses;

// Sum over j of g_j c^(2j) m_j.
double moment_series(double a, double end_value, double growth, double c2) {
  const double distance = std::sqrt(a);
  double moment = end_value - 2.0 * std::sqrt(pi) * distance * normal_cdf(-std::sqrt(2.0) * distance);
  double coefficient = 1.0, power = 1.0, sum = moment;
  for (std::size_t j = 1; j < most_terms; ++j) {
    power *= -growth * inverses.whole[j];
    coefficient = power - c2 * coefficient;
    moment = (end_value - 2.0 * a * moment) * inverses.odd[j];
    sum += coefficient * moment;
    if (magnitude(coefficient) < 1e-17 && magnitude(power) < 1e-17) break;
  }
  return sum;
}

}  // namespace

SeriesPart series_part(double h, double k, double rho) {
  const double difference = h - k, total = h + k;
  double across = 0.125 * difference * difference, along = 0.125 * total * total;
  double c2 = (1.0 - rho) / (1.0 + rho);
  if (rho < 0) {
    std::swap(across, along);
    c2 = 1.0 / c2;
  }
  const double a = across / c2, growth = along * c2;
  if (growth > largest_growth) return {0.0, infinity};
  if (a > 700.0) return {0.0, exponential(-700.0)};
  const double end_value = exponential(-a);
  const double front = std::sqrt(c2) / pi;
  const double value = front * exponential(-(across + along)) * moment_series(a, end_value, growth, c2);
  return {value > 0 ? value : 0.0, front * end_value * exponential(-along)};
}

}  // namespace folkmote::binormal
