#pragma once
// Arguments of runs, as the shims read them.
#include "numerics/strict.hpp"

#include <limits>
#include <string>

#include "community/columns.hpp"
#include "guard.hpp"
#include "handles.hpp"
#include "turnout/condition.hpp"

namespace folkmote {

inline Execution execution_of(const folkmote_options* options) {
  return options == nullptr ? Execution{} : options->execution;
}

inline Estimator estimator_of(const folkmote_options* options) {
  return options == nullptr ? Estimator{} : options->estimator;
}

inline void check_level(int level) {
  if (level == FOLKMOTE_BY_COMMUNITY || level == FOLKMOTE_BY_MEMBER) return;
  throw BadArgument("there is no level " + std::to_string(level) + "; see folkmote_level.");
}

/// Every play has a number, and so has every row of a table with `rows_per_draw` rows for each of them.
inline void check_draws(int64_t first_draw, int64_t draws, std::size_t rows_per_draw) {
  constexpr int64_t most = std::numeric_limits<int64_t>::max();
  if (first_draw < 0) throw BadArgument("first_draw is " + std::to_string(first_draw) + "; it must be at least 0.");
  if (draws < 1) throw BadArgument("draws is " + std::to_string(draws) + "; it must be at least 1.");
  if (first_draw > most - draws) {
    throw BadArgument("first_draw + draws is above 2^63 - 1; plays cannot be numbered that far.");
  }
  if (draws > most / static_cast<int64_t>(rows_per_draw)) throw std::length_error("rows of the plays");
}

inline void check_plays(const Solution& solution, int64_t first_draw, int64_t draws, int level) {
  check_level(level);
  const Study& played = *solution.study;
  check_draws(first_draw, draws, level == FOLKMOTE_BY_MEMBER ? played.roster->members() : played.communities.size());
}

/// NaN, or ends in the wrong order, are refused; infinite ends leave that side open.
inline Condition read_condition(double low, double high) {
  constexpr double open = std::numeric_limits<double>::infinity();
  if (!(low <= high) || low == open || high == -open) {
    throw BadArgument("given is from " + plain_number(low) + " to " + plain_number(high) +
                      "; give low <= high, both finite where they are equal.");
  }
  return {low, high};
}

}  // namespace folkmote
