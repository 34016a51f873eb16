#include "community/columns.hpp"
#include "community/fault.hpp"
#include "counterfactual/prospective.hpp"
#include "turnout/play_range.hpp"

namespace folkmote {

Solution solve_scenario(const Solution& baseline, const Scenario& scenario, const Execution& execution) {
  if (scenario.baseline() != baseline.study && scenario.baseline()->digest() != baseline.study->digest()) {
    throw BadArgument("the scenario was made from another study than the equilibrium; make both from the same study.");
  }
  return solve(std::make_shared<const Study>(scenario.edited()), scenario.apply(baseline.beliefs), baseline.payoff,
               baseline.rule, execution);
}

Table paired_table(const Solution& baseline, const Scenario& scenario, const PlayRange& range,
                   const Estimator& estimator, const Execution& execution) {
  const Solution after = solve_scenario(baseline, scenario, execution);
  Estimator actions = estimator;  // the plays as they are: nothing is estimated
  actions.over_stakes = actions.control = false;
  const PairedRun run{baseline, after, range.condition, actions, range.seed, false};
  const auto communities = static_cast<std::int64_t>(baseline.study->communities.size());
  const std::size_t rows = communities * range.count;
  std::vector<std::int64_t> community(rows), replication(rows);
  std::vector<double> obstacle(rows), share[2][2];
  for (auto& side : share) {
    for (std::vector<double>& column : side) column.resize(rows);
  }
  std::vector<PlayPiece> pieces;
  for (std::int64_t c = 0; c < communities; ++c) {
    cut_plays(pieces, c, baseline.study->communities[c].size, range.count);
  }
  run_tasks(static_cast<std::int64_t>(pieces.size()), execution, [&](std::int64_t task, const StopFlag& stop) {
    const PlayPiece& piece = pieces[task];
    const PairedCommunity played(run, static_cast<int>(piece.community), stop);
    PairedPlayer player(run, played);
    play_by_lanes(piece, stop, [&](std::int64_t first, int count) {
      player.play(range.first + first);
      for (int lane = 0; lane < count; ++lane) {
        const std::size_t row = piece.community * range.count + first + lane;
        community[row] = piece.community;
        replication[row] = range.first + first + lane + 1;
        obstacle[row] = player.obstacle()[lane];
        for (int end : {0, 1}) {
          share[0][end][row] = player.baseline(end)[lane];
          share[1][end][row] = player.scenario(end)[lane];
        }
      }
    });
  });
  Table table(rows);
  table.add("community", take_rows(baseline.study->roster->community_labels, community));
  table.add("replication", std::move(replication));
  table.add("obstacle", std::move(obstacle));
  table.add("baseline_least", std::move(share[0][0]));
  table.add("baseline_greatest", std::move(share[0][1]));
  table.add("scenario_least", std::move(share[1][0]));
  table.add("scenario_greatest", std::move(share[1][1]));
  return table;
}

}  // namespace folkmote
