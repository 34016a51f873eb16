#include "community/columns.hpp"
#include "turnout/plays.hpp"
#include "turnout/tables.hpp"

namespace folkmote {

namespace {

/// Runs `record(player, play, theta, c)` for every play of the range in every community.
template <class Record>
void play_all(const Solution& solution, const PlayRange& range, const Execution& execution, const Record& record) {
  const auto communities = static_cast<std::int64_t>(solution.study->communities.size());
  run_tasks(communities, execution, [&](std::int64_t c, const StopFlag& stop) {
    const Knowledge knowledge = make_knowledge(*solution.study, solution.beliefs, static_cast<int>(c));
    Player player(knowledge);
    for (std::int64_t play = 0; play < range.count && !stop.raised(); ++play) {
      const PlayKey key{range.seed, static_cast<std::uint64_t>(c), static_cast<std::uint64_t>(range.first + play)};
      const double theta = player.draw(key, range.given);
      record(player, play, theta, c);
    }
  });
}

}  // namespace

Table play_table(const Solution& solution, const PlayRange& range, const Execution& execution) {
  const Study& study = *solution.study;
  const auto communities = static_cast<std::int64_t>(study.communities.size());
  const std::size_t rows = communities * range.count;
  std::vector<std::int64_t> community(rows), replication(rows);
  std::vector<double> obstacle(rows), least(rows), greatest(rows);
  play_all(solution, range, execution, [&](const Player& player, std::int64_t play, double theta, std::int64_t c) {
    const std::size_t row = c * range.count + play;
    const std::vector<double>& weights = study.communities[c].values.weight;
    community[row] = c;
    replication[row] = range.first + play + 1;
    obstacle[row] = theta;
    least[row] = player.turnout(solution.enclosures[c].least, weights);
    greatest[row] = player.turnout(solution.enclosures[c].greatest, weights);
  });
  Table table(rows);
  table.add("community", take_rows(study.roster->community_labels, community));
  table.add("replication", std::move(replication));
  table.add("obstacle", std::move(obstacle));
  table.add("turnout_least", std::move(least));
  table.add("turnout_greatest", std::move(greatest));
  return table;
}

Table action_table(const Solution& solution, const PlayRange& range, const Execution& execution) {
  const Study& study = *solution.study;
  const Roster& roster = *study.roster;
  const std::size_t members = roster.members();
  const std::size_t rows = members * static_cast<std::size_t>(range.count);
  std::vector<std::int64_t> community(rows), member(rows), replication(rows), least(rows), greatest(rows);
  std::vector<double> index(rows);
  play_all(solution, range, execution, [&](const Player& player, std::int64_t play, double, std::int64_t c) {
    for (int i = 0; i < study.communities[c].size; ++i) {
      const std::int64_t of_member = roster.row_of[c][i];
      const std::size_t row = play * members + of_member;
      const double e = player.indices()[i];
      community[row] = c;
      member[row] = of_member;
      replication[row] = range.first + play + 1;
      index[row] = e;
      least[row] = e <= solution.enclosures[c].least[i];
      greatest[row] = e <= solution.enclosures[c].greatest[i];
    }
  });
  Table table(rows);
  table.add("community", take_rows(roster.community_labels, community));
  table.add("member", take_rows(roster.member_labels, member));
  table.add("replication", std::move(replication));
  table.add("index", std::move(index));
  table.add("action_least", std::move(least));
  table.add("action_greatest", std::move(greatest));
  return table;
}

}  // namespace folkmote
