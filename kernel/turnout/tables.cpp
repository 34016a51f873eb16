#include "turnout/tables.hpp"

#include <algorithm>
#include <cmath>
#include <functional>
#include <optional>

#include "community/columns.hpp"
#include "turnout/chance.hpp"
#include "turnout/large_turnout.hpp"
#include "turnout/moments.hpp"

namespace folkmote {

namespace {

std::vector<std::int64_t> repeat_each(std::int64_t count, std::int64_t times) {
  std::vector<std::int64_t> rows;
  rows.reserve(count * times);
  for (std::int64_t c = 0; c < count; ++c) rows.insert(rows.end(), times, c);
  return rows;
}

}  // namespace

Table community_table(const Solution& solution) {
  const Study& study = *solution.study;
  const std::size_t count = study.communities.size();
  std::vector<Text> verdict(count);
  std::vector<double> bound(count), least(count), greatest(count), width(count);
  std::vector<std::int64_t> iterations(count);
  for (std::size_t c = 0; c < count; ++c) {
    const Enclosure& found = solution.enclosures[c];
    const Knowledge knowledge = make_knowledge(study, solution.beliefs, static_cast<int>(c));
    const std::vector<double>& weights = study.communities[c].values.weight;
    verdict[c] = verdict_text(found.verdict);
    bound[c] = found.contraction_bound;
    least[c] = weighted_mean(weights, chances(knowledge, found.least));
    greatest[c] = weighted_mean(weights, chances(knowledge, found.greatest));
    width[c] = found.width;
    iterations[c] = found.iterations;
  }
  Table table(count);
  table.add("community", study.roster->community_labels);
  table.add("verdict", std::move(verdict));
  table.add("contraction_bound", std::move(bound));
  table.add("turnout_least", std::move(least));
  table.add("turnout_greatest", std::move(greatest));
  table.add("width", std::move(width));
  table.add("iterations", std::move(iterations));
  return table;
}

Table member_table(const Solution& solution) {
  const Study& study = *solution.study;
  const Roster& roster = *study.roster;
  const std::size_t rows = roster.members();
  std::vector<double> cutoff_least(rows), cutoff_greatest(rows), chance_least(rows), chance_greatest(rows);
  std::vector<double> information_held(rows);
  for (std::size_t c = 0; c < study.communities.size(); ++c) {
    const Enclosure& found = solution.enclosures[c];
    const Knowledge knowledge = make_knowledge(study, solution.beliefs, static_cast<int>(c));
    const std::vector<double> least = chances(knowledge, found.least);
    const std::vector<double> greatest = chances(knowledge, found.greatest);
    for (int i = 0; i < knowledge.size; ++i) {
      const std::int64_t row = roster.row_of[c][i];
      cutoff_least[row] = found.least[i];
      cutoff_greatest[row] = found.greatest[i];
      chance_least[row] = least[i];
      chance_greatest[row] = greatest[i];
      information_held[row] = knowledge.held[i];
    }
  }
  const std::vector<std::int64_t> community(roster.community_of_row.begin(), roster.community_of_row.end());
  Table table(rows);
  table.add("community", take_rows(roster.community_labels, community));
  table.add("member", roster.member_labels);
  table.add("cutoff_least", std::move(cutoff_least));
  table.add("cutoff_greatest", std::move(cutoff_greatest));
  table.add("chance_least", std::move(chance_least));
  table.add("chance_greatest", std::move(chance_greatest));
  table.add("information_held", std::move(information_held));
  return table;
}

namespace {

/// The rows of one turnout table, filled community by community.
struct TurnoutRows {
  std::vector<double> given, at_least;
  std::vector<double> mean[2], sd[2], chance[2];
  std::vector<Text> method;

  explicit TurnoutRows(std::size_t rows) : given(rows), at_least(rows), method(rows) {
    for (int end = 0; end < 2; ++end) {
      mean[end].resize(rows);
      sd[end].resize(rows);
      chance[end].resize(rows);
    }
  }
};

/// A value of theta, or none.
using Given = std::optional<double>;

/// One community's moments and chances, by the dense form or the sparse one.
struct Answers {
  std::function<Moments(std::span<const double> cutoffs, const Given&)> moments;
  std::function<double(std::span<const double> cutoffs, double threshold, const Given&)> chance;
  bool exact;
};

Answers dense_answers(const Knowledge& knowledge, const SharedInformation& shared, std::span<const double> weights,
                      const StopFlag& stop) {
  return {[&, weights](std::span<const double> cutoffs, const Given& condition) -> Moments {
            if (stop.raised()) return Moments{};
            return condition ? turnout_given(knowledge, shared, weights, cutoffs, *condition)
                             : turnout_moments(knowledge, shared, weights, cutoffs);
          },
          [&, weights](std::span<const double> cutoffs, double threshold, const Given& condition) {
            return condition ? chance_at_least_given(knowledge, shared, weights, cutoffs, threshold, *condition)
                             : chance_at_least(knowledge, shared, weights, cutoffs, threshold, &stop);
          },
          chance_is_exact(shared, weights)};
}

Answers sparse_answers(const LargeTurnout& large) {
  return {[&](std::span<const double> cutoffs, const Given& condition) {
            return condition ? large.moments_given(cutoffs, *condition) : large.moments(cutoffs);
          },
          [&](std::span<const double> cutoffs, double threshold, const Given& condition) {
            return condition ? large.chance_given(cutoffs, threshold, *condition) : large.chance(cutoffs, threshold);
          },
          false};
}

void fill_rows(const Answers& answers, const Enclosure& found, std::span<const Given> conditions,
               std::span<const double> at_least, std::size_t row, TurnoutRows& rows) {
  const std::size_t thresholds = std::max<std::size_t>(at_least.size(), 1);
  for (const Given& condition : conditions) {
    for (int end = 0; end < 2; ++end) {
      const std::vector<double>& cutoffs = end == 0 ? found.least : found.greatest;
      const Moments moments = answers.moments(cutoffs, condition);
      for (std::size_t q = 0; q < thresholds; ++q) {
        rows.mean[end][row + q] = moments.mean;
        rows.sd[end][row + q] = moments.sd;
        if (!at_least.empty()) rows.chance[end][row + q] = answers.chance(cutoffs, at_least[q], condition);
      }
    }
    for (std::size_t q = 0; q < thresholds; ++q, ++row) {
      if (condition) rows.given[row] = *condition;
      if (at_least.empty()) continue;
      rows.at_least[row] = at_least[q];
      rows.method[row] = answers.exact ? "exact" : "normal approximation";
    }
  }
}

}  // namespace

Table turnout_table(const Solution& solution, std::span<const double> given, std::span<const double> at_least,
                    const Execution& execution) {
  const std::size_t communities = solution.study->communities.size();
  std::vector<Given> conditions(given.begin(), given.end());
  if (conditions.empty()) conditions.push_back(std::nullopt);
  const std::size_t each = conditions.size() * std::max<std::size_t>(at_least.size(), 1);
  TurnoutRows rows(communities * each);
  const Study& study = *solution.study;
  const auto fill = [&](std::int64_t c, const Answers& answers) {
    fill_rows(answers, solution.enclosures[c], conditions, at_least, static_cast<std::size_t>(c) * each, rows);
  };
  run_tasks(static_cast<std::int64_t>(communities), execution, [&](std::int64_t c, const StopFlag& stop) {
    if (is_large_for_turnout(study.communities[c].size)) return;
    const Knowledge knowledge = make_knowledge(study, solution.beliefs, static_cast<int>(c));
    const SharedInformation shared(knowledge);
    fill(c, dense_answers(knowledge, shared, study.communities[c].values.weight, stop));
  });
  // Large communities one after the other, each split over the workers.
  for (std::size_t c = 0; c < communities; ++c) {
    if (!is_large_for_turnout(study.communities[c].size)) continue;
    const Knowledge knowledge = make_knowledge(study, solution.beliefs, static_cast<int>(c));
    fill(static_cast<std::int64_t>(c), sparse_answers({knowledge, study.communities[c].values.weight, execution}));
  }
  Table table(communities * each);
  table.add("community",
            take_rows(solution.study->roster->community_labels,
                      repeat_each(static_cast<std::int64_t>(communities), static_cast<std::int64_t>(each))));
  if (!given.empty()) table.add("given", std::move(rows.given));
  if (!at_least.empty()) table.add("at_least", std::move(rows.at_least));
  table.add("turnout_least", std::move(rows.mean[0]));
  table.add("turnout_greatest", std::move(rows.mean[1]));
  table.add("sd_least", std::move(rows.sd[0]));
  table.add("sd_greatest", std::move(rows.sd[1]));
  if (!at_least.empty()) {
    table.add("chance_least", std::move(rows.chance[0]));
    table.add("chance_greatest", std::move(rows.chance[1]));
    table.add("chance_method", std::move(rows.method));
  }
  return table;
}

}  // namespace folkmote
