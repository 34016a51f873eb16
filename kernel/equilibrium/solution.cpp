#include "equilibrium/solution.hpp"

#include <span>

#include "equilibrium/large.hpp"
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

namespace {

Enclosure solve_dense(const Knowledge& knowledge, const Stakes& stakes, const SolveRule& rule, const StopFlag& stop) {
  const SharedInformation shared(knowledge);
  BestReply game(knowledge, shared, stakes);
  return enclose(game, rule, stop);
}

/// By the turnout curve where that serves.
Enclosure solve_large(const Knowledge& knowledge, const Stakes& stakes, const SolveRule& rule,
                      const Execution& execution) {
  Enclosure found;
  if (auto game = curve_game(knowledge, stakes, execution)) return enclose_large(*game, rule, execution);
  run_tasks(1, execution,
            [&](std::int64_t, const StopFlag& stop) { found = solve_dense(knowledge, stakes, rule, stop); });
  return found;
}

}  // namespace

Solution solve(std::shared_ptr<const Study> study, const Beliefs& beliefs, const Payoff& payoff, const SolveRule& rule,
               const Execution& execution) {
  check_beliefs(*study, beliefs);
  check_payoff(*study, payoff);
  Solution solution{std::move(study), beliefs, payoff, rule, {}};
  const Study& data = *solution.study;
  solution.enclosures.resize(data.communities.size());
  std::vector<int> small, large;
  for (std::size_t c = 0; c < data.communities.size(); ++c) {
    (is_large(data.communities[c].size) ? large : small).push_back(static_cast<int>(c));
  }
  // Small communities side by side, then large ones one after the other, each split over the workers. Progress counts
  // communities throughout.
  const auto all = static_cast<std::int64_t>(data.communities.size());
  std::int64_t before = 0;
  const auto counting = [&](bool each) {
    Execution part{execution.threads, {}};
    if (execution.progress) {
      part.progress = [&, each](std::int64_t done, std::int64_t) {
        return execution.progress(before + (each ? done : 0), all);
      };
    }
    return part;
  };
  run_tasks(static_cast<std::int64_t>(small.size()), counting(true), [&](std::int64_t k, const StopFlag& stop) {
    solution.enclosures[small[k]] =
        solve_dense(make_knowledge(data, beliefs, small[k]), make_stakes(data, payoff, small[k]), rule, stop);
  });
  before = static_cast<std::int64_t>(small.size());
  for (int c : large) {
    solution.enclosures[c] =
        solve_large(make_knowledge(data, beliefs, c), make_stakes(data, payoff, c), rule, counting(false));
    ++before;
  }
  return solution;
}

}  // namespace folkmote
