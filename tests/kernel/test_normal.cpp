// The normal distribution: published tables, other libraries, and 50-digit values.
#include "numerics/strict.hpp"

#include <boost/math/distributions/normal.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <string>
#include <vector>

#include "drawn_numbers.hpp"
#include "numerics/bits.hpp"
#include "numerics/normal.hpp"
#include "precise_normal.hpp"
#include "reference_table.hpp"

using namespace folkmote;
using precise::Real;

namespace {

struct Worst {
  double error = 0, at = 0;
  void see(double e, double x) {
    if (!(e <= error)) error = e, at = x;
  }
};

}  // namespace

TEST_CASE("values computed with mpmath at 80 digits", "[normal][reference]") {
  const reference::Table table("normal_cdf.csv");
  Worst cdf, upper, logarithms, density, mills;
  for (std::size_t i = 0; i < table.size(); ++i) {
    const double x = table.number(i, "x_hex");
    const Real truth(table.text(i, "value"));
    const std::string& function = table.text(i, "fn");
    if (function == "Phi")
      cdf.see(precise::ulps(normal_cdf(x), truth), x);
    else if (function == "upper")
      upper.see(precise::ulps(normal_upper(x), truth), x);
    else if (function == "phi")
      density.see(precise::ulps(normal_density(x), truth), x);
    else if (function == "logPhi") {
      if (x < -1e150 || truth == 0) continue;
      logarithms.see(precise::ulps(log_normal_cdf(x), truth), x);
    } else {
      INFO(function);
      CHECK(function == "phi_over_Phi");
      if (x < 38) mills.see(precise::ulps(normal_mills(x), truth), x);
    }
  }
  CHECK(cdf.error < 3);
  CHECK(upper.error < 3);
  CHECK(density.error < 2);
  CHECK(logarithms.error < 4);
  CHECK(mills.error < 4);
}

TEST_CASE("Abramowitz and Stegun, tables 26.1 and 26.2", "[normal][reference]") {
  const reference::Table first("as_table_26_1.csv");
  for (std::size_t i = 0; i < first.size(); ++i) {
    const std::string& printed = first.text(i, "value");
    const double digits = printed.size() > 12 ? 1.5e-15 : 0.51e-10;
    CHECK(std::fabs(normal_cdf(first.number(i, "x")) - first.number(i, "value")) < digits);
  }
  const reference::Table second("as_table_26_2.csv");
  for (std::size_t i = 0; i < second.size(); ++i)
    CHECK(std::fabs(-log_normal_cdf(-second.number(i, "x")) / std::log(10.0) - second.number(i, "value")) < 0.51e-5);
}

TEST_CASE("distribution function against 50 digits", "[normal]") {
  drawn::Numbers numbers(21);
  Worst centre, tail, symmetric;
  for (int i = 0; i < 12000; ++i) {
    const double x = numbers.between(-8.4, 8.4);
    centre.see(precise::ulps(normal_cdf(x), precise::cdf(x)), x);
    if (normal_cdf(-x) != 1.0 - normal_cdf(x) && x < 0) symmetric.see(1, x);
  }
  for (int i = 0; i < 6000; ++i) {
    const double x = numbers.between(-38.5, -8.3);
    tail.see(precise::ulps(normal_cdf(x), precise::cdf(x)), x);
  }
  INFO(centre.at << " " << tail.at);
  CHECK(centre.error < 2.0);
  CHECK(tail.error < 3.0);
}

TEST_CASE("distribution function at the seams of its table", "[normal]") {
  Worst worst;
  for (int n = -540; n <= 540; ++n)
    for (const double side : {-0x1p-60, 0.0, 0x1p-60}) {
      const double x = (n + 0.5) / 64 * (1 + side * 0x1p8);
      worst.see(precise::ulps(normal_cdf(x), precise::cdf(x)), x);
    }
  CHECK(worst.error < 2.7);
  double before = 0;  // never falls by more than rounding from cell to cell
  int falls = 0;
  for (double x = -39; x < 9; x += 0x1p-12) {
    const double now = normal_cdf(x);
    if (now < before) ++falls;
    before = now;
  }
  CHECK(falls == 0);
}

TEST_CASE("logarithm, density and Mills ratio against 50 digits", "[normal]") {
  drawn::Numbers numbers(22);
  Worst logarithms, density, mills;
  for (int i = 0; i < 4000; ++i) {
    const double x = i % 2 == 0 ? numbers.between(-38, 30) : numbers.between(-4, 4);
    const Real phi = precise::density(x);
    logarithms.see(precise::ulps(log_normal_cdf(x), precise::log_cdf(x)), x);
    density.see(precise::ulps(normal_density(x), phi), x);
    mills.see(precise::ulps(normal_mills(x), phi / precise::cdf(x)), x);
  }
  CHECK(logarithms.error < 4);
  CHECK(density.error < 2);
  CHECK(mills.error < 4);
}

TEST_CASE("normal distribution at the ends of the line", "[normal]") {
  CHECK(normal_cdf(0.0) == 0.5);
  CHECK(normal_cdf(-0.0) == 0.5);
  CHECK(normal_cdf(infinity) == 1.0);
  CHECK(normal_cdf(1e300) == 1.0);
  CHECK(normal_cdf(-infinity) == 0.0);
  CHECK(normal_cdf(-38.0) > 0.0);
  CHECK(normal_cdf(-38.5) == 0.0);
  CHECK(is_nan(normal_cdf(not_a_number)));
  CHECK(normal_density(infinity) == 0.0);
  CHECK(is_nan(normal_density(not_a_number)));
  CHECK(log_normal_cdf(-infinity) == -infinity);
  CHECK(log_normal_cdf(infinity) == 0.0);
  CHECK(log_normal_cdf(-1e100) == Approx(-5e199).epsilon(1e-15));
  CHECK(is_nan(log_normal_cdf(not_a_number)));
  CHECK(normal_mills(-infinity) == infinity);
  CHECK(normal_mills(infinity) == 0.0);
}

TEST_CASE("array and scalar forms give the same bits", "[normal][bits]") {
  drawn::Numbers numbers(23);
  std::vector<double> x(200003);
  for (double& v : x) v = numbers.bits() % 50 == 0 ? numbers.between(-45, 45) : numbers.between(-8.6, 8.6);
  x[17] = not_a_number, x[18] = infinity, x[40] = -infinity, x[55] = -0.0, x[56] = 0.0, x[57] = 5e-324,
  x[58] = -8.40625, x[59] = 8.40625;
  std::vector<double> out(x.size()), same = x;
  normal_cdf(x, out);
  normal_cdf(same, same);
  int different = 0;
  for (std::size_t i = 0; i < x.size(); ++i) {
    const double one = normal_cdf(x[i]);
    if (is_nan(one) ? !is_nan(out[i]) || !is_nan(same[i])
                    : bits_of(one) != bits_of(out[i]) || bits_of(one) != bits_of(same[i]))
      ++different;
  }
  CHECK(different == 0);
  for (std::size_t n = 0; n < 9; ++n) {  // short spans, nothing written beyond
    std::vector<double> few(n + 1, 7.0);
    normal_cdf(std::span<const double>(x.data(), n), std::span<double>(few.data(), n));
    CHECK(few[n] == 7.0);
    for (std::size_t i = 0; i < n; ++i) CHECK(few[i] == normal_cdf(x[i]));
  }
}

TEST_CASE("quantile at published and computed points", "[normal][reference]") {
  const reference::Table table("normal_quantile.csv");
  for (std::size_t i = 0; i < table.size(); ++i) {
    const double p = table.number(i, "p_hex");
    INFO(p);
    const Real truth(table.text(i, "value"));
    if (truth == 0)
      CHECK(normal_quantile(p) == 0.0);
    else
      CHECK(precise::relative(normal_quantile(p), truth) < 6e-16);
  }
  const reference::Table wichura("as241_published.csv");
  for (std::size_t i = 0; i < wichura.size(); ++i)
    CHECK(normal_quantile(wichura.number(i, "p")) == Approx(wichura.number(i, "value")).epsilon(4e-16));
}

TEST_CASE("quantile against 50 digits", "[normal]") {
  drawn::Numbers numbers(24);
  Worst worst;
  const auto check = [&](double p) {
    const double x = normal_quantile(p);
    if (p <= 0.5)
      worst.see(precise::relative(x, precise::quantile_from(x, p)), p);
    else
      worst.see(precise::relative(x, -precise::quantile_from(-x, 1 - Real(p))), p);
  };
  for (int i = 0; i < 1500; ++i) check(numbers.unit());
  for (int i = 0; i < 1000; ++i) check(numbers.magnitude(-1074, -2));
  for (int i = 0; i < 500; ++i) check(0.5 + (i % 2 == 0 ? 1 : -1) * numbers.magnitude(-52, -2));
  for (int i = 0; i < 500; ++i)
    check(i % 2 == 0 ? numbers.between(0.059, 0.061) : numbers.between(0.939, 0.941));  // seams
  INFO(worst.at);
  CHECK(worst.error < 1e-15);
  CHECK(normal_quantile(0.0) == -infinity);
  CHECK(normal_quantile(1.0) == infinity);
  CHECK(normal_quantile(0.5) == 0.0);
  CHECK(is_nan(normal_quantile(-1e-300)));
  CHECK(is_nan(normal_quantile(1.0000000000000002)));
  CHECK(is_nan(normal_quantile(not_a_number)));
}

TEST_CASE("array and scalar quantiles give the same bits", "[normal][bits]") {
  drawn::Numbers numbers(26);
  std::vector<double> p(100001);
  for (double& v : p) v = numbers.bits() % 4 == 0 ? numbers.magnitude(-1074, 1) : numbers.unit();
  p[1] = not_a_number, p[2] = 0.0, p[5] = 1.0, p[6] = -1.0, p[9] = 0.5, p[12] = infinity, p[15] = 0.06, p[16] = 0.94,
  p[17] = -infinity;
  std::vector<double> out(p.size()), same = p;
  normal_quantile(p, out);
  normal_quantile(same, same);
  int different = 0;
  for (std::size_t i = 0; i < p.size(); ++i) {
    const double one = normal_quantile(p[i]);
    if (is_nan(one) ? !is_nan(out[i]) || !is_nan(same[i])
                    : bits_of(one) != bits_of(out[i]) || bits_of(one) != bits_of(same[i]))
      ++different;
  }
  CHECK(different == 0);
}

TEST_CASE("agreement with Boost.Math", "[normal][agreement]") {
  const boost::math::normal_distribution<double> boost_normal;
  drawn::Numbers numbers(25);
  Worst cdf, quantile;
  for (int i = 0; i < 100000; ++i) {
    const double x = numbers.between(-8, 8), b = boost::math::cdf(boost_normal, x);
    cdf.see(std::fabs(normal_cdf(x) / b - 1), x);
    const double p = i % 2 == 0 ? numbers.unit() : numbers.magnitude(-1000, -1);
    if (p > 0 && p < 1 && p != 0.5)
      quantile.see(std::fabs(normal_quantile(p) / boost::math::quantile(boost_normal, p) - 1), p);
  }
  INFO(cdf.at << " " << quantile.at);
  CHECK(cdf.error < 1e-14);  // Boost's own error in the tail
  CHECK(quantile.error < 2e-15);
}
