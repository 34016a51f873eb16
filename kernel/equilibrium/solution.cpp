#include "equilibrium/solution.hpp"

#include <span>

#include "random/digest.hpp"

namespace folkmote {

std::uint64_t Solution::digest() const {
  Digest digest;
  digest.add(study->digest());
  for (const Spread* values :
       {&beliefs.prior_mean, &beliefs.prior_precision, &beliefs.signal_precision, &beliefs.relay_precision,
        &beliefs.stake_sd, &payoff.benefit, &payoff.cost, &payoff.reach}) {
    digest.add(std::span<const double>(*values));
  }
  return digest.add(rule.tolerance).add(rule.sweeps).value();
}

Solution solve(std::shared_ptr<const Study> study, const Beliefs& beliefs, const Payoff& payoff, const SolveRule& rule,
               const Execution& execution) {
  check_beliefs(*study, beliefs);
  check_payoff(*study, payoff);
  Solution solution{std::move(study), beliefs, payoff, rule, {}};
  const Study& data = *solution.study;
  solution.enclosures.resize(data.communities.size());
  run_tasks(static_cast<std::int64_t>(data.communities.size()), execution, [&](std::int64_t c, const StopFlag& stop) {
    const int community = static_cast<int>(c);
    const Knowledge knowledge = make_knowledge(data, beliefs, community);
    const SharedInformation shared(knowledge);
    BestReply game(knowledge, shared, make_stakes(data, payoff, community));
    solution.enclosures[c] = enclose(game, rule, stop);
  });
  return solution;
}

}  // namespace folkmote
