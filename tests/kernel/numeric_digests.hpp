// One digest per numerical function: FNV-1a, 64 bits, over the bytes of its results on a million fixed inputs. Shared
// by the test that compares them with the golden file and by the program that writes that file.
#pragma once

#include "numerics/strict.hpp"

#include <cstdio>
#include <string>
#include <utility>
#include <vector>

#include "drawn_numbers.hpp"
#include "numerics/binormal.hpp"
#include "numerics/bits.hpp"
#include "numerics/elementary.hpp"
#include "numerics/normal.hpp"
#include "numerics/quadrature.hpp"
#include "numerics/roots.hpp"
#include "numerics/sums.hpp"

namespace digests {

class Fnv {
 public:
  void add(double value) {
    std::uint64_t bits =
        folkmote::is_nan(value) ? 0x7ff8000000000000U : folkmote::bits_of(value);  // the NaN's sign is not promised
    for (int i = 0; i < 8; ++i, bits >>= 8) hash_ = (hash_ ^ (bits & 255U)) * 0x100000001b3U;
  }
  std::string text() const {
    char buffer[20];
    std::snprintf(buffer, sizeof buffer, "%016llx", static_cast<unsigned long long>(hash_));
    return buffer;
  }

 private:
  std::uint64_t hash_ = 0xcbf29ce484222325U;
};

inline constexpr int count = 1000000;

template <class Draw, class F>
std::string over(std::uint64_t seed, int n, const Draw& draw, const F& f) {
  drawn::Numbers numbers(seed);
  Fnv hash;
  for (int i = 0; i < n; ++i) hash.add(f(draw(numbers)));
  return hash.text();
}

inline std::string array_digest() {
  drawn::Numbers numbers(4);
  std::vector<double> x(count);
  for (double& v : x) v = numbers.bits() % 16 == 0 ? numbers.between(-40, 40) : numbers.between(-9, 9);
  folkmote::normal_cdf(x, x);
  Fnv hash;
  for (const double v : x) hash.add(v);
  return hash.text();
}

inline std::string exponentials_digest() {
  drawn::Numbers numbers(15);
  std::vector<double> x(count);
  for (double& v : x) v = numbers.between(-720, 720);
  folkmote::exponentials(x, x);
  Fnv hash;
  for (const double v : x) hash.add(v);
  return hash.text();
}

template <class F>
std::string bivariate_digest(std::uint64_t seed, int n, const F& f) {
  drawn::Numbers numbers(seed);
  Fnv hash;
  for (int i = 0; i < n; ++i) {
    const double size = i % 8 == 0 ? 20 : 4;
    const double h = numbers.between(-size, size), k = numbers.between(-size, size);
    f(hash, h, k, i % 16 == 1 ? 1 - numbers.magnitude(-40, -3) : numbers.between(-1, 1));
  }
  return hash.text();
}

inline std::string sums_digest() {
  drawn::Numbers numbers(9);
  std::vector<double> x(1000), y(1000);
  Fnv hash;
  for (std::size_t i = 0; i < 1000; ++i) {
    for (double& v : x) v = numbers.between(-1, 1);
    for (double& v : y) v = numbers.between(-1, 1);
    hash.add(folkmote::ordered_sum(std::span<const double>(x).first(i)));
    hash.add(folkmote::ordered_dot(std::span<const double>(x).first(i), std::span<const double>(y).first(i)));
  }
  return hash.text();
}

inline std::string roots_digest() {
  drawn::Numbers numbers(10);
  Fnv hash;
  for (int i = 0; i < 20000; ++i) {
    const double a = numbers.between(0, 1), b = numbers.between(0.5, 8);
    hash.add(folkmote::decreasing_root([&](double x) { return folkmote::normal_cdf(b * (a - x)) - x; }, 0.0, 1.0));
    hash.add(folkmote::decreasing_root_newton(
        [&](double x) {
          return std::pair{folkmote::normal_cdf(b * (a - x)) - x, -1 - b * folkmote::normal_density(b * (a - x))};
        },
        0.0, 1.0, a));
  }
  return hash.text();
}

inline std::string rules_digest() {
  Fnv hash;
  for (std::size_t n = 1; n <= 100; ++n)
    for (const auto& rule : {folkmote::gauss_legendre(n), folkmote::gauss_hermite(n)})
      for (const auto* v : {&rule.nodes, &rule.weights})
        for (const double x : *v) hash.add(x);
  return hash.text();
}

inline std::vector<std::pair<std::string, std::string>> all() {
  using drawn::Numbers;
  const auto wide = [](double size) { return [size](Numbers& n) { return n.between(-size, size); }; };
  const auto positive = [](Numbers& n) { return n.magnitude(-1074, 1023); };
  const auto probability = [](Numbers& n) { return n.bits() % 2 == 0 ? n.unit() : n.magnitude(-1074, -1); };
  return {
      {"exponential", over(1, count, wide(750), folkmote::exponential)},
      {"exponentials", exponentials_digest()},
      {"logarithm", over(2, count, positive, folkmote::logarithm)},
      {"logarithm_of_one_plus", over(3, count, wide(1), folkmote::logarithm_of_one_plus)},
      {"arcsine", over(5, count, wide(1), folkmote::arcsine)},
      {"normal_cdf", over(6, count, wide(40), [](double x) { return folkmote::normal_cdf(x); })},
      {"normal_cdf_array", array_digest()},
      {"normal_density", over(7, count, wide(39), folkmote::normal_density)},
      {"log_normal_cdf", over(8, count, wide(60), folkmote::log_normal_cdf)},
      {"normal_mills", over(11, count, wide(60), folkmote::normal_mills)},
      {"normal_quantile", over(12, count, probability, [](double p) { return folkmote::normal_quantile(p); })},
      {"binormal_cdf",
       bivariate_digest(
           13, count, [](Fnv& hash, double h, double k, double rho) { hash.add(folkmote::binormal_cdf(h, k, rho)); })},
      {"binormal_covariance", bivariate_digest(16, count,
                                               [](Fnv& hash, double h, double k, double rho) {
                                                 hash.add(folkmote::binormal_covariance(h, k, rho));
                                               })},
      {"binormal_gradient", bivariate_digest(14, count,
                                             [](Fnv& hash, double h, double k, double rho) {
                                               const folkmote::BinormalGradient g =
                                                   folkmote::binormal_gradient(h, k, rho);
                                               for (const double v : {g.dh, g.dk, g.drho}) hash.add(v);
                                             })},
      {"ordered_sums", sums_digest()},
      {"roots", roots_digest()},
      {"quadrature_rules", rules_digest()},
  };
}

}  // namespace digests
