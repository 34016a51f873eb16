#pragma once
// The laws by which members who share nothing of their own meet: through theta, and through a broadcast that a large
// part of the community hears (MODEL.md, section 2).
#include "numerics/strict.hpp"

#include <optional>
#include <vector>

#include "information/knowledge.hpp"

namespace folkmote {

/// The broadcasts that one large audience S hears, taken as one: k^2 pairs that are never written down.
struct CommonReport {
  double precision = 0.0;      // tau, summed over broadcasts of this audience
  std::vector<char> audience;  // by member: whether in S
  std::vector<char> counted;   // by broadcast: whether part of it
};

/// The largest audience, when it has at least `least` members.
std::optional<CommonReport> common_report(const Knowledge& knowledge, std::size_t least);

/// The common report moves the pooled estimates of its audience as another prior mean would. With its noise zeta and
/// M = mu + tau zeta / alpha ~ N(mu, tau / alpha^2),
///   e_j | theta, M ~ N( mu + pull_j (theta - mu) + sway_j (M - mu), spread_j ),
///   M | e_i = t ~ N( mu + hint_i (t - mu), haze_i ),
///   theta | M, e_i = t ~ N( mu + grip_i ( (t - mu) - sway_i (M - mu) ), doubt_i ),
/// so that two members who share nothing else have
///   E(e_j | e_i = t) = mu + (pull_j trust_i + sway_j hint_i)(t - mu),
///   Var(e_j | e_i)   = spread_j + pull_j^2 doubt_i + (sway_j - pull_j grip_i sway_i)^2 haze_i.
/// Without a common report sway, hint and haze are 0, and grip is trust.
struct ThetaLaws {
  ThetaLaws(const Knowledge& knowledge, const std::optional<CommonReport>& common);

  bool common = false;
  std::vector<double> pull;    // K_j / p_j
  std::vector<double> sway;    // alpha / p_j in the audience, else 0
  std::vector<double> spread;  // (K_j - tau 1{j in S}) / p_j^2 + sigma_j^2
  std::vector<double> trust;   // Cov(theta, e_i) / E_i = V_i / E_i
  std::vector<double> grip;
  std::vector<double> doubt;
  std::vector<double> hint;
  std::vector<double> haze;

  /// rho_ij, and Var(e_j | e_i), of two members who share nothing else.
  double slope(int i, int j) const { return pull[j] * trust[i] + sway[j] * hint[i]; }
  double variance(int i, int j) const {
    const double apart = sway[j] - pull[j] * grip[i] * sway[i];
    return spread[j] + pull[j] * pull[j] * doubt[i] + apart * apart * haze[i];
  }
};

}  // namespace folkmote
