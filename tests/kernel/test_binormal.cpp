// The bivariate normal distribution: published tables, exact identities, other libraries and 50-digit quadrature.
#include "numerics/strict.hpp"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <string>
#include <utility>
#include <vector>

#include "drawn_numbers.hpp"
#include "numerics/binormal.hpp"
#include "numerics/binormal_parts.hpp"
#include "numerics/bits.hpp"
#include "numerics/elementary.hpp"
#include "numerics/normal.hpp"
#include "precise_normal.hpp"
#include "reference_table.hpp"

using namespace folkmote;
using precise::Real;

namespace {

struct Errors {
  double absolute = 0, relative = 0;
  double h = 0, k = 0, rho = 0;  // of the worst relative error

  void see(double h_, double k_, double rho_, const Real& truth) {
    const double error = static_cast<Real>(abs(Real(binormal_cdf(h_, k_, rho_)) - truth)).convert_to<double>();
    if (!(error <= absolute)) absolute = error;
    if (truth > Real(1e-290)) {
      const double ratio = static_cast<Real>(error / truth).convert_to<double>();
      if (!(ratio <= relative)) relative = ratio, h = h_, k = k_, rho = rho_;
    }
  }
};

double interval(double a, double b, double c, double d, double rho) {
  return binormal_cdf(b, d, rho) - binormal_cdf(a, d, rho) - binormal_cdf(b, c, rho) + binormal_cdf(a, c, rho);
}

}  // namespace

TEST_CASE("values and derivatives computed with mpmath", "[binormal][reference]") {
  const reference::Table table("bvn_cdf.csv");
  for (std::size_t i = 0; i < table.size(); ++i) {
    const double h = table.number(i, "h"), k = table.number(i, "k"), rho = table.number(i, "rho_hex");
    INFO(h << " " << k << " " << rho);
    const auto close = [](double value, const Real& truth) {
      return truth < Real(1e-290) ? value <= 1e-289 : precise::relative(value, truth) < 1e-12;
    };
    CHECK(close(binormal_cdf(h, k, rho), Real(table.text(i, "value"))));
    CHECK(std::fabs(binormal_cdf(h, k, rho) - table.number(i, "value")) < 5e-16);
    const BinormalGradient gradient = binormal_gradient(h, k, rho);
    CHECK(close(gradient.dh, Real(table.text(i, "dP_dh"))));
    CHECK(close(gradient.dk, Real(table.text(i, "dP_dk"))));
    CHECK(close(gradient.drho, Real(table.text(i, "dP_drho"))));
  }
}

TEST_CASE("published tables and rectangles", "[binormal][reference]") {
  const reference::Table table("bvn_published.csv");
  for (std::size_t i = 0; i < table.size(); ++i) {
    const double value = binormal_cdf(table.number(i, "h"), table.number(i, "k"), table.number(i, "rho"));
    CHECK(std::fabs(value - table.number(i, "recomputed_18_digits")) < 5e-16);
    const bool haug = table.text(i, "source").rfind("Haug", 0) == 0;
    if (haug) CHECK(std::fabs(value - table.number(i, "value")) < 1e-6);  // six decimals, one of them off
  }
  const reference::Table rectangles("bvn_rectangles.csv");
  for (std::size_t i = 0; i < rectangles.size(); ++i) {
    const double value =
        interval(rectangles.number(i, "x_lo"), rectangles.number(i, "x_hi"), rectangles.number(i, "y_lo"),
                 rectangles.number(i, "y_hi"), rectangles.number(i, "rho"));
    CHECK(std::fabs(value - rectangles.number(i, "value")) < 1e-15);
  }
}

TEST_CASE("orthants: Sheppard's identity", "[binormal][reference]") {
  const reference::Table table("mvn_orthant_identities.csv");
  int seen = 0;
  for (std::size_t i = 0; i < table.size(); ++i) {
    if (table.text(i, "identity") != "bvn_orthant") continue;
    ++seen;
    const double rho = table.number(i, "rho");
    CHECK(std::fabs(binormal_cdf(0, 0, rho) - table.number(i, "value")) < 5e-16);
  }
  CHECK(seen > 0);
  drawn::Numbers numbers(31);
  for (int i = 0; i < 2000; ++i) {
    const double rho = i % 2 == 0 ? numbers.between(-1, 1) : (i % 4 == 1 ? 1 : -1) * (1 - numbers.magnitude(-50, -3));
    CHECK(std::fabs(binormal_cdf(0, 0, rho) - (0.25 + arcsine(rho) / 6.283185307179586)) < 5e-16);
  }
}

TEST_CASE("bivariate normal against 50-digit quadrature", "[binormal]") {
  const std::vector<double> special = {-1 + 1e-12, -0.9999999, -0.999, 0.96,  0.961,     -0.96,    -0.961,
                                       0.3,        -0.3,       0.75,   -0.75, 0.9999999, 1 - 1e-12};
  drawn::Numbers numbers(32);
  Errors errors;
  for (const double size : {1.5, 4.0, 9.0, 25.0, 37.0})
    for (int i = 0; i < 130; ++i) {
      const double rho =
          i % 2 == 0 ? special[static_cast<std::size_t>(i / 2) % special.size()] : numbers.between(-1, 1);
      const double h = numbers.between(-size, size);
      double k = numbers.between(-size, size);
      if (i % 3 == 0)
        k = (rho > 0 ? h : -h) + size * numbers.between(-1, 1) * std::sqrt(1 - rho * rho);  // along the ridge
      errors.see(h, k, rho, precise::bivariate(h, k, rho));
    }
  INFO(errors.h << " " << errors.k << " " << errors.rho);
  CHECK(errors.absolute < 5e-16);
  CHECK(errors.relative < 1e-12);
}

TEST_CASE("lower tail and negative correlation, where classical formulas cancel", "[binormal]") {
  drawn::Numbers numbers(33);
  Errors errors;
  for (int i = 0; i < 250; ++i) {
    const double rho = numbers.between(-0.999, 0.3), h = numbers.between(-6, 1), k = numbers.between(-6, -h);
    errors.see(h, k, rho, precise::bivariate(h, k, rho));
  }
  INFO(errors.h << " " << errors.k << " " << errors.rho);
  CHECK(errors.absolute < 5e-16);
  CHECK(errors.relative < 1e-12);
}

TEST_CASE("the quick ways agree with the panels wherever they are used", "[binormal]") {
  // The quadrature of a positive function is the accurate one (checked above); thousands of points are cheap.
  drawn::Numbers numbers(36);
  double worst = 0, at[3] = {};
  for (int i = 0; i < 60000; ++i) {
    const double size = 1.0 + static_cast<double>(i % 7);
    const double rho = i % 3 == 0 ? (i % 2 == 0 ? 1 : -1) * (1 - numbers.magnitude(-30, -1)) : numbers.between(-1, 1);
    double h = numbers.between(-size, size),
           k = i % 4 == 0 ? (rho > 0 ? h : -h) + size * numbers.between(-1, 1) * std::sqrt(1 - rho * rho)
                          : numbers.between(-size, size);
    if (h > k) std::swap(h, k);
    const double value = binormal_cdf(h, k, rho), truth = binormal::panel_cdf(h, k, rho);
    if (truth < 1e-290) continue;
    const double error = std::fabs(value / truth - 1);
    if (!(error <= worst)) worst = error, at[0] = h, at[1] = k, at[2] = rho;
  }
  INFO(at[0] << " " << at[1] << " " << at[2]);
  CHECK(worst < 1e-12);
}

TEST_CASE("limits", "[binormal]") {
  for (const double h : {-40.0, -3.0, -0.5, 0.0, 0.7, 5.0}) {
    CHECK(binormal_cdf(h, infinity, 0.3) == normal_cdf(h));
    CHECK(binormal_cdf(infinity, h, -0.3) == normal_cdf(h));
    CHECK(binormal_cdf(h, -infinity, 0.3) == 0.0);
    CHECK(binormal_cdf(h, 0.2, 1.0) == normal_cdf(std::min(h, 0.2)));
    CHECK(std::fabs(binormal_cdf(h, 0.2, -1.0) - std::max(0.0, normal_cdf(h) - normal_cdf(-0.2))) < 2e-16);
    CHECK(binormal_cdf(h, 0.2, 0.0) == normal_cdf(h) * normal_cdf(0.2));
  }
  CHECK(binormal_cdf(infinity, infinity, 0.5) == 1.0);
  CHECK(binormal_cdf(infinity, infinity, -1.0) == 1.0);
  CHECK(binormal_cdf(-infinity, infinity, 0.5) == 0.0);
  CHECK(binormal_cdf(-3.0, 2.9, -1.0) == 0.0);
  const Real narrow = precise::upper(Real(3)) - precise::upper(Real(3) + Real(0x1p-40));
  CHECK(precise::relative(binormal_cdf(3.0 + 0x1p-40, -3.0, -1.0), narrow) < 1e-12);
  CHECK(is_nan(binormal_cdf(0, 0, 1.0000001)));
  CHECK(is_nan(binormal_cdf(0, 0, not_a_number)));
  CHECK(is_nan(binormal_cdf(not_a_number, infinity, 0.5)));
  CHECK(is_nan(binormal_cdf(-infinity, not_a_number, 0.5)));
}

TEST_CASE("symmetry to the bit, bounds and monotonicity in the correlation", "[binormal]") {
  drawn::Numbers numbers(34);
  for (int i = 0; i < 3000; ++i) {
    const double h = numbers.between(-5, 5), k = numbers.between(-5, 5), rho = numbers.between(-1, 1);
    const double value = binormal_cdf(h, k, rho);
    REQUIRE(value == binormal_cdf(k, h, rho));
    REQUIRE(value >= 0.0);
    REQUIRE(value <= std::min(normal_cdf(h), normal_cdf(k)) + 3e-16);
    REQUIRE(binormal_cdf(h, k, rho + (1 - rho) / 2) >= value - 5e-16);
    REQUIRE(std::fabs(value + binormal_cdf(h, -k, -rho) - normal_cdf(h)) < 6e-16);
  }
}

TEST_CASE("covariance of two indicators", "[binormal]") {
  drawn::Numbers numbers(37);
  double worst = 0, relative = 0;
  for (int i = 0; i < 120; ++i) {
    const double h = numbers.between(-4, 4), k = numbers.between(-4, 4);
    const double rho = i % 2 == 0 ? numbers.between(-1, 1) : numbers.between(-0.01, 0.01);
    const Real truth = precise::bivariate(h, k, rho) - precise::cdf(h) * precise::cdf(k);
    const double value = binormal_covariance(h, k, rho);
    worst = std::max(worst, static_cast<Real>(abs(truth - value)).convert_to<double>());
    if (std::fabs(rho) <= 0.8) relative = std::max(relative, precise::relative(value, truth));
  }
  CHECK(worst < 5e-16);
  CHECK(relative < 1e-11);
  CHECK(binormal_covariance(1.0, 0.5, 0.0) == 0.0);
  CHECK(binormal_covariance(infinity, 0.5, 0.3) == 0.0);
  CHECK(binormal_covariance(-infinity, 0.5, 0.3) == 0.0);
  CHECK(binormal_covariance(0.5, 0.5, 1.0) == Approx(normal_cdf(0.5) * normal_cdf(-0.5)));
  CHECK(is_nan(binormal_covariance(not_a_number, 0.5, 0.3)));
  CHECK(is_nan(binormal_covariance(0.1, 0.5, not_a_number)));
}

TEST_CASE("gradient against differences of 50-digit values", "[binormal]") {
  drawn::Numbers numbers(35);
  const double step = 0x1p-20;
  for (int i = 0; i < 20; ++i) {
    const double h = numbers.between(-3, 3), k = numbers.between(-3, 3), rho = numbers.between(-0.95, 0.95);
    const auto slope = [&](double dh, double dk, double dr) {
      return static_cast<Real>(
                 (precise::bivariate(h + dh, k + dk, rho + dr) - precise::bivariate(h - dh, k - dk, rho - dr)) /
                 (2 * step))
          .convert_to<double>();
    };
    const BinormalGradient gradient = binormal_gradient(h, k, rho);
    CHECK(gradient.dh == Approx(slope(step, 0, 0)).epsilon(1e-8).margin(1e-10));
    CHECK(gradient.dk == Approx(slope(0, step, 0)).epsilon(1e-8).margin(1e-10));
    CHECK(gradient.drho == Approx(slope(0, 0, step)).epsilon(1e-6).margin(1e-8));
    CHECK(binormal_density(h, k, rho) == gradient.drho);
  }
  CHECK(binormal_gradient(infinity, 0.5, 0.3).dh == 0.0);
  CHECK(binormal_gradient(infinity, 0.5, 0.3).dk == normal_density(0.5));
  CHECK(binormal_gradient(-infinity, 0.5, 0.3).dk == 0.0);
  CHECK(is_nan(binormal_gradient(0, 0, 1).drho));
}

TEST_CASE("agreement with mvtnorm and pbivnorm", "[binormal][agreement]") {
  const reference::Table table("binormal_libraries.csv");
  for (std::size_t i = 0; i < table.size(); ++i) {
    const double value = binormal_cdf(table.number(i, "h"), table.number(i, "k"), table.number(i, "rho"));
    CHECK(std::fabs(value - table.number(i, "mvtnorm_tvpack")) < 1e-15);
    CHECK(std::fabs(value - table.number(i, "pbivnorm")) < 1e-15);
  }
}
