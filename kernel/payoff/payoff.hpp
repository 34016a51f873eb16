#pragma once
// What acting pays (MODEL.md, section 3): the share payoff  b_i S_i - c_i - (theta + nu_i).
#include "numerics/strict.hpp"

#include <vector>

#include "community/parameters.hpp"
#include "information/knowledge.hpp"

namespace folkmote {

/// The parameters of the share payoff as the caller set them. Member columns override benefit and cost.
struct Payoff {
  Spread benefit{1.0};
  Spread cost{0.0};
  Spread reach{0.0};  // mix: 0 community, 1 contacts

  Spread& of(Parameter parameter);
};

/// Throws BadArgument where a parameter has the wrong length for the study.
void check_payoff(const Study& study, const Payoff& payoff);

/// S_i = sum of weight w_ij over the members j != i that act; the weights sum to 1 (to 1 - mix for a member who
/// hears nobody). Entries stand in increasing order of member.
struct ReachRow {
  std::vector<int> member;
  std::vector<double> weight;
};

/// One community's payoff, resolved.
struct Stakes {
  std::vector<double> benefit;  // b_i
  std::vector<double> cost;     // c_i, shifts included
  std::vector<double> weight;   // omega_i
  double mix = 0.0;
};

Stakes make_stakes(const Study& study, const Payoff& payoff, int community);

ReachRow reach_of(const Stakes& stakes, const Knowledge& knowledge, int member);

}  // namespace folkmote
