#include "information/slopes.hpp"

#include <algorithm>

namespace folkmote {

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

double InformationSlopes::held(Change change, int broadcast, int i) const {
  double sum = 0.0;
  if (change == Change::broadcast_precision) {
    sum = static_cast<double>(std::count(broadcasts_of_[i].begin(), broadcasts_of_[i].end(), broadcast));
  } else if (change != Change::none) {
    each_source(i, [&](int, double r, double slope) {
      sum += change == Change::signal_precision ? r * r : by_relay(r, slope);
    });
  }
  return sum;
}

void InformationSlopes::shared(Change change, int broadcast, int i, std::span<double> row) const {
  std::fill(row.begin(), row.end(), 0.0);
  each_shared(change, broadcast, i, [&](int j, double part) { row[j] += part; });
  row[i] = 0.0;
}

SourceGradient InformationSlopes::gradient(const LawGradient& laws) const {
  const std::size_t n = static_cast<std::size_t>(knowledge_.size);
  SourceGradient sources{std::vector<double>(n, 0.0), std::vector<double>(n, 0.0),
                         std::vector<double>(knowledge_.broadcasts.size(), 0.0)};
  for (int i = 0; i < knowledge_.size; ++i) {
    const double held = laws.held[i];
    each_source(i, [&](int k, double r, double slope) {
      sources.signal_precision[k] += held * r * r;
      sources.relay_precision[i] += held * by_relay(r, slope);
    });
    for (int q : broadcasts_of_[i]) sources.broadcast_precision[q] += held;
    // Both halves of each pair stand in the matrix.
    if (!laws.shared.empty()) add_row(i, {laws.shared.data() + static_cast<std::size_t>(i) * n, n}, 0.5, sources);
  }
  return sources;
}

void InformationSlopes::add_row(int i, std::span<const double> row, double factor, SourceGradient& sources) const {
  each_source(i, [&](int k, double r, double slope) {
    double by_signals = 0.0, by_own_relay = 0.0;
    for (const Holder& j : holders_[k]) {
      const double weight = factor * row[j.member];
      by_signals += weight * by_signal(r, j.fraction);
      by_own_relay += weight * j.fraction;
      sources.relay_precision[j.member] += weight * r * by_relay(j.fraction, j.relay_slope);
    }
    sources.signal_precision[k] += by_signals;
    sources.relay_precision[i] += by_own_relay * by_relay(r, slope);
  });
  for (int q : broadcasts_of_[i]) {
    double sum = 0.0;
    for (int j : knowledge_.broadcasts[q].audience) sum += row[j];
    sources.broadcast_precision[q] += factor * sum;
  }
}

void InformationSlopes::reports(const LawGradient& laws, int listener, std::span<double> by_speaker) const {
  const double* row =
      laws.shared.data() + static_cast<std::size_t>(listener) * static_cast<std::size_t>(knowledge_.size);
  for (int k = 0; k < knowledge_.size; ++k) {
    by_speaker[k] = 0.0;
    if (k == listener || !(knowledge_.signal_precision[k] > 0.0)) continue;
    double met = 0.0;
    for (const Holder& j : holders_[k]) met += row[j.member] * j.fraction;
    by_speaker[k] = laws.held[listener] + met;
  }
}

}  // namespace folkmote
