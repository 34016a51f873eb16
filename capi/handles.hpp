#pragma once
// What stands behind the opaque handles.
#include "numerics/strict.hpp"

#include <memory>

#include "capi_count.hpp"
#include "counterfactual/paired.hpp"
#include "counterfactual/scenario.hpp"
#include "equilibrium/solution.hpp"
#include "folkmote.h"

struct folkmote_table : folkmote::CountedHandle {
  explicit folkmote_table(folkmote::Table t) : table(std::move(t)) {}
  folkmote::Table table;
};

struct folkmote_study : folkmote::CountedHandle {
  explicit folkmote_study(std::shared_ptr<const folkmote::Study> s) : study(std::move(s)) {}
  std::shared_ptr<const folkmote::Study> study;
};

struct folkmote_beliefs : folkmote::CountedHandle {
  folkmote::Beliefs beliefs;
};

struct folkmote_payoff : folkmote::CountedHandle {
  folkmote::Payoff payoff;
};

struct folkmote_options : folkmote::CountedHandle {
  folkmote::SolveRule rule;
  folkmote::Execution execution;
  folkmote::Estimator estimator;
};

struct folkmote_equilibrium : folkmote::CountedHandle {
  explicit folkmote_equilibrium(folkmote::Solution s) : solution(std::move(s)) {}
  folkmote::Solution solution;
};

struct folkmote_scenario : folkmote::CountedHandle {
  explicit folkmote_scenario(std::shared_ptr<const folkmote::Study> baseline) : scenario(std::move(baseline)) {}
  folkmote::Scenario scenario;
};

namespace folkmote {

/// `count` values of a parameter, each within its range.
Spread read_spread(const ParameterRule& rule, int64_t count, const double* values);

}  // namespace folkmote
