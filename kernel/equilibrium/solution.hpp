#pragma once
// A study solved: the enclosure of every community, with what it was solved from.
#include "numerics/strict.hpp"

#include <memory>
#include <vector>

#include "equilibrium/enclosure.hpp"

namespace folkmote {

struct Solution {
  std::shared_ptr<const Study> study;
  Beliefs beliefs;
  Payoff payoff;
  SolveRule rule;
  std::vector<Enclosure> enclosures;  // by community

  /// Digest of everything the solution was computed from.
  std::uint64_t digest() const;
};

/// Checks beliefs and payoff against the study and solves every community.
Solution solve(std::shared_ptr<const Study> study, const Beliefs& beliefs, const Payoff& payoff, const SolveRule& rule,
               const Execution& execution);

}  // namespace folkmote
