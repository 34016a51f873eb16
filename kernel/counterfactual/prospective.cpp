#include "counterfactual/prospective.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "community/fault.hpp"
#include "numerics/sums.hpp"
#include "turnout/moments.hpp"
#include "turnout/plays.hpp"

namespace folkmote {

namespace {

constexpr int least = 0;
constexpr int greatest = 1;
constexpr double unknown = std::numeric_limits<double>::quiet_NaN();
// Communities whose plays are held in memory at once.
constexpr std::int64_t block = 64;

/// Differences in turnout (scenario less baseline) over the plays, at both ends.
struct Differences {
  std::vector<double> of_end[2];

  explicit Differences(std::int64_t draws) : of_end{std::vector<double>(draws), std::vector<double>(draws)} {}
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

Simulated summarise_plays(Differences differences) {
  Simulated result;
  for (int end : {least, greatest}) {
    std::vector<double>& values = differences.of_end[end];
    const auto count = static_cast<double>(values.size());
    const double mean = ordered_sum(values) / count;
    std::vector<double> squares(values.size());
    for (std::size_t k = 0; k < values.size(); ++k) squares[k] = (values[k] - mean) * (values[k] - mean);
    result.mean[end] = mean;
    result.standard_error[end] = std::sqrt(ordered_sum(squares) / (count - 1.0) / count);
    std::sort(values.begin(), values.end());
    const double low = quantile(values, 0.05);
    const double high = quantile(values, 0.95);
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
  Comparison(const Solution& baseline, const Solution& scenario, std::int64_t draws, std::uint64_t seed)
      : baseline_(baseline), scenario_(scenario), draws_(draws), seed_(seed) {}

  std::vector<Row> rows(const Execution& execution) const {
    const auto count = static_cast<std::int64_t>(baseline_.enclosures.size());
    std::vector<Row> rows(count + 1);
    Differences pooled(draws_);
    std::vector<double> totals;
    for (const Community& community : baseline_.study->communities)
      totals.push_back(ordered_sum(community.values.weight));
    const double total = ordered_sum(totals);
    for (std::int64_t first = 0; first < count; first += block) {
      const std::int64_t size = std::min(block, count - first);
      std::vector<Differences> plays(size, Differences(draws_));
      run_tasks(size, execution, [&](std::int64_t k, const StopFlag& stop) {
        rows[first + k + 1] = compare(static_cast<int>(first + k), plays[k], stop);
      });
      // In the order of communities, whoever computed them.
      for (std::int64_t k = 0; k < size; ++k) {
        const double share = totals[first + k] / total;
        add_to_pool(rows[0], rows[first + k + 1], share);
        for (int end : {least, greatest}) {
          for (std::int64_t r = 0; r < draws_; ++r) pooled.of_end[end][r] += share * plays[k].of_end[end][r];
        }
      }
    }
    if (draws_ > 0) rows[0].simulated = summarise_plays(std::move(pooled));
    return rows;
  }

 private:
  Row compare(int c, Differences& plays, const StopFlag& stop) const {
    const Enclosure& before = baseline_.enclosures[c];
    const Enclosure& after = scenario_.enclosures[c];
    const Knowledge known_before = make_knowledge(*baseline_.study, baseline_.beliefs, c);
    const Knowledge known_after = make_knowledge(*scenario_.study, scenario_.beliefs, c);
    const std::vector<double>& weights = baseline_.study->communities[c].values.weight;
    Row row;
    row.members = known_before.size;
    row.baseline_verdict = before.verdict;
    row.scenario_verdict = after.verdict;
    row.baseline[least] = weighted_mean(weights, chances(known_before, before.least));
    row.baseline[greatest] = weighted_mean(weights, chances(known_before, before.greatest));
    row.scenario[least] = weighted_mean(weights, chances(known_after, after.least));
    row.scenario[greatest] = weighted_mean(weights, chances(known_after, after.greatest));
    if (draws_ == 0) return row;
    Player player_before(known_before);
    Player player_after(known_after);
    for (std::int64_t r = 0; r < draws_ && !stop.raised(); ++r) {
      const PlayKey key{seed_, static_cast<std::uint64_t>(c), static_cast<std::uint64_t>(r)};
      player_before.draw(key, std::nullopt);
      player_after.draw(key, std::nullopt);
      plays.of_end[least][r] =
          player_after.turnout(after.least, weights) - player_before.turnout(before.least, weights);
      plays.of_end[greatest][r] =
          player_after.turnout(after.greatest, weights) - player_before.turnout(before.greatest, weights);
    }
    row.simulated = summarise_plays(plays);
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

  const Solution& baseline_;
  const Solution& scenario_;
  std::int64_t draws_;
  std::uint64_t seed_;
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

Table counterfactual_table(const Solution& baseline, const Scenario& scenario, std::int64_t draws, std::uint64_t seed,
                           const Execution& execution) {
  if (scenario.baseline() != baseline.study && scenario.baseline()->digest() != baseline.study->digest()) {
    throw BadArgument("the scenario was made from another study than the equilibrium; make both from the same study.");
  }
  const Solution after = solve(std::make_shared<const Study>(scenario.edited()), scenario.apply(baseline.beliefs),
                               baseline.payoff, baseline.rule, execution);
  const Comparison comparison(baseline, after, draws, seed);
  return tabulate(comparison.rows(execution), baseline.study->roster->community_labels);
}

}  // namespace folkmote
