#pragma once
// Derivatives of a solved study, as tables.
#include "numerics/strict.hpp"

#include <span>

#include "community/table.hpp"
#include "equilibrium/sensitivity.hpp"
#include "equilibrium/solution.hpp"

namespace folkmote {

/// The largest community whose pairs are all held, which candidate links need.
inline constexpr int most_differentiated = 2000;

/// The most candidate links of a study that one table lists.
inline constexpr std::int64_t most_links_listed = 5000000;

/// community, parameter, broadcast, turnout_least, turnout_greatest, status_least, status_greatest: expected turnout in
/// a common shift of each parameter; one row per broadcast for its precision.
Table sensitivity_table(const Solution& solution, std::span<const Sensitive> parameters, const Execution& execution);

/// community, member, parameter, broadcast, cutoff_*, chance_* (under the common shift), turnout_own_* (expected
/// turnout in the member's own value; NaN where members have none of their own), status_*.
Table member_sensitivity_table(const Solution& solution, std::span<const Sensitive> parameters,
                               const Execution& execution);

/// community, listener, speaker, precision (as heard now; 0: not heard), turnout_*, status_*: expected turnout in the
/// precision with which the listener hears the speaker's signal, for every ordered pair. Throws BadArgument where the
/// study has too many.
Table link_sensitivity_table(const Solution& solution, const Execution& execution);

}  // namespace folkmote
