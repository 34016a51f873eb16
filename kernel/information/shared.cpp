#include "information/shared.hpp"

#include <algorithm>
#include <cmath>

#include "information/two_sum.hpp"

// With u_ij = K_i - C_ij and p = alpha + K the model's formulas lose their cancellations:
//   V_i - Cov_ij          = u_ij / (p_i p_j)
//   V_i V_j - Cov_ij^2    = [ (K_i K_j / alpha)(u_ij + u_ji) + u_ij K_j + C_ij u_ji ] / (p_i p_j)^2
// so that 1 - rho_ij and s_ij are sums of terms that are not negative, and are exactly zero where two members without
// stake shocks hold the same information.

namespace folkmote {

namespace {

struct Hearer {
  int member;
  double fraction;  // beta_jk / beta_k: 1 for an exact report and for the own signal
};

/// By speaker k: who holds k's signal, in increasing order.
std::vector<std::vector<Hearer>> hearers_by_speaker(const Knowledge& knowledge) {
  std::vector<std::vector<Hearer>> hearers(knowledge.size);
  for (int i = 0; i < knowledge.size; ++i) {
    for (std::int64_t k = knowledge.start[i]; k < knowledge.start[i + 1]; ++k) {
      const int speaker = knowledge.speaker[k];
      const double signal = knowledge.signal_precision[speaker];
      if (signal > 0.0) hearers[speaker].push_back({i, knowledge.report_precision[k] / signal});
    }
    if (knowledge.signal_precision[i] > 0.0) hearers[i].push_back({i, 1.0});
  }
  return hearers;
}

}  // namespace

SharedInformation::SharedInformation(const Knowledge& knowledge)
    : knowledge_(knowledge),
      shared_(static_cast<std::size_t>(knowledge.size) * static_cast<std::size_t>(knowledge.size)),
      unshared_(shared_.size()) {
  fill();
}

void SharedInformation::fill() {
  const int n = knowledge_.size;
  const auto hearers = hearers_by_speaker(knowledge_);
  std::vector<std::vector<int>> broadcasts_of(n);
  for (std::size_t q = 0; q < knowledge_.broadcasts.size(); ++q) {
    for (int i : knowledge_.broadcasts[q].audience) broadcasts_of[i].push_back(static_cast<int>(q));
  }
  std::vector<TwoSum> row(n);
  for (int i = 0; i < n; ++i) {
    std::fill(row.begin(), row.end(), TwoSum{});
    const auto hear = [&](int speaker, double precision) {
      for (const Hearer& hearer : hearers[speaker]) row[hearer.member].add(precision * hearer.fraction);
    };
    // In the order of held_information: row[i] itself becomes C_ii with full reports, that is, at most K_i.
    TwoSum held;
    bool own_added = false;
    const auto add_own = [&] {
      held.add(knowledge_.signal_precision[i]);
      hear(i, knowledge_.signal_precision[i]);
      own_added = true;
    };
    for (std::int64_t k = knowledge_.start[i]; k < knowledge_.start[i + 1]; ++k) {
      if (!own_added && knowledge_.speaker[k] > i) add_own();
      held.add(knowledge_.report_precision[k]);
      hear(knowledge_.speaker[k], knowledge_.report_precision[k]);
    }
    if (!own_added) add_own();
    for (int q : broadcasts_of[i]) {
      const Broadcast& broadcast = knowledge_.broadcasts[q];
      held.add(broadcast.precision);
      for (int j : broadcast.audience) row[j].add(broadcast.precision);
    }
    for (int j = 0; j < n; ++j) {
      if (j == i) continue;
      // One rounding for both halves of a pair: the row of the smaller position decides.
      shared_[at(i, j)] = j > i ? row[j].value() : shared_[at(j, i)];
      unshared_[at(i, j)] = std::max(0.0, difference(held, row[j]));
      any_ = any_ || row[j].high > 0.0;
    }
  }
}

double SharedInformation::covariance(int i, int j) const {
  const Knowledge& k = knowledge_;
  return (k.held[i] * k.held[j] / k.prior_precision + shared(i, j)) /
         (k.posterior_precision[i] * k.posterior_precision[j]);
}

double SharedInformation::covariance_given_obstacle(int i, int j) const {
  return shared(i, j) / (knowledge_.posterior_precision[i] * knowledge_.posterior_precision[j]);
}

ConditionalLaw SharedInformation::law(int i, int j) const {
  return pair_law({knowledge_, i}, {knowledge_, j}, knowledge_.prior_precision, shared(i, j), unshared(i, j),
                  unshared(j, i));
}

ConditionalLaw pair_law(const PairMember& i, const PairMember& j, double alpha, double shared, double own,
                        double other) {
  if (i.index_variance == 0.0) return {1.0, std::sqrt(j.index_variance)};
  const double precisions = i.precision * j.precision;
  const double apart = (i.held * j.held / alpha) * (own + other) + own * j.held + shared * other;
  const double variance =
      j.stake_variance + (j.estimate_variance * i.stake_variance + apart / precisions / precisions) / i.index_variance;
  return {(i.stake_variance + own / precisions) / i.index_variance, std::sqrt(variance)};
}

}  // namespace folkmote
