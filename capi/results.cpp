#include "numerics/strict.hpp"

#include <limits>
#include <span>

#include "community/columns.hpp"
#include "counterfactual/prospective.hpp"
#include "guard.hpp"
#include "handles.hpp"
#include "turnout/tables.hpp"

using folkmote::guard;
using folkmote::needed;

namespace {

folkmote::SolveRule rule_of(const folkmote_options* options) {
  return options == nullptr ? folkmote::SolveRule{} : options->rule;
}

folkmote::Execution execution_of(const folkmote_options* options) {
  return options == nullptr ? folkmote::Execution{} : options->execution;
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

void check_level(int level) {
  if (level == FOLKMOTE_BY_COMMUNITY || level == FOLKMOTE_BY_MEMBER) return;
  throw folkmote::BadArgument("there is no level " + std::to_string(level) + "; see folkmote_level.");
}

constexpr int64_t most = std::numeric_limits<int64_t>::max();

/// Every play has a number, and so has every row of a table with `rows_per_draw` rows for each of them.
void check_draws(int64_t first_draw, int64_t draws, std::size_t rows_per_draw) {
  if (first_draw < 0)
    throw folkmote::BadArgument("first_draw is " + std::to_string(first_draw) + "; it must be at least 0.");
  if (draws < 1) throw folkmote::BadArgument("draws is " + std::to_string(draws) + "; it must be at least 1.");
  if (first_draw > most - draws) {
    throw folkmote::BadArgument("first_draw + draws is above 2^63 - 1; plays cannot be numbered that far.");
  }
  if (draws > most / static_cast<int64_t>(rows_per_draw)) throw std::length_error("rows of the plays");
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

folkmote_status folkmote_simulate(const folkmote_equilibrium* equilibrium, int64_t first_draw, int64_t draws,
                                  uint64_t seed, const double* given, int level, const folkmote_options* options,
                                  folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    check_level(level);
    const folkmote::Solution& solution = needed(equilibrium, "equilibrium")->solution;
    const folkmote::Study& played = *solution.study;
    check_draws(first_draw, draws, level == FOLKMOTE_BY_MEMBER ? played.roster->members() : played.communities.size());
    folkmote::PlayRange range{first_draw, draws, seed, std::nullopt};
    if (given != nullptr) {
      check_each({given, 1}, "given", -largest, largest);
      range.given = *given;
    }
    *table =
        new folkmote_table(level == FOLKMOTE_BY_MEMBER ? folkmote::action_table(solution, range, execution_of(options))
                                                       : folkmote::play_table(solution, range, execution_of(options)));
  });
}

folkmote_status folkmote_counterfactual(const folkmote_equilibrium* equilibrium, const folkmote_scenario* scenario,
                                        int64_t draws, uint64_t seed, const folkmote_options* options,
                                        folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    if (draws < 0 || draws == 1) {
      throw folkmote::BadArgument("draws is " + std::to_string(draws) + "; give 0 for none, or at least 2.");
    }
    *table = new folkmote_table(folkmote::counterfactual_table(needed(equilibrium, "equilibrium")->solution,
                                                               needed(scenario, "scenario")->scenario, draws, seed,
                                                               execution_of(options)));
  });
}
