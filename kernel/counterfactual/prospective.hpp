#pragma once
// Prospective counterfactuals: turnout under the scenario beside the baseline, before the state is known, analytic at
// both ends of the equilibrium set and simulated on common random numbers (MODEL.md, section 7).
#include "numerics/strict.hpp"

#include <cstdint>

#include "counterfactual/scenario.hpp"
#include "equilibrium/solution.hpp"

namespace folkmote {

/// Columns as in folkmote_counterfactual: a pooled row, then one row per community.
Table counterfactual_table(const Solution& baseline, const Scenario& scenario, std::int64_t draws, std::uint64_t seed,
                           const Execution& execution);

}  // namespace folkmote
