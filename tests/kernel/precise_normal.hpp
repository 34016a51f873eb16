// Normal and bivariate normal probabilities to some 30 digits, for the tests only, by formulas that the kernel does
// not use.
#pragma once

#include <boost/math/constants/constants.hpp>
#include <boost/multiprecision/cpp_bin_float.hpp>
#include <cmath>
#include <vector>

namespace precise {

using Real = boost::multiprecision::number<boost::multiprecision::cpp_bin_float<50>, boost::multiprecision::et_off>;

inline const Real& pi() {
  static const Real value = boost::math::constants::pi<Real>();
  return value;
}

inline Real density(const Real& x) { return exp(-x * x / 2) / sqrt(2 * pi()); }

// 1 - Phi(a), a >= 0: Abramowitz & Stegun 26.2.11 (series) and 26.2.14 (continued fraction).
inline Real upper(const Real& a) {
  if (a < 0) return 1 - upper(-a);
  if (a < 6) {
    Real term = a, sum = a;
    for (int k = 3; term > sum * Real(1e-55); k += 2) {
      term *= a * a / k;
      sum += term;
    }
    return Real(0.5) - density(a) * sum;
  }
  Real fraction = a;
  for (int k = 150; k >= 1; --k) fraction = a + k / fraction;
  return density(a) / fraction;
}

inline Real cdf(const Real& x) { return upper(-x); }

inline Real log_cdf(const Real& x) {
  if (x < 5) return log(cdf(x));
  const Real u = upper(x);  // log(1 - u) by its series
  Real power = u, sum = 0;
  for (int k = 1; k < 12; ++k, power *= u) sum -= power / k;
  return sum;
}

// Newton's method on log Phi from a good start; p at most 1/2.
inline Real quantile_from(double start, const Real& p) {
  Real x = start;
  for (int pass = 0; pass < 3; ++pass) {
    const Real q = cdf(x);
    x -= (log(q) - log(p)) * q / density(x);
  }
  return x;
}

// Tanh-sinh quadrature (Takahasi and Mori 1974, Publ. RIMS 9:721-741).
template <class F>
Real integral(const F& f, const Real& low, const Real& high) {
  struct Node {
    Real fraction, weight;
  };
  static const std::vector<Node> nodes = [] {
    std::vector<Node> all;
    const Real step = Real(1) / 40;
    for (int i = -170; i <= 170; ++i) {
      const Real t = i * step, e = exp(-pi() * sinh(t)), fraction = 1 / (1 + e);
      all.push_back({fraction, step * pi() * cosh(t) * fraction * (e / (1 + e))});
    }
    return all;
  }();
  Real sum = 0;
  for (const Node& node : nodes) sum += node.weight * f(low + (high - low) * node.fraction);
  return sum * (high - low);
}

// P(X <= h, Y <= k): Plackett's (1954) derivative integrated over the correlation from -1, where the value is
// max(0, Phi(h) - Phi(-k)). With r = tanh-like variable y, exp(2y) = (1+r)/(1-r), the integrand is
//   exp(-(A + B) - A exp(2y) - B exp(-2y)) / (2 pi cosh y),  A = (h-k)^2/8, B = (h+k)^2/8,
// positive and log-concave. Far ends below 1e-80 of the peak are cut off.
inline Real bivariate(double h_, double k_, double rho_) {
  const Real h = h_, k = k_, rho = rho_;
  Real start = 0;
  if (h + k > 0) start = h > 0 && k > 0 ? 1 - upper(h) - upper(k) : (h <= 0 ? cdf(h) - upper(k) : cdf(k) - upper(h));
  const Real A = (h - k) * (h - k) / 8, B = (h + k) * (h + k) / 8;
  const auto f = [&](const Real& y) -> Real {
    const Real e = exp(y), square = e * e;
    return exp(-(A + B) - A * square - B / square) * e / (pi() * (1 + square));
  };
  Real end = log((1 + rho) / (1 - rho)) / 2, begin = -60, peak = end;
  if (A > 0 && B > 0) peak = log(B / A) / 4;
  if (A > 0) {
    Real cut = log(Real(200) / A) / 2;
    if (cut < 0) cut = 0;
    if (cut < peak + 5) cut = peak + 5;
    if (cut < end) end = cut;
  }
  if (B > 0) {
    Real cut = log(B / Real(200)) / 2;
    if (cut > -1) cut = -1;
    if (peak < end && peak - 5 < cut) cut = peak - 5;
    if (end - 5 < cut) cut = end - 5;
    if (cut > begin) begin = cut;
  }
  if (peak > begin && peak < end) return start + integral(f, begin, peak) + integral(f, peak, end);
  return start + integral(f, begin, end);
}

// |value - truth| in units of the last place of truth (of the subnormal spacing where truth is subnormal).
inline double ulps(double value, const Real& truth) {
  const double near = std::fabs(truth.convert_to<double>());
  const double unit = std::nextafter(near, HUGE_VAL) - near;
  return static_cast<Real>(abs(Real(value) - truth) / unit).convert_to<double>();
}

inline double relative(double value, const Real& truth) {
  return static_cast<Real>(abs((Real(value) - truth) / truth)).convert_to<double>();
}

}  // namespace precise
