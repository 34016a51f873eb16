// Exponential, logarithm, arcsine, bit moves, fixed-order sums, roots and quadrature rules.
#include "numerics/strict.hpp"

#include <algorithm>
#include <boost/math/quadrature/gauss.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <vector>

#include "drawn_numbers.hpp"
#include "numerics/elementary.hpp"
#include "numerics/quadrature.hpp"
#include "numerics/roots.hpp"
#include "numerics/sums.hpp"
#include "precise_normal.hpp"

using namespace folkmote;
using precise::Real;

namespace {

template <class F, class Truth, class Draw>
double worst_ulps(int count, const F& f, const Truth& truth, const Draw& draw) {
  double worst = 0;
  for (int i = 0; i < count; ++i) {
    const double x = draw();
    const double error = precise::ulps(f(x), truth(Real(x)));
    if (!(error <= worst)) worst = error;  // NaN sticks
    if (std::isnan(worst)) break;
  }
  return worst;
}

}  // namespace

TEST_CASE("a product and a sum are rounded separately", "[numerics][bits]") {
  // (1 + e)(1 - e) - 1 = -e^2; without fusing, the product rounds to 1 and the difference is 0.
  volatile double e = 0x1p-30;
  const double a = 1.0 + e, b = 1.0 - e, c = -1.0;
  CHECK(a * b + c == 0.0);
  std::vector<double> x(64, a), y(64, b), out(64);
  for (std::size_t i = 0; i < x.size(); ++i) out[i] = x[i] * y[i] + c;  // a loop the compiler may vectorise
  CHECK(std::count(out.begin(), out.end(), 0.0) == 64);
  CHECK(exact_product(a, b).low == -0x1p-60);
}

TEST_CASE("exponential", "[numerics]") {
  drawn::Numbers numbers(11);
  const auto truth = [](const Real& x) { return Real(exp(x)); };
  CHECK(worst_ulps(4000, exponential, truth, [&] { return numbers.between(-708, 709.7); }) < 0.6);
  CHECK(worst_ulps(2000, exponential, truth, [&] { return numbers.between(-745.1, -708); }) < 1.0);  // subnormal
  CHECK(worst_ulps(2000, exponential, truth, [&] { return numbers.between(-1, 1); }) < 0.6);
  CHECK(worst_ulps(500, exponential, truth, [&] { return numbers.magnitude(-60, -1); }) < 0.6);
  CHECK(exponential(0.0) == 1.0);
  CHECK(exponential(-0.0) == 1.0);
  CHECK(exponential(infinity) == infinity);
  CHECK(exponential(-infinity) == 0.0);
  CHECK(exponential(709.79) == infinity);
  CHECK(exponential(709.782712893384) < infinity);
  CHECK(exponential(-745.2) == 0.0);
  CHECK(exponential(1e300) == infinity);
  CHECK(is_nan(exponential(not_a_number)));
}

TEST_CASE("array and scalar exponentials give the same bits", "[numerics][bits]") {
  drawn::Numbers numbers(17);
  std::vector<double> x(20001), out(x.size());
  for (double& v : x) v = numbers.between(-750, 720);
  x[3] = not_a_number, x[10] = infinity, x[20] = -infinity, x[31] = -0.0, x[33] = 700.0, x[34] = -700.0;
  exponentials(x, out);
  int different = 0;
  for (std::size_t i = 0; i < x.size(); ++i) {
    const double one = exponential(x[i]);
    if (is_nan(one) ? !is_nan(out[i]) : bits_of(one) != bits_of(out[i])) ++different;
  }
  CHECK(different == 0);
}

TEST_CASE("logarithm", "[numerics]") {
  drawn::Numbers numbers(12);
  const auto truth = [](const Real& x) { return Real(log(x)); };
  CHECK(worst_ulps(3000, logarithm, truth, [&] { return numbers.magnitude(-1070, 1023); }) < 0.8);
  CHECK(worst_ulps(3000, logarithm, truth, [&] { return numbers.between(0.5, 2); }) < 0.8);
  CHECK(worst_ulps(2000, logarithm, truth, [&] { return 1 + numbers.between(-0.02, 0.02); }) < 0.8);
  CHECK(worst_ulps(200, logarithm, truth, [&] { return 1 + 0x1p-52 * (1 + std::floor(numbers.unit() * 1000)); }) < 0.8);
  CHECK(logarithm(1.0) == 0.0);
  CHECK(logarithm(0.0) == -infinity);
  CHECK(logarithm(-0.0) == -infinity);
  CHECK(logarithm(infinity) == infinity);
  CHECK(logarithm(5e-324) == Approx(-744.4400719213812).epsilon(1e-15));
  CHECK(is_nan(logarithm(-1.0)));
  CHECK(is_nan(logarithm(not_a_number)));
}

TEST_CASE("logarithm of one plus", "[numerics]") {
  drawn::Numbers numbers(13);
  const auto truth = [](const Real& x) { return Real(log(1 + x)); };
  CHECK(worst_ulps(2000, logarithm_of_one_plus, truth, [&] { return numbers.between(-0.999, 3); }) < 1.0);
  CHECK(worst_ulps(2000, logarithm_of_one_plus, truth, [&] { return numbers.between(-0.02, 0.02); }) < 1.0);
  CHECK(worst_ulps(1000, logarithm_of_one_plus, truth, [&] { return numbers.magnitude(-60, 100); }) < 1.0);
  CHECK(logarithm_of_one_plus(1e-300) == 1e-300);
  CHECK(logarithm_of_one_plus(-1.0) == -infinity);
  CHECK(logarithm_of_one_plus(infinity) == infinity);
  CHECK(is_nan(logarithm_of_one_plus(-1.5)));
  CHECK(is_nan(logarithm_of_one_plus(not_a_number)));
}

TEST_CASE("arcsine", "[numerics]") {
  drawn::Numbers numbers(14);
  const auto truth = [](const Real& x) { return Real(asin(x)); };
  CHECK(worst_ulps(2000, arcsine, truth, [&] { return numbers.between(-1, 1); }) < 2.0);
  CHECK(worst_ulps(500, arcsine, truth, [&] { return 1 - numbers.magnitude(-53, -3); }) < 2.0);
  CHECK(worst_ulps(500, arcsine, truth, [&] { return numbers.magnitude(-100, -3); }) < 2.0);
  CHECK(arcsine(1.0) == 0x1.921fb54442d18p+0);
  CHECK(arcsine(-1.0) == -0x1.921fb54442d18p+0);
  CHECK(is_nan(arcsine(1.0000001)));
  CHECK(is_nan(arcsine(not_a_number)));
}

TEST_CASE("powers of two", "[numerics]") {
  drawn::Numbers numbers(15);
  int different = 0;
  for (int k = -2300; k <= 2300; ++k) {
    const double x = 1 + numbers.unit();
    if (scale_by_power_of_two(x, k) != std::ldexp(x, k)) ++different;
  }
  CHECK(different == 0);
  CHECK(power_of_two(-1022) == 0x1p-1022);
  CHECK(power_of_two(1023) == 0x1p1023);
}

TEST_CASE("sums keep their documented order", "[numerics][bits]") {
  drawn::Numbers numbers(16);
  for (const std::size_t n : {0, 1, 7, 8, 9, 15, 16, 100, 1003}) {
    std::vector<double> x(n), y(n);
    for (auto* v : {&x, &y})
      for (double& value : *v) value = numbers.between(-1, 1) * numbers.magnitude(-20, 20);
    double sum[8] = {}, dot[8] = {};
    for (std::size_t i = 0; i < n; ++i) sum[i % 8] += x[i], dot[i % 8] += x[i] * y[i];
    const auto tree = [](const double* l) { return ((l[0] + l[4]) + (l[2] + l[6])) + ((l[1] + l[5]) + (l[3] + l[7])); };
    CHECK(ordered_sum(x) == tree(sum));
    CHECK(ordered_dot(x, y) == tree(dot));
  }
  CHECK(ordered_sum(std::vector<double>(8, 0.1)) == 0.8);
}

TEST_CASE("roots of decreasing functions", "[numerics]") {
  int calls = 0;
  const auto counted = [&](auto f) {
    return [&calls, f](double x) {
      ++calls;
      return f(x);
    };
  };
  SECTION("smooth") {
    CHECK(std::fabs(decreasing_root(counted([](double x) { return 2 - x * x; }), 0.0, 2.0) - std::sqrt(2.0)) <=
          4.5e-16);
    CHECK(calls <= 20);
  }
  SECTION("a jump is found where it is") {
    const double at = 0.3;
    const double root = decreasing_root(counted([at](double x) { return x < at ? 1.0 : -1.0; }), 0.0, 1.0);
    CHECK(std::fabs(root - at) <= 1.2e-16);
    CHECK(calls <= 60);
  }
  SECTION("a jump of infinite values") {
    const double root = decreasing_root(counted([](double x) { return x < -7 ? infinity : -infinity; }), -20.0, 30.0);
    CHECK(std::fabs(root + 7) <= 1.8e-15);
    CHECK(calls <= 64);
  }
  SECTION("a flat function with a steep end") {
    const double root = decreasing_root(counted([](double x) { return 1e-5 - x * x * x * x * x; }), 0.0, 1.0);
    CHECK(std::fabs(root - 0.1) <= 3e-16);
    CHECK(calls <= 62);
  }
  SECTION("the ends themselves") {
    CHECK(decreasing_root([](double x) { return -x; }, 0.0, 1.0) == 0.0);
    CHECK(decreasing_root([](double x) { return 1 - x; }, 0.0, 1.0) == 1.0);
    CHECK(decreasing_root([](double x) { return -x; }, 3.0, 3.0) == 3.0);
  }
  SECTION("a coarse tolerance is enough and saves calls") {
    const double root = decreasing_root(counted([](double x) { return x < 0.7 ? 2.0 : -1.0; }), 0.0, 1.0, 1e-3);
    CHECK(std::fabs(root - 0.7) <= 1e-3);
    CHECK(calls <= 14);
  }
  SECTION("with slopes") {
    const auto cubic = counted([](double x) { return std::pair{8 - x * x * x, -3 * x * x}; });
    CHECK(std::fabs(decreasing_root_newton(cubic, 0.0, 100.0, 50.0) - 2) <= 9e-16);
    CHECK(calls <= 30);
    const double jump = decreasing_root_newton(
        [](double x) {
          return std::pair{x < 0.3 ? 1.0 : -1.0, 0.0};
        },
        0.0, 1.0, 0.9);
    CHECK(std::fabs(jump - 0.3) <= 1.2e-16);
  }
}

TEST_CASE("Gauss-Legendre rules", "[numerics]") {
  for (const std::size_t n : {1, 2, 3, 20, 101, 200}) {
    const QuadratureRule rule = gauss_legendre(n);
    REQUIRE(rule.nodes.size() == n);
    for (std::size_t power = 0; power < std::min<std::size_t>(2 * n, 40); power += 2) {
      double moment = 0;
      for (std::size_t i = 0; i < n; ++i)
        moment += rule.weights[i] * std::pow(rule.nodes[i], static_cast<double>(power));
      CHECK(moment == Approx(2.0 / (static_cast<double>(power) + 1)).epsilon(1e-14));
    }
    for (std::size_t i = 0; i < n; ++i) CHECK(rule.nodes[i] == -rule.nodes[n - 1 - i]);
    CHECK(std::is_sorted(rule.nodes.begin(), rule.nodes.end()));
  }
  const QuadratureRule rule = gauss_legendre(100);
  const auto& nodes = boost::math::quadrature::gauss<double, 100>::abscissa();
  const auto& weights = boost::math::quadrature::gauss<double, 100>::weights();
  for (std::size_t i = 0; i < 50; ++i) {
    CHECK(std::fabs(rule.nodes[50 + i] - nodes[i]) < 3e-16);
    CHECK(std::fabs(rule.weights[50 + i] / weights[i] - 1) < 3e-13);
  }
}

TEST_CASE("Gauss-Hermite rules", "[numerics]") {
  for (const std::size_t n : {1, 2, 3, 20, 101, 200, 300}) {
    const QuadratureRule rule = gauss_hermite(n);
    double expected = 1;  // E Z^(2j) = 1 * 3 * ... * (2j - 1)
    for (std::size_t j = 0; 2 * j < std::min<std::size_t>(2 * n, 40); ++j) {
      double moment = 0;
      for (std::size_t i = 0; i < n; ++i)
        moment += rule.weights[i] * std::pow(rule.nodes[i], 2.0 * static_cast<double>(j));
      CHECK(moment == Approx(expected).epsilon(2e-13));
      expected *= 2.0 * static_cast<double>(j) + 1;
    }
    CHECK(std::is_sorted(rule.nodes.begin(), rule.nodes.end()));
  }
  const QuadratureRule three = gauss_hermite(3);  // 0 and sqrt 3, weights 2/3 and 1/6
  CHECK(three.nodes[2] == Approx(std::sqrt(3.0)).epsilon(1e-15));
  CHECK(three.weights[1] == Approx(2.0 / 3).epsilon(1e-15));
}
