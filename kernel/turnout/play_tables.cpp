#include "community/columns.hpp"
#include "numerics/sums.hpp"
#include "turnout/play_range.hpp"
#include "turnout/tables.hpp"

namespace folkmote {

namespace {

/// Runs `record(player, first, count, c)` for the plays first .. first + count - 1 of the range, in every community.
template <class Record>
void play_all(const Solution& solution, const PlayRange& range, const Execution& execution, const Record& record) {
  const Study& study = *solution.study;
  std::vector<PlayPiece> pieces;
  for (std::size_t c = 0; c < study.communities.size(); ++c) {
    cut_plays(pieces, static_cast<std::int64_t>(c), study.communities[c].size, range.count);
  }
  run_tasks(static_cast<std::int64_t>(pieces.size()), execution, [&](std::int64_t task, const StopFlag& stop) {
    const PlayPiece& piece = pieces[task];
    const Knowledge knowledge = make_knowledge(study, solution.beliefs, static_cast<int>(piece.community));
    BlockPlayer player(knowledge, range.condition);
    PlayDraws draws(knowledge.size, knowledge.broadcasts.size(), BlockPlayer::has_stakes(knowledge));
    play_by_lanes(piece, stop, [&](std::int64_t first, int count) {
      draws.fill({range.seed, static_cast<std::uint64_t>(piece.community),
                  static_cast<std::uint64_t>(range.first) + static_cast<std::uint64_t>(first)});
      player.play(draws);
      record(player, first, count, piece.community);
    });
  });
}

}  // namespace

Table play_table(const Solution& solution, const PlayRange& range, const Execution& execution) {
  const Study& study = *solution.study;
  const auto communities = static_cast<std::int64_t>(study.communities.size());
  const std::size_t rows = communities * range.count;
  std::vector<std::int64_t> community(rows), replication(rows);
  std::vector<double> obstacle(rows), least(rows), greatest(rows);
  std::vector<double> totals;
  for (const Community& played : study.communities) totals.push_back(ordered_sum(played.values.weight));
  play_all(solution, range, execution, [&](const BlockPlayer& player, std::int64_t first, int count, std::int64_t c) {
    const std::vector<double>& weights = study.communities[c].values.weight;
    const Enclosure& ends = solution.enclosures[c];
    const Lanes below = player.turnout(ends.least, weights, totals[c]);
    const Lanes above = player.turnout(ends.greatest, weights, totals[c]);
    for (int lane = 0; lane < count; ++lane) {
      const std::size_t row = c * range.count + first + lane;
      community[row] = c;
      replication[row] = range.first + first + lane + 1;
      obstacle[row] = player.obstacle()[lane];
      least[row] = below[lane];
      greatest[row] = above[lane];
    }
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
  play_all(solution, range, execution, [&](const BlockPlayer& player, std::int64_t first, int count, std::int64_t c) {
    for (int i = 0; i < study.communities[c].size; ++i) {
      const std::int64_t of_member = roster.row_of[c][i];
      for (int lane = 0; lane < count; ++lane) {
        const std::size_t row = (first + lane) * members + of_member;
        const double e = player.index(i, lane);
        community[row] = c;
        member[row] = of_member;
        replication[row] = range.first + first + lane + 1;
        index[row] = e;
        least[row] = e <= solution.enclosures[c].least[i];
        greatest[row] = e <= solution.enclosures[c].greatest[i];
      }
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
