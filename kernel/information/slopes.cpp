#include "information/slopes.hpp"

#include <algorithm>
#include <cmath>

namespace folkmote {

namespace {

/// gamma / (beta + gamma), which is beta_ik / beta_k and has its limit where beta_k = 0.
double fraction_of(double signal, double relay) { return std::isinf(relay) ? 1.0 : relay / (signal + relay); }

}  // namespace

InformationSlopes::InformationSlopes(const Knowledge& knowledge)
    : knowledge_(knowledge), holders_(knowledge.size), broadcasts_of_(knowledge.size) {
  for (int i = 0; i < knowledge.size; ++i) {
    for (std::int64_t k = knowledge.start[i]; k < knowledge.start[i + 1]; ++k) {
      const int speaker = knowledge.speaker[k];
      holders_[speaker].push_back({i, fraction_of(knowledge.signal_precision[speaker], knowledge.relay_precision[k]),
                                   knowledge.relay_slope[k]});
    }
    holders_[i].push_back({i, 1.0, 0.0});
  }
  for (std::size_t q = 0; q < knowledge.broadcasts.size(); ++q) {
    for (int i : knowledge.broadcasts[q].audience) broadcasts_of_[i].push_back(static_cast<int>(q));
  }
}

/// visit(k, r_ik, relay slope) for the own signal and every report.
template <class Visit>
void InformationSlopes::each_source(int i, const Visit& visit) const {
  visit(i, 1.0, 0.0);
  for (std::int64_t k = knowledge_.start[i]; k < knowledge_.start[i + 1]; ++k) {
    const int speaker = knowledge_.speaker[k];
    visit(speaker, fraction_of(knowledge_.signal_precision[speaker], knowledge_.relay_precision[k]),
          knowledge_.relay_slope[k]);
  }
}

double InformationSlopes::held(Change change, int broadcast, int i) const {
  double sum = 0.0;
  if (change == Change::broadcast_precision) {
    sum = static_cast<double>(std::count(broadcasts_of_[i].begin(), broadcasts_of_[i].end(), broadcast));
  } else if (change != Change::none) {
    each_source(i, [&](int, double r, double slope) {
      sum += change == Change::signal_precision ? r * r : (1.0 - r) * (1.0 - r) * slope;
    });
  }
  return sum;
}

void InformationSlopes::shared(Change change, int broadcast, int i, std::span<double> row) const {
  std::fill(row.begin(), row.end(), 0.0);
  if (change == Change::broadcast_precision) {
    if (held(change, broadcast, i) == 0.0) return;
    for (int j : knowledge_.broadcasts[broadcast].audience) row[j] = 1.0;
  } else if (change != Change::none) {
    each_source(i, [&](int k, double r, double slope) {
      for (const Holder& j : holders_[k]) {
        row[j.member] += change == Change::signal_precision
                             ? r * j.fraction * (r + j.fraction - 1.0)
                             : j.fraction * (1.0 - r) * (1.0 - r) * slope +
                                   r * (1.0 - j.fraction) * (1.0 - j.fraction) * j.relay_slope;
      }
    });
  }
  row[i] = 0.0;
}

double InformationSlopes::met(const LawGradient& laws, int i, int k) const {
  const double* row = laws.shared.data() + static_cast<std::size_t>(i) * static_cast<std::size_t>(knowledge_.size);
  double sum = 0.0;
  for (const Holder& j : holders_[k]) sum += row[j.member] * j.fraction;  // the diagonal is 0
  return sum;
}

SourceGradient InformationSlopes::gradient(const LawGradient& laws) const {
  const std::size_t n = static_cast<std::size_t>(knowledge_.size);
  SourceGradient sources{std::vector<double>(n, 0.0), std::vector<double>(n, 0.0), {}};
  for (int k = 0; k < knowledge_.size; ++k) {
    for (const Holder& i : holders_[k]) {
      const double r = i.fraction, pairs = met(laws, i.member, k);
      // Of a pair's r_i r_j (r_i + r_j - 1) each of the two takes r_i r_j (r_i - 1/2).
      sources.signal_precision[k] += laws.held[i.member] * r * r + pairs * r * (r - 0.5);
      sources.relay_precision[i.member] += (laws.held[i.member] + pairs) * (1.0 - r) * (1.0 - r) * i.relay_slope;
    }
  }
  for (const Broadcast& broadcast : knowledge_.broadcasts) {
    double sum = 0.0;
    for (int i : broadcast.audience) {
      const double* row = laws.shared.data() + static_cast<std::size_t>(i) * n;
      double pairs = 0.0;
      for (int j : broadcast.audience) pairs += row[j];
      sum += laws.held[i] + 0.5 * pairs;
    }
    sources.broadcast_precision.push_back(sum);
  }
  return sources;
}

void InformationSlopes::reports(const LawGradient& laws, int listener, std::span<double> by_speaker) const {
  for (int k = 0; k < knowledge_.size; ++k) {
    const bool can_report = k != listener && knowledge_.signal_precision[k] > 0.0;
    by_speaker[k] = can_report ? laws.held[listener] + met(laws, listener, k) : 0.0;
  }
}

}  // namespace folkmote
