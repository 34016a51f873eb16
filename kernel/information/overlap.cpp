#include "information/overlap.hpp"

#include <algorithm>
#include <cmath>

#include "information/two_sum.hpp"

// A row is gathered speaker by speaker: C_ij > 0 only where j holds a signal that i holds, or sits in one of i's
// audiences. The work is the number of such meetings, and one scratch array of n sums serves all rows.
//
// Groups are expanded into pairs for now: a broadcast heard by everybody has n^2 of them, and callers must ask
// pairs_at_most first.

namespace folkmote {

namespace {

/// By speaker k: who holds k's signal and with what precision, the speaker itself included.
struct Holders {
  std::vector<std::int64_t> start;
  std::vector<int> member;
  std::vector<double> precision;  // beta_jk
};

Holders holders_of(const Knowledge& knowledge) {
  const int n = knowledge.size;
  Holders holders;
  holders.start.assign(n + 1, 0);
  for (int k = 0; k < n; ++k) holders.start[k + 1] = 1;
  for (int speaker : knowledge.speaker) ++holders.start[speaker + 1];
  for (int k = 0; k < n; ++k) holders.start[k + 1] += holders.start[k];
  holders.member.resize(holders.start[n]);
  holders.precision.resize(holders.start[n]);
  std::vector<std::int64_t> next(holders.start.begin(), holders.start.end() - 1);
  const auto put = [&](int speaker, int member, double precision) {
    holders.member[next[speaker]] = member;
    holders.precision[next[speaker]++] = precision;
  };
  for (int i = 0; i < n; ++i) {
    for (std::int64_t k = knowledge.start[i]; k < knowledge.start[i + 1]; ++k) {
      put(knowledge.speaker[k], i, knowledge.report_precision[k]);
    }
    put(i, i, knowledge.signal_precision[i]);
  }
  return holders;
}

/// One row at a time: sums of shared precisions and the members they belong to.
class RowBuilder {
 public:
  explicit RowBuilder(const Knowledge& knowledge)
      : knowledge_(knowledge),
        holders_(holders_of(knowledge)),
        broadcasts_of_(knowledge.size),
        sums_(knowledge.size),
        seen_(knowledge.size, 0),
        held_(knowledge.size) {
    for (std::size_t q = 0; q < knowledge.broadcasts.size(); ++q) {
      for (int i : knowledge.broadcasts[q].audience) broadcasts_of_[i].push_back(static_cast<int>(q));
    }
    for (int i = 0; i < knowledge.size; ++i) sum_held(i);
  }

  /// Members met by i, i itself left out, in order of first meeting.
  const std::vector<int>& gather(int i, bool only_heard) {
    for (int j : met_) seen_[j] = 0;
    met_.clear();
    seen_[i] = 2;  // not to be listed
    only_listed_ = only_heard;
    for (std::int64_t k = knowledge_.start[i]; k < knowledge_.start[i + 1]; ++k) list(knowledge_.speaker[k]);
    each_source(i, [&](int speaker, double precision) { meet_holders(speaker, precision); });
    for (int q : broadcasts_of_[i]) {
      for (int j : knowledge_.broadcasts[q].audience) add(j, knowledge_.broadcasts[q].precision);
    }
    seen_[i] = 0;
    return met_;
  }

  double shared(int j) const { return sums_[j].value(); }
  double unshared(int i, int j) const { return std::max(0.0, difference(held_[i], sums_[j])); }

 private:
  /// Sources of i in increasing order of speaker, its own signal in its place: the order of K_i, so that K_i - C_ij is
  /// exactly 0 where j holds all that i holds.
  template <class Visit>
  void each_source(int i, const Visit& visit) const {
    bool own_done = false;
    for (std::int64_t k = knowledge_.start[i]; k < knowledge_.start[i + 1]; ++k) {
      if (!own_done && knowledge_.speaker[k] > i) {
        visit(i, knowledge_.signal_precision[i]);
        own_done = true;
      }
      visit(knowledge_.speaker[k], knowledge_.report_precision[k]);
    }
    if (!own_done) visit(i, knowledge_.signal_precision[i]);
  }

  void sum_held(int i) {
    each_source(i, [&](int, double precision) { held_[i].add(precision); });
    for (int q : broadcasts_of_[i]) held_[i].add(knowledge_.broadcasts[q].precision);
  }

  void list(int j) {
    if (seen_[j] != 0) return;
    seen_[j] = 1;
    sums_[j] = TwoSum{};
    met_.push_back(j);
  }

  void add(int j, double precision) {
    if (seen_[j] == 0) {
      if (only_listed_) return;
      list(j);
    }
    if (seen_[j] == 1) sums_[j].add(precision);
  }

  /// C_ij gains beta_ik beta_jk / beta_k; where one of the two is exact this is the other, without rounding.
  void meet_holders(int speaker, double precision) {
    const double signal = knowledge_.signal_precision[speaker];
    if (!(signal > 0.0)) return;
    const bool exact = precision == signal;
    for (std::int64_t h = holders_.start[speaker]; h < holders_.start[speaker + 1]; ++h) {
      const double theirs = holders_.precision[h];
      add(holders_.member[h], exact ? theirs : precision * (theirs / signal));
    }
  }

  const Knowledge& knowledge_;
  Holders holders_;
  std::vector<std::vector<int>> broadcasts_of_;
  std::vector<TwoSum> sums_;
  std::vector<char> seen_;
  std::vector<TwoSum> held_;
  std::vector<int> met_;
  bool only_listed_ = false;
};

}  // namespace

ThetaLaws::ThetaLaws(const Knowledge& knowledge) {
  const double alpha = knowledge.prior_precision;
  for (int i = 0; i < knowledge.size; ++i) {
    const double p = knowledge.posterior_precision[i];
    const double stake = knowledge.stake_sd[i] * knowledge.stake_sd[i];
    const double noise = knowledge.held[i] / p / p;
    pull.push_back(knowledge.held[i] / p);
    spread.push_back(noise + stake);
    const double variance = knowledge.index_variance[i];
    trust.push_back(variance > 0.0 ? knowledge.estimate_variance[i] / variance : 0.0);
    // E_i / alpha - V_i^2 = K_i / (alpha p_i^2) + sigma_i^2 / alpha.
    doubt.push_back(variance > 0.0 ? (noise + stake) / alpha / variance : 1.0 / alpha);
  }
}

double Overlap::pairs_at_most(const Knowledge& knowledge) {
  std::vector<double> holders(knowledge.size, 1.0);
  for (int speaker : knowledge.speaker) holders[speaker] += 1.0;
  double pairs = 0.0;
  for (double count : holders) pairs += count * count;
  for (const Broadcast& broadcast : knowledge.broadcasts) {
    pairs += static_cast<double>(broadcast.audience.size()) * static_cast<double>(broadcast.audience.size());
  }
  return pairs;
}

Overlap::Overlap(const Knowledge& knowledge, bool only_heard) {
  RowBuilder builder(knowledge);
  // Address space only: pages are taken as rows are written.
  const auto most = only_heard ? knowledge.speaker.size() : static_cast<std::size_t>(pairs_at_most(knowledge));
  member_.reserve(most);
  one_less_rho_.reserve(most);
  sd_.reserve(most);
  start_.reserve(knowledge.size + 1);
  start_.push_back(0);
  for (int i = 0; i < knowledge.size; ++i) {
    const std::size_t heard = static_cast<std::size_t>(knowledge.start[i + 1] - knowledge.start[i]);
    const std::vector<int>& met = builder.gather(i, only_heard);
    for (std::size_t k = 0; k < met.size(); ++k) {
      const int j = met[k];
      const double shared = builder.shared(j);
      if (k >= heard && !(shared > 0.0)) continue;
      const ConditionalLaw law = pair_law(knowledge, i, j, shared, builder.unshared(i, j), builder.unshared(j, j));
      member_.push_back(static_cast<std::uint32_t>(j) | (k < heard ? 0x80000000U : 0U));
      one_less_rho_.push_back(law.one_less_rho);
      sd_.push_back(law.sd);
    }
    start_.push_back(static_cast<std::int64_t>(member_.size()));
  }
}

Overlap::Row Overlap::row(int i) const {
  const std::size_t first = start_[i], count = start_[i + 1] - start_[i];
  return {{member_.data() + first, count}, {one_less_rho_.data() + first, count}, {sd_.data() + first, count}};
}

}  // namespace folkmote
