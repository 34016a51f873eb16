#include "turnout/plays.hpp"

#include <algorithm>
#include <cmath>

#include "numerics/sums.hpp"
#include "random/streams.hpp"

namespace folkmote {

namespace {

Stream stream_of(const PlayKey& key, Purpose purpose) {
  return Stream(StreamKey{key.seed, purpose, key.community, key.replication});
}

}  // namespace

Player::Player(const Knowledge& knowledge)
    : knowledge_(knowledge),
      signal_(knowledge.size),
      stake_(knowledge.size),
      pooled_(knowledge.size),
      index_(knowledge.size),
      relays_(std::any_of(knowledge.relay_precision.begin(), knowledge.relay_precision.end(),
                          [](double gamma) { return !std::isinf(gamma); })) {}

double Player::draw(const PlayKey& key, std::optional<double> given) {
  const Knowledge& k = knowledge_;
  const double theta =
      given ? *given : k.prior_mean + stream_of(key, Purpose::obstacle).normal() / std::sqrt(k.prior_precision);
  stream_of(key, Purpose::signal).fill_normal(signal_);
  stream_of(key, Purpose::stake).fill_normal(stake_);
  for (int i = 0; i < k.size; ++i) {
    const double beta = k.signal_precision[i];
    signal_[i] = beta > 0.0 ? theta + signal_[i] / std::sqrt(beta) : 0.0;
    pooled_[i] = k.prior_precision * k.prior_mean + beta * signal_[i];
  }
  pool(key);
  Stream air = stream_of(key, Purpose::broadcast);
  for (const Broadcast& broadcast : k.broadcasts) {
    const double heard = theta + air.normal() / std::sqrt(broadcast.precision);
    for (int i : broadcast.audience) pooled_[i] += broadcast.precision * heard;
  }
  for (int i = 0; i < k.size; ++i) index_[i] = pooled_[i] / k.posterior_precision[i] + k.stake_sd[i] * stake_[i];
  return theta;
}

/// Adds the reports of the members heard: beta_ij (x_j + eta_ij).
void Player::pool(const PlayKey& key) {
  const Knowledge& k = knowledge_;
  Stream relay = stream_of(key, Purpose::relay);
  for (int i = 0; i < k.size; ++i) {
    const std::uint64_t first = static_cast<std::uint64_t>(i) * static_cast<std::uint64_t>(k.size);
    for (std::int64_t r = k.start[i]; r < k.start[i + 1]; ++r) {
      if (k.report_precision[r] == 0.0) continue;
      double report = signal_[k.speaker[r]];
      if (relays_ && !std::isinf(k.relay_precision[r])) {
        relay.seek(first + static_cast<std::uint64_t>(k.speaker[r]));
        report += relay.normal() / std::sqrt(k.relay_precision[r]);
      }
      pooled_[i] += k.report_precision[r] * report;
    }
  }
}

double Player::turnout(std::span<const double> cutoffs, std::span<const double> weights) const {
  double acted = 0.0;
  for (std::size_t i = 0; i < index_.size(); ++i) {
    if (index_[i] <= cutoffs[i]) acted += weights[i];
  }
  return acted / ordered_sum(weights);
}

}  // namespace folkmote
