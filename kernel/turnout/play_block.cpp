#include "turnout/play_block.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "numerics/normal.hpp"
#include "numerics/two.hpp"
#include "random/streams.hpp"

namespace folkmote {

namespace {

Stream stream_of(const PlayKey& key, Purpose purpose) {
  return Stream(StreamKey{key.seed, purpose, key.community, key.replication});
}

/// The four values of one member, in two registers.
struct Four {
  Two a, b;
};

Four load(const double* p) { return {load_two(p), load_two(p + 2)}; }
void store(double* p, const Four& v) {
  store_two(p, v.a);
  store_two(p + 2, v.b);
}
Four operator+(const Four& x, const Four& y) { return {x.a + y.a, x.b + y.b}; }
Four operator*(const Four& x, const Four& y) { return {x.a * y.a, x.b * y.b}; }
Four operator/(const Four& x, const Four& y) { return {x.a / y.a, x.b / y.b}; }
Four four(double x) { return {both(x), both(x)}; }

/// The weight where the index is at most the cutoff, else 0.
Two where_acting(Two index, Two cutoff, Two weight) { return (Two)((TwoBits)(index <= cutoff) & (TwoBits)weight); }

}  // namespace

PlayDraws::PlayDraws(int size, std::size_t broadcasts, bool stakes)
    : signal_(static_cast<std::size_t>(size) * lanes),
      stake_(stakes ? signal_.size() : 0),
      air_(broadcasts * lanes),
      row_(std::max<std::size_t>(static_cast<std::size_t>(size), broadcasts)) {}

PlayKey PlayDraws::key(int lane) const {
  return {first_.seed, first_.community, first_.replication + static_cast<std::uint64_t>(lane)};
}

void PlayDraws::fill(const PlayKey& first) {
  first_ = first;
  for (int lane = 0; lane < lanes; ++lane) obstacle_[lane] = stream_of(key(lane), Purpose::obstacle).uniform();
  spread(signal_, Purpose::signal);
  spread(stake_, Purpose::stake);
  spread(air_, Purpose::broadcast);
}

/// Number i of each lane's stream to place 4 i + lane.
void PlayDraws::spread(std::vector<double>& out, Purpose purpose) {
  if (out.empty()) return;
  const std::size_t count = out.size() / lanes;
  for (int lane = 0; lane < lanes; ++lane) {
    stream_of(key(lane), purpose).fill_normal({row_.data(), count});
    for (std::size_t i = 0; i < count; ++i) out[i * lanes + lane] = row_[i];
  }
}

BlockPlayer::BlockPlayer(const Knowledge& knowledge, const Condition& condition)
    : knowledge_(knowledge),
      law_(knowledge, condition),
      stakes_(has_stakes(knowledge)),
      relays_(std::any_of(knowledge.relay_precision.begin(), knowledge.relay_precision.end(),
                          [](double gamma) { return !std::isinf(gamma); })),
      signal_sd_(knowledge.signal_precision),
      signal_(static_cast<std::size_t>(knowledge.size) * lanes),
      worth_(signal_.size()),
      estimate_(signal_.size()),
      index_(signal_.size()) {
  for (double& root : signal_sd_) root = std::sqrt(root);
}

bool BlockPlayer::has_stakes(const Knowledge& knowledge) {
  return std::any_of(knowledge.stake_sd.begin(), knowledge.stake_sd.end(), [](double sigma) { return sigma > 0.0; });
}

void BlockPlayer::play(const PlayDraws& draws) {
  const Knowledge& k = knowledge_;
  for (int lane = 0; lane < lanes; ++lane) theta_[lane] = law_.obstacle(draws.obstacle()[lane]);
  const Four theta = load(theta_.data());
  for (int i = 0; i < k.size; ++i) {
    const double beta = k.signal_precision[i];
    const Four x = beta > 0.0 ? theta + load(draws.signal() + i * lanes) / four(signal_sd_[i]) : four(0.0);
    store(&signal_[i * lanes], x);
    store(&worth_[i * lanes], four(beta) * x);
  }
  relays_ ? pool_relayed(draws) : pool_exact();
  hear_broadcasts(draws);
  for (int i = 0; i < k.size; ++i) {
    const Four m = load(&estimate_[i * lanes]) / four(k.posterior_precision[i]);
    store(&estimate_[i * lanes], m);
    const double sigma = k.stake_sd[i];
    store(&index_[i * lanes], sigma > 0.0 ? m + four(sigma) * load(draws.stake() + i * lanes) : m);
  }
}

/// All reports exact, so that a report is worth beta_j x_j to whoever hears it.
void BlockPlayer::pool_exact() {
  const Knowledge& k = knowledge_;
  const double prior = k.prior_precision * k.prior_mean;
  const int* speaker = k.speaker.data();
  for (int i = 0; i < k.size; ++i) {
    Four sum = four(prior) + load(&worth_[i * lanes]);
    for (std::int64_t r = k.start[i]; r < k.start[i + 1]; ++r) {
      sum = sum + load(&worth_[static_cast<std::size_t>(speaker[r]) * lanes]);
    }
    store(&estimate_[i * lanes], sum);
  }
}

void BlockPlayer::pool_relayed(const PlayDraws& draws) {
  const Knowledge& k = knowledge_;
  const double prior = k.prior_precision * k.prior_mean;
  std::vector<Stream> relay;
  for (int lane = 0; lane < lanes; ++lane) relay.push_back(stream_of(draws.key(lane), Purpose::relay));
  for (int i = 0; i < k.size; ++i) {
    const std::uint64_t first = static_cast<std::uint64_t>(i) * static_cast<std::uint64_t>(k.size);
    Four sum = four(prior) + load(&worth_[i * lanes]);
    for (std::int64_t r = k.start[i]; r < k.start[i + 1]; ++r) {
      if (k.report_precision[r] == 0.0) continue;
      Four report = load(&signal_[static_cast<std::size_t>(k.speaker[r]) * lanes]);
      if (!std::isinf(k.relay_precision[r])) {
        Lanes noise;
        for (int lane = 0; lane < lanes; ++lane) {
          relay[lane].seek(first + static_cast<std::uint64_t>(k.speaker[r]));
          noise[lane] = relay[lane].normal();
        }
        report = report + load(noise.data()) / four(std::sqrt(k.relay_precision[r]));
      }
      sum = sum + four(k.report_precision[r]) * report;
    }
    store(&estimate_[i * lanes], sum);
  }
}

void BlockPlayer::hear_broadcasts(const PlayDraws& draws) {
  const Four theta = load(theta_.data());
  for (std::size_t q = 0; q < knowledge_.broadcasts.size(); ++q) {
    const Broadcast& broadcast = knowledge_.broadcasts[q];
    const Four heard = theta + load(draws.air() + q * lanes) / four(std::sqrt(broadcast.precision));
    const Four worth = four(broadcast.precision) * heard;
    for (int i : broadcast.audience) store(&estimate_[i * lanes], load(&estimate_[i * lanes]) + worth);
  }
}

Lanes BlockPlayer::turnout(std::span<const double> cutoffs, std::span<const double> weights, double total) const {
  Four acted = four(0.0);
  for (std::size_t i = 0; i < cutoffs.size(); ++i) {
    const Four e = load(&index_[i * lanes]), cutoff = four(cutoffs[i]), weight = four(weights[i]);
    acted = acted + Four{where_acting(e.a, cutoff.a, weight.a), where_acting(e.b, cutoff.b, weight.b)};
  }
  Lanes share;
  store(share.data(), acted / four(total));
  return share;
}

Lanes BlockPlayer::turnout_over_stakes(std::span<const double> cutoffs, std::span<const double> weights, double total) {
  constexpr double never = std::numeric_limits<double>::infinity();
  chance_.resize(index_.size());
  for (std::size_t i = 0; i < cutoffs.size(); ++i) {
    const double sigma = knowledge_.stake_sd[i];
    for (std::size_t at = i * lanes; at < (i + 1) * lanes; ++at) {
      const double certain = estimate_[at] <= cutoffs[i] ? never : -never;
      chance_[at] = sigma > 0.0 ? (cutoffs[i] - estimate_[at]) / sigma : certain;
    }
  }
  normal_cdf(chance_, chance_);
  Four sum = four(0.0);
  for (std::size_t i = 0; i < cutoffs.size(); ++i) sum = sum + four(weights[i]) * load(&chance_[i * lanes]);
  Lanes share;
  store(share.data(), sum / four(total));
  return share;
}

}  // namespace folkmote
