#include "counterfactual/prospective.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "numerics/sums.hpp"
#include "turnout/play_range.hpp"

namespace folkmote {

namespace {

constexpr int least = 0;
constexpr int greatest = 1;
constexpr double unknown = std::numeric_limits<double>::quiet_NaN();
// Communities whose plays are held in memory at once.
constexpr std::int64_t block = 64;

/// One community's plays, at both ends: turnout under the scenario less turnout under the baseline, and the estimate of
/// its mean.
struct Plays {
  std::vector<double> difference[2];
  std::vector<double> estimate[2];

  explicit Plays(std::int64_t draws) {
    for (int end : {least, greatest}) {
      difference[end].resize(draws);
      estimate[end].resize(draws);
    }
  }
};

struct Simulated {
  double mean[2] = {unknown, unknown};
  double standard_error[2] = {unknown, unknown};
  double spread_low = unknown;
  double spread_high = unknown;
};

/// The point below which a share p of the values lies, linear between order statistics (Hyndman & Fan 1996, type 7).
double quantile(const std::vector<double>& sorted, double p) {
  const double at = p * static_cast<double>(sorted.size() - 1);
  const auto below = static_cast<std::size_t>(std::floor(at));
  const std::size_t above = std::min(below + 1, sorted.size() - 1);
  return sorted[below] + (at - std::floor(at)) * (sorted[above] - sorted[below]);
}

/// Mean and standard error come from the estimates, the spread from the plays as they were.
Simulated summarise_plays(Plays plays) {
  Simulated result;
  for (int end : {least, greatest}) {
    std::vector<double>& values = plays.estimate[end];
    const auto count = static_cast<double>(values.size());
    const double mean = ordered_sum(values) / count;
    for (double& value : values) value = (value - mean) * (value - mean);
    result.mean[end] = mean;
    result.standard_error[end] = std::sqrt(ordered_sum(values) / (count - 1.0) / count);
    std::vector<double>& sorted = plays.difference[end];
    std::sort(sorted.begin(), sorted.end());
    const double low = quantile(sorted, 0.05);
    const double high = quantile(sorted, 0.95);
    result.spread_low = end == least ? low : std::min(result.spread_low, low);
    result.spread_high = end == least ? high : std::max(result.spread_high, high);
  }
  return result;
}

/// One row of the result.
struct Row {
  std::int64_t members = 0;
  Verdict baseline_verdict = Verdict::proved_unique;
  Verdict scenario_verdict = Verdict::proved_unique;
  double baseline[2] = {0.0, 0.0};
  double scenario[2] = {0.0, 0.0};
  Simulated simulated;
};

class Comparison {
 public:
  Comparison(const PairedRun& run, std::int64_t draws) : run_(run), draws_(draws) {}

  std::vector<Row> rows(const Execution& execution) const {
    const std::vector<Community>& communities = run_.baseline.study->communities;
    const auto count = static_cast<std::int64_t>(communities.size());
    std::vector<Row> rows(count + 1);
    Plays pooled(draws_);
    std::vector<double> totals;
    for (const Community& community : communities) totals.push_back(ordered_sum(community.values.weight));
    const double total = ordered_sum(totals);
    for (std::int64_t first = 0; first < count; first += block) {
      const std::int64_t size = std::min(block, count - first);
      const std::vector<Plays> plays = compare(first, size, &rows[first + 1], execution);
      // In the order of communities, whoever computed them.
      for (std::int64_t k = 0; k < size; ++k) {
        const double share = totals[first + k] / total;
        add_to_pool(rows[0], rows[first + k + 1], share);
        if (draws_ > 0) add_plays(pooled, plays[k], share);
      }
    }
    if (draws_ > 0) rows[0].simulated = summarise_plays(std::move(pooled));
    return rows;
  }

 private:
  /// The communities first .. first + size - 1: the analytic part into `rows`, then the plays.
  std::vector<Plays> compare(std::int64_t first, std::int64_t size, Row* rows, const Execution& execution) const {
    std::vector<std::unique_ptr<PairedCommunity>> played(size);
    run_tasks(size, execution, [&](std::int64_t k, const StopFlag& stop) {
      played[k] = std::make_unique<PairedCommunity>(run_, static_cast<int>(first + k), stop);
      rows[k] = analytic(*played[k]);
    });
    std::vector<Plays> plays(draws_ > 0 ? size : 0, Plays(draws_));
    std::vector<PlayPiece> pieces;
    for (std::int64_t k = 0; k < size; ++k) cut_plays(pieces, k, rows[k].members, draws_);
    run_tasks(static_cast<std::int64_t>(pieces.size()), execution, [&](std::int64_t task, const StopFlag& stop) {
      play(pieces[task], *played[pieces[task].community], plays[pieces[task].community], stop);
    });
    run_tasks(static_cast<std::int64_t>(plays.size()), execution,
              [&](std::int64_t k, const StopFlag&) { rows[k].simulated = summarise_plays(plays[k]); });
    return plays;
  }

  void play(const PlayPiece& piece, const PairedCommunity& played, Plays& plays, const StopFlag& stop) const {
    PairedPlayer player(run_, played);
    play_by_lanes(piece, stop, [&](std::int64_t first, int count) {
      player.play(first);
      for (int end : {least, greatest}) {
        for (int lane = 0; lane < count; ++lane) {
          plays.difference[end][first + lane] = player.scenario(end)[lane] - player.baseline(end)[lane];
          plays.estimate[end][first + lane] = player.estimate(end)[lane];
        }
      }
    });
  }

  static Row analytic(const PairedCommunity& played) {
    Row row;
    row.members = played.baseline.knowledge.size;
    row.baseline_verdict = played.baseline.ends.verdict;
    row.scenario_verdict = played.scenario.ends.verdict;
    for (int end : {least, greatest}) {
      row.baseline[end] = played.baseline.expected[end];
      row.scenario[end] = played.scenario.expected[end];
    }
    return row;
  }

  static void add_to_pool(Row& pool, const Row& row, double share) {
    pool.members += row.members;
    pool.baseline_verdict = std::max(pool.baseline_verdict, row.baseline_verdict);
    pool.scenario_verdict = std::max(pool.scenario_verdict, row.scenario_verdict);
    for (int end : {least, greatest}) {
      pool.baseline[end] += share * row.baseline[end];
      pool.scenario[end] += share * row.scenario[end];
    }
  }

  static void add_plays(Plays& pool, const Plays& plays, double share) {
    for (int end : {least, greatest}) {
      for (std::size_t r = 0; r < pool.estimate[end].size(); ++r) {
        pool.difference[end][r] += share * plays.difference[end][r];
        pool.estimate[end][r] += share * plays.estimate[end][r];
      }
    }
  }

  const PairedRun& run_;
  std::int64_t draws_;
};

Text missing_value(const std::vector<Text>&) { return std::nullopt; }
std::int64_t missing_value(const std::vector<std::int64_t>&) { return missing_integer; }
double missing_value(const std::vector<double>&) { return unknown; }

/// The labels of the communities below a missing one for the pooled row.
Values labels_with_pool(const Values& labels) {
  return std::visit(
      [](const auto& values) -> Values {
        std::decay_t<decltype(values)> with_pool;
        with_pool.reserve(values.size() + 1);
        with_pool.push_back(missing_value(values));
        with_pool.insert(with_pool.end(), values.begin(), values.end());
        return with_pool;
      },
      labels);
}

template <class Value, class Field>
void add_column(Table& table, const char* name, const std::vector<Row>& rows, const Field& field) {
  std::vector<Value> values;
  values.reserve(rows.size());
  for (const Row& row : rows) values.push_back(field(row));
  table.add(name, std::move(values));
}

Table tabulate(const std::vector<Row>& rows, const Values& community_labels) {
  Table table(rows.size());
  std::vector<Text> scope(rows.size(), "community");
  scope[0] = "pooled";
  table.add("scope", std::move(scope));
  table.add("community", labels_with_pool(community_labels));
  add_column<std::int64_t>(table, "members", rows, [](const Row& r) { return r.members; });
  add_column<Text>(table, "baseline_verdict", rows, [](const Row& r) { return verdict_text(r.baseline_verdict); });
  add_column<Text>(table, "scenario_verdict", rows, [](const Row& r) { return verdict_text(r.scenario_verdict); });
  const auto real = [&](const char* name, const auto& field) { add_column<double>(table, name, rows, field); };
  real("baseline_least", [](const Row& r) { return r.baseline[least]; });
  real("baseline_greatest", [](const Row& r) { return r.baseline[greatest]; });
  real("scenario_least", [](const Row& r) { return r.scenario[least]; });
  real("scenario_greatest", [](const Row& r) { return r.scenario[greatest]; });
  real("difference_least", [](const Row& r) { return r.scenario[least] - r.baseline[least]; });
  real("difference_greatest", [](const Row& r) { return r.scenario[greatest] - r.baseline[greatest]; });
  real("difference_low", [](const Row& r) { return r.scenario[least] - r.baseline[greatest]; });
  real("difference_high", [](const Row& r) { return r.scenario[greatest] - r.baseline[least]; });
  real("simulated_least", [](const Row& r) { return r.simulated.mean[least]; });
  real("simulated_greatest", [](const Row& r) { return r.simulated.mean[greatest]; });
  real("standard_error_least", [](const Row& r) { return r.simulated.standard_error[least]; });
  real("standard_error_greatest", [](const Row& r) { return r.simulated.standard_error[greatest]; });
  real("spread_low", [](const Row& r) { return r.simulated.spread_low; });
  real("spread_high", [](const Row& r) { return r.simulated.spread_high; });
  return table;
}

}  // namespace

Table counterfactual_table(const Solution& baseline, const Scenario& scenario, const PlayRange& range,
                           const Estimator& estimator, const Execution& execution) {
  const Solution after = solve_scenario(baseline, scenario, execution);
  const PairedRun run{baseline, after, range.condition, estimator, range.seed};
  return tabulate(Comparison(run, range.count).rows(execution), baseline.study->roster->community_labels);
}

}  // namespace folkmote
