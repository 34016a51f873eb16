#include "payoff/payoff.hpp"

#include <cmath>

#include "community/columns.hpp"
#include "community/fault.hpp"
#include "numerics/sums.hpp"

namespace folkmote {

Spread& Payoff::of(Parameter parameter) {
  switch (parameter) {
    case Parameter::benefit:
      return benefit;
    case Parameter::cost:
      return cost;
    case Parameter::reach:
      return reach;
    default:
      throw BadArgument("this parameter belongs to beliefs, not to the payoff.");
  }
}

void check_payoff(const Study& study, const Payoff& payoff) {
  check_length(parameter_rule(static_cast<int>(Parameter::benefit)), payoff.benefit, study);
  check_length(parameter_rule(static_cast<int>(Parameter::cost)), payoff.cost, study);
  check_length(parameter_rule(static_cast<int>(Parameter::reach)), payoff.reach, study);
}

namespace {

double shifted_benefit(const Study& study, int community, int member, double benefit) {
  const std::vector<double>& shift = study.communities[community].values.benefit_shift;
  if (shift.empty()) return benefit;
  const double shifted = benefit + shift[member];
  if (shifted >= 0.0 && std::isfinite(shifted)) return shifted;
  throw BadArgument("shift_benefit leaves a member of community '" + study.roster->community_names[community] +
                    "' a benefit of " + plain_number(shifted) +
                    "; it must be at least 0 and finite, so shift by less.");
}

}  // namespace

Stakes make_stakes(const Study& study, const Payoff& payoff, int community) {
  const MemberValues& values = study.communities[community].values;
  Stakes stakes;
  stakes.weight = values.weight;
  stakes.mix = payoff.reach[0];
  for (int i = 0; i < study.communities[community].size; ++i) {
    const double benefit =
        std::isnan(values.benefit[i]) ? value_for(payoff.benefit, study, community, i) : values.benefit[i];
    const double cost = std::isnan(values.cost[i]) ? value_for(payoff.cost, study, community, i) : values.cost[i];
    stakes.benefit.push_back(shifted_benefit(study, community, i, benefit));
    stakes.cost.push_back(cost + values.cost_shift[i]);
  }
  return stakes;
}

namespace {

/// Weights in proportion to omega_j over the given members.
std::vector<double> proportional(const std::vector<int>& members, const std::vector<double>& omega) {
  std::vector<double> weights;
  weights.reserve(members.size());
  for (int j : members) weights.push_back(omega[j]);
  const double total = ordered_sum(weights);
  for (double& weight : weights) weight /= total;
  return weights;
}

}  // namespace

ReachRow reach_of(const Stakes& stakes, const Knowledge& knowledge, int member) {
  const auto first = knowledge.speaker.begin() + knowledge.start[member];
  const auto last = knowledge.speaker.begin() + knowledge.start[member + 1];
  ReachRow contacts;
  contacts.member.assign(first, last);
  contacts.weight = proportional(contacts.member, stakes.weight);
  if (stakes.mix == 1.0) return contacts;
  ReachRow all;
  for (int j = 0; j < knowledge.size; ++j) {
    if (j != member) all.member.push_back(j);
  }
  all.weight = proportional(all.member, stakes.weight);
  for (double& weight : all.weight) weight *= 1.0 - stakes.mix;
  for (std::size_t k = 0; k < contacts.member.size(); ++k) {
    const int j = contacts.member[k];
    all.weight[j < member ? j : j - 1] += stakes.mix * contacts.weight[k];
  }
  return all;
}

}  // namespace folkmote
