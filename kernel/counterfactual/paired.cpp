#include "counterfactual/paired.hpp"

#include <algorithm>

#include "numerics/sums.hpp"

namespace folkmote {

namespace {

// Replications count up to 2^63 - 1: a scenario that draws for itself uses the numbers above.
constexpr std::uint64_t own_draws = std::uint64_t{1} << 63;

std::span<const double> cutoffs_of(const Enclosure& ends, int end) { return end == 0 ? ends.least : ends.greatest; }

}  // namespace

PairedCommunity::Side::Side(const Solution& solution, int c, const PairedRun& run, const StopFlag& stop)
    : knowledge(make_knowledge(*solution.study, solution.beliefs, c)),
      ends(solution.enclosures[c]),
      law(knowledge, run.condition) {
  const std::vector<double>& weights = run.baseline.study->communities[c].values.weight;
  for (int end : {0, 1}) {
    if (stop.raised()) return;
    if (run.expectations) expected[end] = expected_turnout(knowledge, law, weights, cutoffs_of(ends, end));
    if (run.estimator.control && !law.point()) {
      control.emplace_back(knowledge, law, weights, cutoffs_of(ends, end), stop);
    }
  }
}

PairedCommunity::PairedCommunity(const PairedRun& run, int c, const StopFlag& stop)
    : community(static_cast<std::uint64_t>(c)),
      weights(run.baseline.study->communities[c].values.weight),
      total(ordered_sum(weights)),
      baseline(run.baseline, c, run, stop),
      scenario(run.scenario, c, run, stop) {}

PairedPlayer::PairedPlayer(const PairedRun& run, const PairedCommunity& played)
    : run_(run),
      played_(played),
      baseline_(played.baseline.knowledge, run.condition),
      scenario_(played.scenario.knowledge, run.condition),
      draws_(played.baseline.knowledge.size,
             std::max(played.baseline.knowledge.broadcasts.size(), played.scenario.knowledge.broadcasts.size()),
             BlockPlayer::has_stakes(played.baseline.knowledge) || BlockPlayer::has_stakes(played.scenario.knowledge)),
      any_stakes_(BlockPlayer::has_stakes(played.baseline.knowledge) ||
                  BlockPlayer::has_stakes(played.scenario.knowledge)) {}

void PairedPlayer::play(std::int64_t first) {
  const auto replication = static_cast<std::uint64_t>(first);
  draws_.fill({run_.seed, played_.community, replication});
  baseline_.play(draws_);
  if (!run_.estimator.common_draws) draws_.fill({run_.seed, played_.community, own_draws | replication});
  scenario_.play(draws_);
  for (int end : {0, 1}) {
    const Lanes before = estimated(baseline_, played_.baseline, 0, end);
    const Lanes after = estimated(scenario_, played_.scenario, 1, end);
    for (int lane = 0; lane < lanes; ++lane) estimate_[end][lane] = after[lane] - before[lane];
  }
}

Lanes PairedPlayer::estimated(BlockPlayer& player, const PairedCommunity::Side& side, int which, int end) {
  const std::span<const double> cutoffs = cutoffs_of(side.ends, end);
  acted_[which][end] = player.turnout(cutoffs, played_.weights, played_.total);
  Lanes share = run_.estimator.over_stakes && any_stakes_
                    ? player.turnout_over_stakes(cutoffs, played_.weights, played_.total)
                    : acted_[which][end];
  if (!side.control.empty()) {
    const Control& control = side.control[end];
    for (int lane = 0; lane < lanes; ++lane) share[lane] -= control.curve(player.obstacle()[lane]) - control.mean();
  }
  return share;
}

}  // namespace folkmote
