#include "counterfactual/control.hpp"

#include <algorithm>
#include <cmath>

#include "numerics/adaptive.hpp"
#include "numerics/normal.hpp"
#include "turnout/moments.hpp"

namespace folkmote {

namespace {

constexpr int pieces = 128;
constexpr double reach = 6.0;  // beyond it the curve is constant

/// P(a < Z < b), from the side on which it keeps its digits.
double chance_between(double a, double b) {
  return a > 0.0 ? normal_cdf(-a) - normal_cdf(-b) : normal_cdf(b) - normal_cdf(a);
}

double share_given(const Knowledge& knowledge, std::span<const double> weights, std::span<const double> cutoffs,
                   double theta) {
  return weighted_mean(weights, chances_given(knowledge, cutoffs, theta));
}

}  // namespace

Control::Control(const Knowledge& knowledge, const ObstacleLaw& law, std::span<const double> weights,
                 std::span<const double> cutoffs, const StopFlag& stop)
    : law_(law) {
  if (law.point()) return;
  low_ = std::max(law.low(), -reach);
  double high = std::min(law.high(), reach);
  if (!(low_ < high)) {  // the whole range lies beyond the reach
    low_ = law.low();
    high = law.high();
  }
  step_ = (high - low_) / pieces;
  for (int k = 0; k <= pieces; ++k) {
    value_.push_back(stop.raised() ? 0.0 : share_given(knowledge, weights, cutoffs, law.at(low_ + step_ * k)));
  }
  // E[c + s (Z - a); a < Z < b] = (c - s a) P(a < Z < b) + s (phi(a) - phi(b)).
  double sum = value_.front() * chance_between(law.low(), low_) + value_.back() * chance_between(high, law.high());
  for (int k = 0; k < pieces; ++k) {
    const double a = low_ + step_ * k, b = low_ + step_ * (k + 1);
    const double slope = (value_[k + 1] - value_[k]) / step_;
    sum += (value_[k] - slope * a) * chance_between(a, b) + slope * (normal_density(a) - normal_density(b));
  }
  mean_ = sum / chance_between(law.low(), law.high());
}

double Control::curve(double theta) const {
  if (law_.point()) return mean_;
  const double at = std::clamp((law_.standardised(theta) - low_) / step_, 0.0, static_cast<double>(pieces));
  const int k = std::min(static_cast<int>(at), pieces - 1);
  return value_[k] + (at - k) * (value_[k + 1] - value_[k]);
}

double expected_turnout(const Knowledge& knowledge, const ObstacleLaw& law, std::span<const double> weights,
                        std::span<const double> cutoffs) {
  if (law.point()) return share_given(knowledge, weights, cutoffs, law.obstacle(0.5));
  if (law.whole()) return weighted_mean(weights, chances(knowledge, cutoffs));
  const double low = law.low(), high = law.high(), chance = chance_between(low, high);
  const auto integrand = [&](double z) {
    return normal_density(z) * share_given(knowledge, weights, cutoffs, law.at(z));
  };
  return std::min(1.0, adaptive_integral(integrand, low, high, 4, 1e-12 * chance) / chance);
}

}  // namespace folkmote
