#include "information/overlap.hpp"

#include <algorithm>
#include <cmath>

#include "information/two_sum.hpp"

// A row is gathered speaker by speaker: C_ij > 0 only where j holds a signal that i holds, or sits in one of i's
// audiences. The work is the number of such meetings, and one scratch array of n sums serves all rows.
//
// Groups are expanded into pairs, all but the common report, which the curve counts: callers must ask pairs_at_most
// first.

namespace folkmote {

namespace {

constexpr int most_blocks = 64;

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

/// What a pair takes of one member, in one line of memory: rows meet members in no order.
struct alignas(64) Member {
  TwoSum held;  // K_i
  PairMember of_pair;
};

/// Whose signals and broadcasts reach whom, prepared once for all rows.
class Sources {
 public:
  Sources(const Knowledge& knowledge, const std::optional<CommonReport>& common)
      : knowledge(knowledge), common(common), holders(holders_of(knowledge)), broadcasts_of(knowledge.size) {
    for (std::size_t q = 0; q < knowledge.broadcasts.size(); ++q) {
      if (common && common->counted[q]) continue;
      for (int i : knowledge.broadcasts[q].audience) broadcasts_of[i].push_back(static_cast<int>(q));
    }
    for (int i = 0; i < knowledge.size; ++i) {
      TwoSum held;
      each(i, [&](int, double precision) { held.add(precision); });
      for (int q : broadcasts_of[i]) held.add(knowledge.broadcasts[q].precision);
      if (hear_common(i, i)) held.add(common->precision);
      members.push_back({held, {knowledge, i}});
    }
  }

  bool hear_common(int i, int j) const { return common && common->audience[i] && common->audience[j]; }

  /// Sources of i in increasing order of speaker, its own signal in its place: the order of K_i, so that K_i - C_ij is
  /// exactly 0 where j holds all that i holds.
  template <class Visit>
  void each(int i, const Visit& visit) const {
    bool own_done = false;
    for (std::int64_t k = knowledge.start[i]; k < knowledge.start[i + 1]; ++k) {
      if (!own_done && knowledge.speaker[k] > i) {
        visit(i, knowledge.signal_precision[i]);
        own_done = true;
      }
      visit(knowledge.speaker[k], knowledge.report_precision[k]);
    }
    if (!own_done) visit(i, knowledge.signal_precision[i]);
  }

  const Knowledge& knowledge;
  const std::optional<CommonReport>& common;
  Holders holders;
  std::vector<std::vector<int>> broadcasts_of;
  std::vector<Member> members;
};

/// One row at a time: sums of shared precisions and the members they belong to.
class RowBuilder {
 public:
  RowBuilder(const Sources& sources, bool only_heard)
      : sources_(sources), knowledge_(sources.knowledge), only_heard_(only_heard), meetings_(sources.knowledge.size) {}

  /// At least the number of members that gather(i) meets.
  std::size_t most(int i) const {
    std::size_t count = knowledge_.start[i + 1] - knowledge_.start[i];
    if (only_heard_) return count;
    const std::vector<std::int64_t>& start = sources_.holders.start;
    sources_.each(i, [&](int speaker, double) { count += start[speaker + 1] - start[speaker]; });
    for (int q : sources_.broadcasts_of[i]) count += knowledge_.broadcasts[q].audience.size();
    return std::min(count, static_cast<std::size_t>(knowledge_.size));
  }

  /// Members heard by i, then those met who share information of their own with i, i itself left out.
  const std::vector<int>& gather(int i) {
    for (int j : met_) meetings_[j].seen = 0;
    met_.clear();
    meetings_[i].seen = 2;  // not to be listed
    only_listed_ = false;
    for (std::int64_t k = knowledge_.start[i]; k < knowledge_.start[i + 1]; ++k) list(knowledge_.speaker[k]);
    only_listed_ = only_heard_;
    sources_.each(i, [&](int speaker, double precision) { meet_holders(speaker, precision); });
    for (int q : sources_.broadcasts_of[i]) {
      for (int j : knowledge_.broadcasts[q].audience) add(j, knowledge_.broadcasts[q].precision);
    }
    meetings_[i].seen = 0;
    return met_;
  }

  /// Whether i and j share information of their own.
  bool share(int j) const { return meetings_[j].sum.value() > 0.0; }

  ConditionalLaw law(int i, int j) {
    const Member &of_i = sources_.members[i], &of_j = sources_.members[j];
    TwoSum& sum = meetings_[j].sum;
    if (sources_.hear_common(i, j)) sum.add(sources_.common->precision);
    const double own = std::max(0.0, difference(of_i.held, sum)), other = std::max(0.0, difference(of_j.held, sum));
    return pair_law(of_i.of_pair, of_j.of_pair, knowledge_.prior_precision, sum.value(), own, other);
  }

 private:
  void list(int j) {
    Meeting& meeting = meetings_[j];
    if (meeting.seen != 0) return;
    meeting = {TwoSum{}, 1};
    met_.push_back(j);
  }

  void add(int j, double precision) {
    Meeting& meeting = meetings_[j];
    if (meeting.seen == 0) {
      if (only_listed_) return;
      list(j);
    }
    if (meeting.seen == 1) meeting.sum.add(precision);
  }

  /// C_ij gains beta_ik beta_jk / beta_k; where one of the two is exact this is the other, without rounding.
  void meet_holders(int speaker, double precision) {
    const double signal = knowledge_.signal_precision[speaker];
    if (!(signal > 0.0)) return;
    const Holders& holders = sources_.holders;
    const bool exact = precision == signal;
    for (std::int64_t h = holders.start[speaker]; h < holders.start[speaker + 1]; ++h) {
      const double theirs = holders.precision[h];
      add(holders.member[h], exact ? theirs : precision * (theirs / signal));
    }
  }

  const Sources& sources_;
  const Knowledge& knowledge_;
  const bool only_heard_;
  struct Meeting {
    TwoSum sum;    // C_ij so far
    int seen = 0;  // 1: listed in this row, 2: the row's own member
  };
  std::vector<Meeting> meetings_;
  std::vector<int> met_;
  bool only_listed_ = false;
};

}  // namespace

double Overlap::pairs_at_most(const Knowledge& knowledge, const std::optional<CommonReport>& common) {
  std::vector<double> holders(knowledge.size, 1.0);
  for (int speaker : knowledge.speaker) holders[speaker] += 1.0;
  double pairs = 0.0;
  for (double count : holders) pairs += count * count;
  for (std::size_t q = 0; q < knowledge.broadcasts.size(); ++q) {
    const double heard_by = static_cast<double>(knowledge.broadcasts[q].audience.size());
    if (!common || !common->counted[q]) pairs += heard_by * heard_by;
  }
  return pairs;
}

Overlap::Overlap(const Knowledge& knowledge, const std::optional<CommonReport>& common, bool only_heard,
                 const Execution& execution)
    : block_size_(std::max(1024, (knowledge.size + most_blocks - 1) / most_blocks)),
      blocks_((knowledge.size + block_size_ - 1) / block_size_) {
  const Sources sources(knowledge, common);
  run_tasks(static_cast<std::int64_t>(blocks_.size()), execution, [&](std::int64_t b, const StopFlag& stop) {
    RowBuilder builder(sources, only_heard);
    Block& block = blocks_[b];
    const int first = static_cast<int>(b) * block_size_, last = std::min(knowledge.size, first + block_size_);
    // Address space only: pages are taken as rows are written.
    std::size_t most = 0;
    for (int i = first; i < last; ++i) most += builder.most(i);
    block.member.reserve(most);
    block.one_less_rho.reserve(most);
    block.sd.reserve(most);
    block.start.push_back(0);
    for (int i = first; i < last && !stop.raised(); ++i) {
      const std::size_t heard = static_cast<std::size_t>(knowledge.start[i + 1] - knowledge.start[i]);
      const std::vector<int>& met = builder.gather(i);
      for (std::size_t k = 0; k < met.size(); ++k) {
        const int j = met[k];
        if (k >= heard && !builder.share(j)) continue;
        const ConditionalLaw law = builder.law(i, j);
        block.member.push_back(static_cast<std::uint32_t>(j) | (k < heard ? 0x80000000U : 0U));
        block.one_less_rho.push_back(law.one_less_rho);
        block.sd.push_back(law.sd);
      }
      block.start.push_back(static_cast<std::int64_t>(block.member.size()));
    }
  });
}

std::int64_t Overlap::pairs() const {
  std::int64_t all = 0;
  for (const Block& block : blocks_) all += static_cast<std::int64_t>(block.member.size());
  return all;
}

Overlap::Row Overlap::row(int i) const {
  const Block& block = blocks_[i / block_size_];
  const int row = i % block_size_;
  const std::size_t first = block.start[row], count = block.start[row + 1] - block.start[row];
  return {{block.member.data() + first, count},
          {block.one_less_rho.data() + first, count},
          {block.sd.data() + first, count}};
}

}  // namespace folkmote
