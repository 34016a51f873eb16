#include "turnout/sensitivity_tables.hpp"

#include <algorithm>
#include <functional>
#include <limits>
#include <memory>
#include <optional>
#include <string>

#include "community/columns.hpp"
#include "community/fault.hpp"
#include "equilibrium/dense_slopes.hpp"
#include "equilibrium/wide_slopes.hpp"

namespace folkmote {

namespace {

constexpr double no_value = std::numeric_limits<double>::quiet_NaN();
constexpr int ends = 2;  // least, greatest

/// What one community's game is differentiated with, over all pairs or by the grid of theta.
struct CommunityGame {
  CommunityGame(const Solution& solution, int c)
      : knowledge(make_knowledge(*solution.study, solution.beliefs, c)),
        slopes(knowledge),
        stakes(make_stakes(*solution.study, solution.payoff, c)) {}

  /// False where neither serves.
  bool prepare(const StopFlag& stop) {
    if (knowledge.size <= most_differentiated) {
      shared.emplace(knowledge);
      rows.emplace(knowledge, *shared, stakes);
      game = std::make_unique<DenseSlopes>(knowledge, *shared, slopes, *rows, &stop);
    } else if (wide_slopes_serve(knowledge)) {
      game = std::make_unique<WideSlopes>(knowledge, slopes, stakes, &stop);
    }
    return game != nullptr;
  }

  Knowledge knowledge;
  InformationSlopes slopes;
  Stakes stakes;
  std::optional<SharedInformation> shared;
  std::optional<ShareRows> rows;
  std::unique_ptr<GameSlopes> game;
};

struct EndFound {
  EndStatus status = EndStatus::not_converged;
  TurnoutGradient gradient;
  std::vector<MemberSlopes> members;  // by shift, where asked for
};

/// The derivatives at one end, those of members for the shifts given.
EndFound differentiate(CommunityGame& game, std::span<const double> cutoffs, double tolerance,
                       std::span<const CommonShift> shifts) {
  EndSensitivity end(game.knowledge, game.slopes, *game.game, game.stakes.weight, cutoffs, tolerance);
  EndFound found;
  if (end.status() == EndStatus::solved) found.gradient = end.turnout_gradient();
  for (const CommonShift& shift : shifts) {
    if (end.status() == EndStatus::solved) found.members.push_back(end.member_slopes(shift));
  }
  found.status = end.status();
  return found;
}

struct BothEnds {
  EndFound end[ends];
};

/// Calls use(ends, game) with both ends of community c; the game is absent where nothing could be differentiated.
BothEnds differentiate_community(const Solution& solution, int c, std::span<const CommonShift> shifts,
                                 const StopFlag& stop,
                                 const std::function<void(const CommunityGame&, const BothEnds&)>& use = {}) {
  const Enclosure& found = solution.enclosures[c];
  BothEnds both;
  if (found.verdict == Verdict::not_converged) return both;
  CommunityGame game(solution, c);
  if (!game.prepare(stop)) {
    for (EndFound& end : both.end) end.status = EndStatus::too_many_pairs;
    return both;
  }
  const double tolerance = std::max(solution.rule.tolerance, found.width);
  if (found.verdict == Verdict::proved_unique) {
    std::vector<double> middle(found.least.size());
    for (std::size_t i = 0; i < middle.size(); ++i) middle[i] = 0.5 * (found.least[i] + found.greatest[i]);
    both.end[0] = differentiate(game, middle, tolerance, shifts);
    both.end[1] = both.end[0];
  } else {
    both.end[0] = differentiate(game, found.least, solution.rule.tolerance, shifts);
    both.end[1] = differentiate(game, found.greatest, solution.rule.tolerance, shifts);
  }
  if (use) use(game, both);
  return both;
}

/// run_tasks for tasks that Stopped may end.
template <class Task>
void run_until_stopped(std::size_t count, const Execution& execution, const Task& task) {
  run_tasks(static_cast<std::int64_t>(count), execution, [&](std::int64_t number, const StopFlag& stop) {
    try {
      task(static_cast<std::size_t>(number), stop);
    } catch (const Stopped&) {
    }
  });
}

/// The shifts that the parameters ask for in one community.
std::vector<CommonShift> shifts_in(const Community& community, std::span<const Sensitive> parameters) {
  std::vector<CommonShift> shifts;
  for (Sensitive parameter : parameters) {
    if (parameter != Sensitive::broadcast_precision) {
      shifts.push_back({parameter, -1});
      continue;
    }
    for (std::size_t q = 0; q < community.broadcasts.size(); ++q) {
      shifts.push_back({parameter, static_cast<int>(q)});
    }
  }
  return shifts;
}

/// Columns under construction; rows of a community stand together.
struct Rows {
  std::vector<std::int64_t> community;  // its number, or the row of a member
  std::vector<Text> parameter;
  std::vector<std::int64_t> broadcast;
  std::vector<double> turnout[ends], cutoff[ends], chance[ends];
  std::vector<Text> status[ends];

  void name(std::int64_t row, const CommonShift& shift) {
    community.push_back(row);
    parameter.push_back(sensitive_name(shift.parameter));
    broadcast.push_back(shift.broadcast < 0 ? missing_integer : shift.broadcast + 1);
  }
};

void append(std::vector<double>& to, const std::vector<double>& from) { to.insert(to.end(), from.begin(), from.end()); }

void add_both(Table& table, const std::string& name, std::vector<double> (&values)[ends]) {
  table.add(name + "_least", std::move(values[0]));
  table.add(name + "_greatest", std::move(values[1]));
}

void add_status(Table& table, std::vector<Text> (&status)[ends]) {
  table.add("status_least", std::move(status[0]));
  table.add("status_greatest", std::move(status[1]));
}

std::vector<BothEnds> differentiate_all(const Solution& solution, std::span<const Sensitive> parameters, bool members,
                                        const Execution& execution) {
  const std::vector<Community>& communities = solution.study->communities;
  std::vector<BothEnds> all(communities.size());
  run_until_stopped(all.size(), execution, [&](std::size_t c, const StopFlag& stop) {
    const std::vector<CommonShift> shifts = shifts_in(communities[c], parameters);
    all[c] =
        differentiate_community(solution, static_cast<int>(c),
                                members ? std::span<const CommonShift>(shifts) : std::span<const CommonShift>(), stop);
    for (EndFound& end : all[c].end) end.gradient.laws = {};
  });
  return all;
}

}  // namespace

Table sensitivity_table(const Solution& solution, std::span<const Sensitive> parameters, const Execution& execution) {
  const Study& study = *solution.study;
  const std::vector<BothEnds> all = differentiate_all(solution, parameters, false, execution);
  Rows rows;
  for (std::size_t c = 0; c < all.size(); ++c) {
    for (const CommonShift& shift : shifts_in(study.communities[c], parameters)) {
      rows.name(static_cast<std::int64_t>(c), shift);
      for (int e = 0; e < ends; ++e) {
        const EndFound& end = all[c].end[e];
        rows.turnout[e].push_back(end.status == EndStatus::solved ? end.gradient.total(shift) : no_value);
        rows.status[e].push_back(status_text(end.status));
      }
    }
  }
  Table table(rows.community.size());
  table.add("community", take_rows(study.roster->community_labels, rows.community));
  table.add("parameter", std::move(rows.parameter));
  table.add("broadcast", std::move(rows.broadcast));
  add_both(table, "turnout", rows.turnout);
  add_status(table, rows.status);
  return table;
}

Table member_sensitivity_table(const Solution& solution, std::span<const Sensitive> parameters,
                               const Execution& execution) {
  const Study& study = *solution.study;
  const Roster& roster = *study.roster;
  const std::vector<BothEnds> all = differentiate_all(solution, parameters, true, execution);
  Rows rows;
  for (std::size_t c = 0; c < all.size(); ++c) {
    const std::vector<CommonShift> shifts = shifts_in(study.communities[c], parameters);
    const std::size_t n = roster.row_of[c].size();
    const std::vector<double> none(n, no_value);
    for (std::size_t s = 0; s < shifts.size(); ++s) {
      for (std::size_t i = 0; i < n; ++i) rows.name(roster.row_of[c][i], shifts[s]);
      for (int e = 0; e < ends; ++e) {
        const EndFound& end = all[c].end[e];
        const bool solved = end.status == EndStatus::solved;
        const std::span<const double> own = solved ? end.gradient.own(shifts[s].parameter) : std::span<const double>();
        append(rows.cutoff[e], solved ? end.members[s].cutoff : none);
        append(rows.chance[e], solved ? end.members[s].chance : none);
        append(rows.turnout[e], own.empty() ? none : std::vector<double>(own.begin(), own.end()));
        rows.status[e].insert(rows.status[e].end(), n, status_text(end.status));
      }
    }
  }
  Table table(rows.community.size());
  std::vector<std::int64_t> community;
  for (std::int64_t row : rows.community) community.push_back(roster.community_of_row[row]);
  table.add("community", take_rows(roster.community_labels, community));
  table.add("member", take_rows(roster.member_labels, rows.community));
  table.add("parameter", std::move(rows.parameter));
  table.add("broadcast", std::move(rows.broadcast));
  add_both(table, "cutoff", rows.cutoff);
  add_both(table, "chance", rows.chance);
  add_both(table, "turnout_own", rows.turnout);
  add_status(table, rows.status);
  return table;
}

namespace {

/// Where each community's pairs begin in the table, and their number at the end.
std::vector<std::int64_t> count_pairs(const Study& study) {
  std::vector<std::int64_t> first{0};
  for (std::size_t c = 0; c < study.communities.size(); ++c) {
    const std::int64_t size = study.communities[c].size;
    if (size > most_differentiated) {
      throw BadArgument("community " + study.roster->community_names[c] + " has " + std::to_string(size) +
                        " members; candidate links are differentiated in communities of at most " +
                        std::to_string(most_differentiated) + ", leave it out of the study.");
    }
    first.push_back(first.back() + size * (size - 1));
  }
  if (first.back() > most_links_listed) {
    throw BadArgument("the study has " + std::to_string(first.back()) + " candidate links; one table lists at most " +
                      std::to_string(most_links_listed) + ", make a study of fewer communities.");
  }
  return first;
}

struct LinkRows {
  explicit LinkRows(std::int64_t count) : precision(count, 0.0), turnout{precision, precision} {}

  std::vector<double> precision;
  std::vector<double> turnout[ends];
};

/// One listener's values into its rows, which leave out the listener itself.
void place(std::span<const double> by_speaker, int listener, std::int64_t first, std::vector<double>& column) {
  const int size = static_cast<int>(by_speaker.size());
  const std::int64_t start = first + static_cast<std::int64_t>(listener) * (size - 1);
  for (int k = 0; k < size; ++k) {
    if (k != listener) column[start + (k < listener ? k : k - 1)] = by_speaker[k];
  }
}

void fill_precision(const Knowledge& knowledge, std::int64_t first, LinkRows& rows) {
  std::vector<double> heard(knowledge.size);
  for (int i = 0; i < knowledge.size; ++i) {
    std::fill(heard.begin(), heard.end(), 0.0);
    for (std::int64_t k = knowledge.start[i]; k < knowledge.start[i + 1]; ++k) {
      heard[knowledge.speaker[k]] = knowledge.report_precision[k];
    }
    place(heard, i, first, rows.precision);
  }
}

void fill_turnout(const CommunityGame& game, const BothEnds& both, std::int64_t first, LinkRows& rows) {
  std::vector<double> by_speaker(game.knowledge.size);
  for (int e = 0; e < ends; ++e) {
    if (both.end[e].status != EndStatus::solved) continue;
    for (int i = 0; i < game.knowledge.size; ++i) {
      game.slopes.reports(both.end[e].gradient.laws, i, by_speaker);
      place(by_speaker, i, first, rows.turnout[e]);
    }
  }
}

}  // namespace

Table link_sensitivity_table(const Solution& solution, const Execution& execution) {
  const Study& study = *solution.study;
  const Roster& roster = *study.roster;
  const std::vector<std::int64_t> first = count_pairs(study);
  LinkRows rows(first.back());
  std::vector<Text> status[ends];
  for (auto& column : status) column.resize(first.back());
  run_until_stopped(study.communities.size(), execution, [&](std::size_t c, const StopFlag& stop) {
    fill_precision(make_knowledge(study, solution.beliefs, static_cast<int>(c)), first[c], rows);
    const BothEnds both = differentiate_community(
        solution, static_cast<int>(c), {}, stop,
        [&](const CommunityGame& game, const BothEnds& found) { fill_turnout(game, found, first[c], rows); });
    for (int e = 0; e < ends; ++e) {
      if (both.end[e].status != EndStatus::solved) {
        std::fill(rows.turnout[e].begin() + first[c], rows.turnout[e].begin() + first[c + 1], no_value);
      }
      std::fill(status[e].begin() + first[c], status[e].begin() + first[c + 1], status_text(both.end[e].status));
    }
  });
  std::vector<std::int64_t> community, listener, speaker;
  for (std::size_t c = 0; c < study.communities.size(); ++c) {
    community.insert(community.end(), first[c + 1] - first[c], static_cast<std::int64_t>(c));
    for (std::int64_t i : roster.row_of[c]) {
      for (std::int64_t k : roster.row_of[c]) {
        if (k == i) continue;
        listener.push_back(i);
        speaker.push_back(k);
      }
    }
  }
  Table table(rows.precision.size());
  table.add("community", take_rows(roster.community_labels, community));
  table.add("listener", take_rows(roster.member_labels, listener));
  table.add("speaker", take_rows(roster.member_labels, speaker));
  table.add("precision", std::move(rows.precision));
  add_both(table, "turnout", rows.turnout);
  add_status(table, status);
  return table;
}

}  // namespace folkmote
