#pragma once
// What a solved study is asked for, as tables.
#include "numerics/strict.hpp"

#include <cstdint>
#include <span>

#include "community/table.hpp"
#include "equilibrium/solution.hpp"
#include "turnout/condition.hpp"

namespace folkmote {

/// community, verdict, contraction_bound, turnout_least, turnout_greatest, width, iterations.
Table community_table(const Solution& solution);

/// community, member, cutoff_least, cutoff_greatest, chance_least, chance_greatest, information_held (K), in the row
/// order of members.
Table member_table(const Solution& solution);

/// Turnout and its standard deviation at both ends, by community; given values of theta where there are any, and with
/// the chance of reaching thresholds where there are any.
Table turnout_table(const Solution& solution, std::span<const double> given, std::span<const double> at_least,
                    const Execution& execution);

struct PlayRange {
  std::int64_t first;  // replication numbers first .. first + count - 1, from 0
  std::int64_t count;
  std::uint64_t seed;
  Condition condition;
};

/// community, replication, obstacle, turnout_least, turnout_greatest.
Table play_table(const Solution& solution, const PlayRange& range, const Execution& execution);

/// community, member, replication, index, action_least, action_greatest.
Table action_table(const Solution& solution, const PlayRange& range, const Execution& execution);

}  // namespace folkmote
