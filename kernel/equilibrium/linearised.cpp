#include "equilibrium/linearised.hpp"

#include <cmath>

#include "numerics/sums.hpp"

namespace folkmote {

bool Linearised::set(BestReply& game, std::span<const double> cutoffs) {
  diagonal_.assign(size_, 0.0);
  for (int i = 0; i < size_; ++i) {
    const std::span<double> row(matrix_.data() + static_cast<std::size_t>(i) * size_, size_);
    if (!game.derivatives(i, cutoffs, row)) return false;
    diagonal_[i] = -row[i];
    for (double& entry : row) entry = -entry / diagonal_[i];
  }
  return true;
}

std::vector<double> Linearised::apply(std::span<const double> v) const {
  std::vector<double> result(size_);
  for (int i = 0; i < size_; ++i) {
    result[i] = ordered_dot({matrix_.data() + static_cast<std::size_t>(i) * size_, static_cast<std::size_t>(size_)}, v);
  }
  return result;
}

/// BiCGSTAB (van der Vorst 1992) on the rows scaled by their diagonal; sums in fixed order, so that every machine takes
/// the same path.
std::optional<std::vector<double>> Linearised::direction(std::span<const double> rates) const {
  constexpr int most = 100;
  constexpr double enough = 1e-3;
  const std::size_t n = rates.size();
  std::vector<double> residual(n), v(n, 0.0), p(n, 0.0), ap(n, 0.0), s(n);
  for (std::size_t i = 0; i < n; ++i) residual[i] = rates[i] / diagonal_[i];
  const std::vector<double> shadow = residual;
  const double target = enough * enough * ordered_dot(residual, residual);
  double rho = 1.0, alpha = 1.0, omega = 1.0;
  for (int step = 0; step < most; ++step) {
    if (ordered_dot(residual, residual) <= target) return v;
    const double next_rho = ordered_dot(shadow, residual);
    const double beta = next_rho / rho * (alpha / omega);
    for (std::size_t i = 0; i < n; ++i) p[i] = residual[i] + beta * (p[i] - omega * ap[i]);
    ap = apply(p);
    alpha = next_rho / ordered_dot(shadow, ap);
    for (std::size_t i = 0; i < n; ++i) s[i] = residual[i] - alpha * ap[i];
    const std::vector<double> as = apply(s);
    const double squared = ordered_dot(as, as);
    omega = squared > 0.0 ? ordered_dot(as, s) / squared : 0.0;
    for (std::size_t i = 0; i < n; ++i) {
      v[i] += alpha * p[i] + omega * s[i];
      residual[i] = s[i] - omega * as[i];
    }
    rho = next_rho;
    if (!std::isfinite(alpha) || !std::isfinite(rho) || omega == 0.0) break;
  }
  if (ordered_dot(residual, residual) <= target) return v;
  return std::nullopt;
}

}  // namespace folkmote
