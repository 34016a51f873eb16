#include "information/theta_laws.hpp"

#include <algorithm>

// m_j = (alpha mu + ... + tau z) / p_j with z = theta + zeta and alpha M = alpha mu + tau zeta is the pooled estimate
// of a member whose prior mean is M: its precision still holds tau, but its noise does not. Everything else is normal
// regression, written as sums of terms that are not negative: with E' = Var(e_i | M) = pull^2 / alpha + spread,
//   grip = (pull / alpha) / E',  doubt = spread / (alpha E'),  hint = sway Var(M) / E_i,  haze = Var(M) E' / E_i.

namespace folkmote {

std::optional<CommonReport> common_report(const Knowledge& knowledge, std::size_t least) {
  const std::vector<Broadcast>& broadcasts = knowledge.broadcasts;
  const auto largest = std::max_element(broadcasts.begin(), broadcasts.end(), [](const auto& a, const auto& b) {
    return a.audience.size() < b.audience.size();
  });
  if (largest == broadcasts.end() || largest->audience.size() < least) return std::nullopt;
  CommonReport common;
  common.audience.assign(knowledge.size, 0);
  for (int i : largest->audience) common.audience[i] = 1;
  for (const Broadcast& broadcast : broadcasts) {
    common.counted.push_back(broadcast.audience == largest->audience);
    if (common.counted.back()) common.precision += broadcast.precision;
  }
  return common;
}

ThetaLaws::ThetaLaws(const Knowledge& knowledge, const std::optional<CommonReport>& report)
    : common(report.has_value()) {
  const double alpha = knowledge.prior_precision;
  const double common_variance = report ? report->precision / alpha / alpha : 0.0;  // Var(M)
  for (int i = 0; i < knowledge.size; ++i) {
    const bool hears = report && report->audience[i];
    const double p = knowledge.posterior_precision[i];
    const double own = hears ? std::max(0.0, knowledge.held[i] - report->precision) : knowledge.held[i];
    const double stake = knowledge.stake_sd[i] * knowledge.stake_sd[i];
    const double variance = knowledge.index_variance[i];
    pull.push_back(knowledge.held[i] / p);
    sway.push_back(hears ? alpha / p : 0.0);
    spread.push_back(own / p / p + stake);
    trust.push_back(variance > 0.0 ? knowledge.estimate_variance[i] / variance : 0.0);
    const double given_common = hears ? pull[i] * pull[i] / alpha + spread[i] : variance;  // E'
    grip.push_back(!hears ? trust[i] : given_common > 0.0 ? pull[i] / alpha / given_common : 0.0);
    doubt.push_back(given_common > 0.0 ? spread[i] / alpha / given_common : 1.0 / alpha);
    hint.push_back(variance > 0.0 ? sway[i] * common_variance / variance : 0.0);
    haze.push_back(hears && variance > 0.0 ? common_variance * (given_common / variance) : common_variance);
  }
}

}  // namespace folkmote
