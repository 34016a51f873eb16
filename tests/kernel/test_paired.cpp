// The estimators of a difference: each of the eight agrees with the analytic mean, under every kind of condition, and
// the variance falls as it should.
#include <catch2/catch.hpp>
#include <cmath>

#include "counterfactual/prospective.hpp"
#include "small_studies.hpp"
#include "turnout/moments.hpp"

using namespace folkmote;

namespace {

const std::vector<double>& reals(const Table& table, const char* name) {
  return std::get<std::vector<double>>(table.find(name)->values);
}

std::vector<Estimator> every_estimator() {
  std::vector<Estimator> all;
  for (int k = 0; k < 8; ++k) all.push_back({(k & 1) != 0, (k & 2) != 0, (k & 4) != 0});
  return all;
}

const double open_end = std::numeric_limits<double>::infinity();

}  // namespace

TEST_CASE("every estimator of the difference agrees with the analytic mean", "[counterfactual]") {
  int compared = 0, beyond = 0;
  for (std::uint64_t seed = 0; seed < 24; ++seed) {
    const studies::Mixed made = studies::mixed(seed);
    const Solution baseline = studies::solved(made.study, made.beliefs, made.payoff);
    Scenario scenario(made.study);
    if (seed % 4 == 0) scenario.broadcast(nullptr, 1.5);
    if (seed % 4 == 1) scenario.shift_cost(nullptr, -0.2);
    if (seed % 4 == 2) scenario.set_beliefs(Parameter::prior_mean, {0.1});
    if (seed % 4 == 3) scenario.gathering(nullptr);
    for (const Condition& condition :
         {Condition{}, Condition{0.3, 0.3}, Condition{0.2, 0.9}, Condition{0.8, open_end}}) {
      const double analytic =
          reals(counterfactual_table(baseline, scenario, {0, 0, 0, condition}, {}, {}), "difference_greatest")[1];
      for (const Estimator& estimator : every_estimator()) {
        const Table table = counterfactual_table(baseline, scenario, {0, 1000, seed + 100, condition}, estimator, {});
        const double found = reals(table, "simulated_greatest")[1];
        const double error = reals(table, "standard_error_greatest")[1];
        CAPTURE(seed, condition.low, condition.high, estimator.common_draws, estimator.over_stakes, estimator.control);
        CAPTURE(analytic, found, error);
        CHECK(std::fabs(found - analytic) < 4.5 * error + 1e-9);
        ++compared;
        beyond += std::fabs(found - analytic) > 2 * error + 1e-9;
      }
    }
  }
  // One in twenty-two of a normal law; the estimators of one setting share draws, so the band is wide.
  CHECK(beyond > compared / 200);
  CHECK(beyond < compared / 8);
}

TEST_CASE("each device of variance reduction reduces it", "[counterfactual]") {
  drawn::Numbers numbers(3);
  const auto study = studies::one_community(200, studies::preferential(200, 2, numbers), true);
  const Solution baseline = studies::solved(study, studies::beliefs(0.45, 1.0, 2.0, 0.5));
  Scenario scenario(study);
  scenario.shift_cost(nullptr, -0.1);
  const auto error = [&](const Estimator& estimator) {
    const Table table = counterfactual_table(baseline, scenario, {0, 2000, 5, {}}, estimator, {});
    return reals(table, "standard_error_least")[1];
  };
  const double plain = error({false, false, false}), common = error({true, false, false});
  const double stakes = error({true, true, false}), all = error({true, true, true});
  CAPTURE(plain, common, stakes, all);
  CHECK(common < 0.5 * plain);
  CHECK(stakes < common);
  CHECK(all < 0.3 * stakes);
}

TEST_CASE("the paired plays are the plays of both sides on the same draws", "[counterfactual]") {
  const studies::Mixed made = studies::mixed(6);
  const Solution baseline = studies::solved(made.study, made.beliefs, made.payoff);
  Scenario scenario(made.study);
  scenario.broadcast(nullptr, 2.0);
  const PlayRange range{3, 41, 9, {0.0, 1.0}};
  const Table pairs = paired_table(baseline, scenario, range, {}, {2, {}});
  const Solution after = solve_scenario(baseline, scenario, {});
  const Table before_plays = play_table(baseline, range, {}), after_plays = play_table(after, range, {});
  CHECK(reals(pairs, "obstacle") == reals(before_plays, "obstacle"));
  CHECK(reals(pairs, "baseline_least") == reals(before_plays, "turnout_least"));
  CHECK(reals(pairs, "scenario_greatest") == reals(after_plays, "turnout_greatest"));
  CHECK(pairs.digest() == paired_table(baseline, scenario, range, {}, {5, {}}).digest());
}

TEST_CASE("the control variate has the mean that it says", "[counterfactual]") {
  const auto study = studies::one_community(30);
  const Knowledge k = make_knowledge(*study, studies::beliefs(0.4, 2.0, 5.0, 0.1), 0);
  const std::vector<double> weights(30, 1.0), cutoffs(30, 0.55);
  for (const Condition& condition : {Condition{}, Condition{0.1, 0.6}, Condition{2.0, open_end}, Condition{5.0, 5.2}}) {
    const ObstacleLaw law(k, condition);
    const Control control(k, law, weights, cutoffs, StopFlag());
    double sum = 0.0;  // over 200,000 equal shares of the law: the midpoint rule
    constexpr int shares = 200000;
    for (int s = 0; s < shares; ++s) sum += control.curve(law.obstacle((s + 0.5) / shares));
    CHECK(std::fabs(sum / shares - control.mean()) < 1e-7);
    CHECK(std::fabs(control.mean() - expected_turnout(k, law, weights, cutoffs)) < 5e-3);
  }
}
