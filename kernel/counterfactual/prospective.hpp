#pragma once
// Prospective counterfactuals: turnout under the scenario beside the baseline, before the state is known, analytic at
// both ends of the equilibrium set and simulated on common random numbers (MODEL.md, section 7).
#include "numerics/strict.hpp"

#include <cstdint>

#include "counterfactual/paired.hpp"
#include "counterfactual/scenario.hpp"
#include "turnout/tables.hpp"

namespace folkmote {

/// Columns as in folkmote_counterfactual: a pooled row, then one row per community. The range starts at replication 0.
Table counterfactual_table(const Solution& baseline, const Scenario& scenario, const PlayRange& range,
                           const Estimator& estimator, const Execution& execution);

/// Columns as in folkmote_counterfactual_plays: one row per community and replication.
Table paired_table(const Solution& baseline, const Scenario& scenario, const PlayRange& range,
                   const Estimator& estimator, const Execution& execution);

/// The baseline's game under the scenario. Throws BadArgument when the scenario was made from another study.
Solution solve_scenario(const Solution& baseline, const Scenario& scenario, const Execution& execution);

}  // namespace folkmote
