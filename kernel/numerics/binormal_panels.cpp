// P(X <= h, Y <= k) = integral over x <= h of f(x) = phi(x) Phi((k - rho x)/s), s = sqrt(1 - rho^2).
//
// Nothing is subtracted, so the sum is as accurate as its terms, however small: this serves the tails and
// negative correlations, where the classical formulas cancel. f is log-concave (a product of log-concave
// functions; Prekopa 1973, Acta Sci. Math. 34:335-343), hence:
//   - it has one mode on x <= h, found by Newton's method on (log f)';
//   - panels of Gauss-Legendre quadrature march from the mode to both sides;
//   - what is left beyond x is at most f(x)/|(log f)'(x)|, which tells when to stop.
// Everything is held relative to the mode x0 (v = x - x0), with k - rho x0 to twice the precision. A panel is no
// wider than six times the local scale: s where Phi is not yet 1, and 1 on the plateau beyond.
#include "numerics/strict.hpp"

#include <algorithm>
#include <array>

#include "numerics/binormal_parts.hpp"
#include "numerics/elementary.hpp"
#include "numerics/normal.hpp"
#include "numerics/tables/legendre_rows.hpp"
#include "numerics/two.hpp"

namespace folkmote::binormal {
namespace {

constexpr double plateau = 8.5;  // Phi(z) = 1 to double precision above
constexpr double panel_scales = 6.0;
constexpr double panel_decay = 24.0;  // largest fall of log f over a panel, by its slope at the start
constexpr double remainder = 1e-17;
constexpr std::size_t half_order = 10;  // 20 nodes

struct Integrand {
  double rho;
  double root;    // s
  double centre;  // x0
  Pair residual;  // k - rho x0

  template <class Number>
  Number argument(Number v) const {
    return ((residual.high - rho * v) + residual.low) / root;
  }
  template <class Number>
  Number exponent(Number v) const {
    return -v * (centre + 0.5 * v);
  }  // log of phi(x0 + v)/phi(x0)
  double value(double v) const { return exponential(exponent(v)) * normal_cdf(argument(v)); }
  double log_slope(double v) const { return -(centre + v) - (rho / root) * normal_mills(argument(v)); }
};

// A point near the mode of f on x <= h: the root of the decreasing function (log f)' or h itself. Its exact place
// does not matter, only that f falls to both sides.
double mode(double h, double k, double rho, double root) {
  const double ratio = rho / root;
  double x = std::min(k >= 0 ? 0.0 : rho * k, h);
  for (int pass = 0; pass < 40; ++pass) {
    const double z = (k - rho * x) / root;
    const double mills = normal_mills(z);
    const double slope = -x - ratio * mills;
    if (x >= h && slope >= 0) return h;
    const double bend = 1.0 + ratio * ratio * std::max(0.0, mills * (mills + z));
    const double next = std::min(x + slope / bend, h);
    if (magnitude(next - x) <= 0.05 * root) return next;
    x = next;
  }
  return x;
}

// One Gauss-Legendre panel from v to v + width (width may be negative; the result is positive). The nodes left and
// right of the middle go side by side.
double panel(const Integrand& f, double v, double width) {
  const double half = 0.5 * width, middle = v + half;
  std::array<double, 2 * half_order> phi;
  for (std::size_t i = 0; i < half_order; ++i) {
    const double node = half * tables::legendre_nodes_20[i];
    store_two(&phi[2 * i], f.argument(middle + Two{-node, node}));
  }
  normal_cdf(phi, phi);
  Two sum = both(0.0);
  for (std::size_t i = half_order; i-- > 0;) {
    const double node = half * tables::legendre_nodes_20[i];
    const Two density = exponential_of_two(f.exponent(middle + Two{-node, node}));
    sum += tables::legendre_weights_20[i] * (density * load_two(&phi[2 * i]));
  }
  return magnitude(half) * (sum[0] + sum[1]);
}

// The widest panel allowed at v, going in `direction` (-1 or 1).
double panel_width(const Integrand& f, double v, double direction, double slope) {
  const double z = f.argument(v);
  double width = panel_scales * f.root;
  if (z > plateau + 1e-3) {
    width = panel_scales;
    if (direction * f.rho > 0) width = std::min(width, (z - plateau) * f.root / magnitude(f.rho));
    width = std::max(width, 1e-3 * f.root);
  }
  return magnitude(slope) * width > panel_decay ? panel_decay / magnitude(slope) : width;
}

// Adds panels from the mode towards `limit` (a distance, maybe infinite) until nothing is left.
double march(const Integrand& f, double direction, double limit, double found) {
  double v = 0;
  for (int pass = 0; pass < 200 && v < limit; ++pass) {
    const double slope = f.log_slope(direction * v);
    const bool falling = direction * slope < 0;
    if (falling && f.value(direction * v) < remainder * found * magnitude(slope)) break;
    const double width = std::min(panel_width(f, direction * v, direction, slope), limit - v);
    found += panel(f, direction * v, direction * width);
    v += width;
  }
  return found;
}

}  // namespace

double panel_cdf(double h, double k, double rho) {
  const double root = complement_root(rho);
  const double x0 = mode(h, k, rho, root);
  const Integrand f{rho, root, x0, residual(k, rho, x0)};
  const double left = march(f, -1.0, infinity, 0.0);
  const double both = march(f, 1.0, h - x0, left);
  return normal_density(x0) * both;
}

}  // namespace folkmote::binormal
