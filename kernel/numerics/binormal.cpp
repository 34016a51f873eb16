#include "numerics/strict.hpp"

#include "numerics/binormal.hpp"

#include <algorithm>
#include <cstddef>

#include "numerics/binormal_parts.hpp"
#include "numerics/normal.hpp"
#include "numerics/tables/legendre_rows.hpp"

namespace folkmote {
namespace {

// Integral of the normal density from low to high >= low, without cancellation.
double interval_probability(double low, double high) {
  if (high <= low) return 0.0;
  if (low < 0 && high > 0)
    return high < 1 && low > -1 ? interval_probability(0.0, high) + interval_probability(0.0, -low)
                                : normal_cdf(high) - normal_cdf(low);
  if (low < 0) return interval_probability(-high, -low);
  if ((high - low) * std::max(1.0, low) > 1.0) return normal_upper(low) - normal_upper(high);
  const double half = 0.5 * (high - low), middle = low + half;
  double sum = 0;
  for (std::size_t i = 8 / 2; i-- > 0;) {
    const double step = half * tables::legendre_nodes_8[i];
    sum += tables::legendre_weights_8[i] * (normal_density(middle - step) + normal_density(middle + step));
  }
  return half * sum;
}

// P(X <= h, Y <= k), h <= k, when the quick ways are not accurate enough. The panels sum the smallest of the
// probabilities from which the answer follows, so that their error is small in absolute terms too.
double by_panels(double h, double k, double rho) {
  if (h > 0) return interval_probability(-k, h) + binormal::panel_cdf(-k, -h, rho);
  if (k > 0) {
    const double other = binormal::panel_cdf(std::min(h, -k), std::max(h, -k), -rho);
    const double margin = normal_cdf(h);
    if (other < 0.5 * margin) return margin - other;
  }
  return binormal::panel_cdf(h, k, rho);
}

constexpr double beyond = 39.0;  // no double but 0 is as small as Phi(-beyond)

// The quick ways are exact to about 3e-16 in absolute terms. In relative terms they are good to 5e-14 of the
// terms that make the value, as long as the limits are moderate (measured; see the test of the tails).
bool accurate(double value, double terms, double h, double k) {
  return terms < infinity && (value > 1e-3 || (value > 0.1 * terms && h >= -6.0 && k <= 6.0));
}

// h <= k, both finite, 0 < |rho| < 1.
double interior(double h, double k, double rho) {
  if (h < -beyond) return 0.0;
  if (k > beyond) return normal_cdf(h);
  const double size = magnitude(rho);
  if (size > binormal::series_start) {
    const binormal::SeriesPart part = binormal::series_part(h, k, rho);
    const double value = rho > 0 ? normal_cdf(h) - part.value : interval_probability(-k, h) + part.value;
    if (accurate(value, part.scale, h, k)) return value;
  }
  if (size <= binormal::plackett_limit) {
    const double independent = normal_cdf(h) * normal_cdf(k);
    const double value = independent + binormal::plackett_part(h, k, rho);
    if (accurate(value, independent, h, k)) return value;
  }
  return by_panels(h, k, rho);
}

}  // namespace

double binormal_cdf(double h, double k, double rho) {
  if (!(magnitude(rho) <= 1.0) || is_nan(h) || is_nan(k)) return not_a_number;
  if (h > k) std::swap(h, k);
  if (h == -infinity) return 0.0;
  if (k == infinity) return normal_cdf(h);
  if (rho == 1.0) return normal_cdf(h);
  if (rho == -1.0) return interval_probability(-k, h);
  if (rho == 0.0) return normal_cdf(h) * normal_cdf(k);
  return interior(h, k, rho);
}

double binormal_covariance(double h, double k, double rho) {
  const bool covered = is_finite(h) && is_finite(k) && magnitude(rho) <= binormal::plackett_limit;
  if (covered && magnitude(h) <= beyond && magnitude(k) <= beyond)
    return binormal::plackett_part(std::min(h, k), std::max(h, k), rho);
  return binormal_cdf(h, k, rho) - normal_cdf(h) * normal_cdf(k);
}

double binormal_density(double h, double k, double rho) { return binormal_gradient(h, k, rho).drho; }

BinormalGradient binormal_gradient(double h, double k, double rho) {
  if (!(magnitude(rho) < 1.0) || is_nan(h) || is_nan(k)) return {not_a_number, not_a_number, not_a_number};
  const double root = binormal::complement_root(rho);
  const auto conditional = [rho, root](double given, double other) {  // (other - rho given)/s
    if (!is_finite(given)) return 0.0;                                // the density of `given` is zero there
    if (!is_finite(other)) return other;
    return binormal::residual(other, rho, given).high / root;
  };
  const double y = conditional(h, k), x = conditional(k, h);
  const double drho = is_finite(h) && is_finite(k) ? normal_density(h) * normal_density(y) / root : 0.0;
  return {normal_density(h) * normal_cdf(y), normal_density(k) * normal_cdf(x), drho};
}

}  // namespace folkmote
