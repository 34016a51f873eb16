#include "numerics/strict.hpp"

#include <limits>
#include <span>

#include "community/columns.hpp"
#include "counterfactual/prospective.hpp"
#include "guard.hpp"
#include "handles.hpp"
#include "plays.hpp"
#include "turnout/tables.hpp"

using folkmote::check_draws;
using folkmote::check_level;
using folkmote::estimator_of;
using folkmote::execution_of;
using folkmote::guard;
using folkmote::needed;
using folkmote::read_condition;

namespace {

folkmote::SolveRule rule_of(const folkmote_options* options) {
  return options == nullptr ? folkmote::SolveRule{} : options->rule;
}

std::span<const double> read_array(int64_t count, const double* values, const char* name) {
  if (count < 0)
    throw folkmote::BadArgument(std::string(name) + "_count is " + std::to_string(count) + "; it must be at least 0.");
  if (count == 0) return {};
  return {needed(values, name), static_cast<std::size_t>(count)};
}

void check_each(std::span<const double> values, const char* name, double low, double high) {
  for (double value : values) {
    if (value >= low && value <= high) continue;
    throw folkmote::BadArgument(std::string(name) + " holds " + folkmote::plain_number(value) + "; give numbers from " +
                                folkmote::plain_number(low) + " to " + folkmote::plain_number(high) + ".");
  }
}

constexpr double largest = std::numeric_limits<double>::max();

}  // namespace

folkmote_status folkmote_equilibrium_create(const folkmote_study* study, const folkmote_beliefs* beliefs,
                                            const folkmote_payoff* payoff, const folkmote_options* options,
                                            folkmote_equilibrium** equilibrium, char* message) {
  return guard(message, [&] {
    *needed(equilibrium, "equilibrium") = nullptr;
    *equilibrium = new folkmote_equilibrium(
        folkmote::solve(needed(study, "study")->study, needed(beliefs, "beliefs")->beliefs,
                        needed(payoff, "payoff")->payoff, rule_of(options), execution_of(options)));
  });
}

void folkmote_equilibrium_destroy(folkmote_equilibrium* equilibrium) { delete equilibrium; }

folkmote_status folkmote_equilibrium_table(const folkmote_equilibrium* equilibrium, int level, folkmote_table** table,
                                           char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    check_level(level);
    const folkmote::Solution& solution = needed(equilibrium, "equilibrium")->solution;
    *table = new folkmote_table(level == FOLKMOTE_BY_MEMBER ? folkmote::member_table(solution)
                                                            : folkmote::community_table(solution));
  });
}

uint64_t folkmote_equilibrium_digest(const folkmote_equilibrium* equilibrium) {
  return equilibrium == nullptr ? 0 : folkmote::guard_digest([&] { return equilibrium->solution.digest(); });
}

folkmote_status folkmote_turnout(const folkmote_equilibrium* equilibrium, int64_t given_count, const double* given,
                                 int64_t at_least_count, const double* at_least, const folkmote_options* options,
                                 folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    const auto obstacles = read_array(given_count, given, "given");
    const auto thresholds = read_array(at_least_count, at_least, "at_least");
    check_each(obstacles, "given", -largest, largest);
    check_each(thresholds, "at_least", 0.0, 1.0);
    *table = new folkmote_table(folkmote::turnout_table(needed(equilibrium, "equilibrium")->solution, obstacles,
                                                        thresholds, execution_of(options)));
  });
}

namespace {

folkmote::Table plays_of(const folkmote::Solution& solution, const folkmote::PlayRange& range, int level,
                         const folkmote_options* options) {
  folkmote::check_plays(solution, range.first, range.count, level);
  return level == FOLKMOTE_BY_MEMBER ? folkmote::action_table(solution, range, execution_of(options))
                                     : folkmote::play_table(solution, range, execution_of(options));
}

void check_compared(int64_t draws) {
  if (draws < 0 || draws == 1) {
    throw folkmote::BadArgument("draws is " + std::to_string(draws) + "; give 0 for none, or at least 2.");
  }
}

}  // namespace

folkmote_status folkmote_simulate(const folkmote_equilibrium* equilibrium, int64_t first_draw, int64_t draws,
                                  uint64_t seed, const double* given, int level, const folkmote_options* options,
                                  folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    folkmote::PlayRange range{first_draw, draws, seed, {}};
    if (given != nullptr) {
      check_each({given, 1}, "given", -largest, largest);
      range.condition = {*given, *given};
    }
    *table = new folkmote_table(plays_of(needed(equilibrium, "equilibrium")->solution, range, level, options));
  });
}

folkmote_status folkmote_simulate_within(const folkmote_equilibrium* equilibrium, int64_t first_draw, int64_t draws,
                                         uint64_t seed, double low, double high, int level,
                                         const folkmote_options* options, folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    const folkmote::PlayRange range{first_draw, draws, seed, read_condition(low, high)};
    *table = new folkmote_table(plays_of(needed(equilibrium, "equilibrium")->solution, range, level, options));
  });
}

folkmote_status folkmote_counterfactual(const folkmote_equilibrium* equilibrium, const folkmote_scenario* scenario,
                                        int64_t draws, uint64_t seed, const folkmote_options* options,
                                        folkmote_table** table, char* message) {
  constexpr double open = std::numeric_limits<double>::infinity();
  return folkmote_counterfactual_within(equilibrium, scenario, draws, seed, -open, open, options, table, message);
}

folkmote_status folkmote_counterfactual_within(const folkmote_equilibrium* equilibrium,
                                               const folkmote_scenario* scenario, int64_t draws, uint64_t seed,
                                               double low, double high, const folkmote_options* options,
                                               folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    check_compared(draws);
    const folkmote::PlayRange range{0, draws, seed, read_condition(low, high)};
    *table = new folkmote_table(folkmote::counterfactual_table(needed(equilibrium, "equilibrium")->solution,
                                                               needed(scenario, "scenario")->scenario, range,
                                                               estimator_of(options), execution_of(options)));
  });
}

folkmote_status folkmote_counterfactual_plays(const folkmote_equilibrium* equilibrium,
                                              const folkmote_scenario* scenario, int64_t first_draw, int64_t draws,
                                              uint64_t seed, double low, double high, const folkmote_options* options,
                                              folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    const folkmote::Solution& solution = needed(equilibrium, "equilibrium")->solution;
    check_draws(first_draw, draws, solution.study->communities.size());
    const folkmote::PlayRange range{first_draw, draws, seed, read_condition(low, high)};
    *table = new folkmote_table(folkmote::paired_table(solution, needed(scenario, "scenario")->scenario, range,
                                                       estimator_of(options), execution_of(options)));
  });
}
