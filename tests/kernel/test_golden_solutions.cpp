// Solved communities, their turnout, plays and counterfactuals have the golden bits, whatever compiled them and however
// many threads ran. To approve a change on purpose, run the test program with FOLKMOTE_APPROVE=1: it prints the
// difference and rewrites golden_solutions.txt.
#include "numerics/strict.hpp"

#include <catch2/catch.hpp>
#include <cstdlib>
#include <fstream>
#include <iostream>
#include <map>
#include <span>

#include "counterfactual/prospective.hpp"
#include "random/digest.hpp"
#include "reference_table.hpp"
#include "small_studies.hpp"
#include "turnout/sensitivity_tables.hpp"
#include "turnout/tables.hpp"

using namespace folkmote;

namespace {

std::string hex(std::uint64_t value) {
  char text[17];
  std::snprintf(text, sizeof text, "%016llx", static_cast<unsigned long long>(value));
  return text;
}

std::map<std::string, std::string> digests_now(int threads) {
  Digest cutoffs, verdicts, turnout, plays, counterfactuals, derivatives;
  const std::vector<Sensitive> levers{Sensitive::prior_precision, Sensitive::signal_precision,
                                      Sensitive::relay_precision, Sensitive::stake_sd, Sensitive::broadcast_precision};
  const Execution execution{threads, {}};
  for (std::uint64_t seed = 0; seed < 200; ++seed) {
    const studies::Mixed made = studies::mixed(seed, seed % 4 == 0 ? 0.1 : 1.0);
    const Solution solution = solve(made.study, made.beliefs, made.payoff, {}, execution);
    cutoffs.add(std::span<const double>(solution.enclosures[0].least));
    cutoffs.add(std::span<const double>(solution.enclosures[0].greatest));
    verdicts.add(static_cast<int>(solution.enclosures[0].verdict)).add(solution.enclosures[0].contraction_bound);
    if (seed % 10 != 0) continue;
    const double given[] = {0.2, 0.6}, at_least[] = {0.5};
    turnout.add(turnout_table(solution, given, at_least, execution).digest());
    plays.add(action_table(solution, {3, 20, seed, {}}, execution).digest());
    derivatives.add(member_sensitivity_table(solution, levers, execution).digest());
    derivatives.add(link_sensitivity_table(solution, execution).digest());
    Scenario scenario(made.study);
    scenario.thin_links(0.2, seed);
    scenario.broadcast(nullptr, 2.0);
    scenario.forward_reports(2);
    counterfactuals.add(counterfactual_table(solution, scenario, {0, 40, seed, {}}, {}, execution).digest());
  }
  // Communities large enough for the turnout curve: with and without private stakes, and with mixed reach.
  Digest large;
  for (const double sigma : {0.0, 0.2}) {
    drawn::Numbers numbers(9);
    Payoff payoff;
    payoff.reach = {sigma > 0.0 ? 0.3 : 0.0};
    const auto study = studies::one_community(700, studies::preferential(700, 3, numbers), true);
    const Solution solution = solve(study, studies::beliefs(0.4, 1.0, 2.0, sigma), payoff, {}, execution);
    large.add(std::span<const double>(solution.enclosures[0].least)).add(solution.enclosures[0].contraction_bound);
  }
  // Large enough for derivatives by the grid.
  drawn::Numbers numbers(11);
  const auto study = studies::one_community(2100, studies::preferential(2100, 3, numbers), true);
  const Solution solution = solve(study, studies::beliefs(0.4, 1.0, 2.0, 0.2), {}, {}, execution);
  derivatives.add(member_sensitivity_table(solution, levers, execution).digest());
  return {{"derivatives", hex(derivatives.value())},
          {"cutoffs", hex(cutoffs.value())},
          {"large", hex(large.value())},
          {"verdicts", hex(verdicts.value())},
          {"turnout", hex(turnout.value())},
          {"plays", hex(plays.value())},
          {"counterfactuals", hex(counterfactuals.value())}};
}

std::map<std::string, std::string> digests_kept() {
  std::ifstream file(reference::path_of("golden_solutions.txt"));
  std::map<std::string, std::string> kept;
  for (std::string name, digest; file >> name >> digest;) kept[name] = digest;
  return kept;
}

}  // namespace

TEST_CASE("solutions, plays and counterfactuals have the golden bits", "[golden]") {
  const auto now = digests_now(1);
  if (std::getenv("FOLKMOTE_APPROVE") != nullptr) {
    const auto kept = digests_kept();
    std::ofstream file(reference::path_of("golden_solutions.txt"));
    for (const auto& [name, digest] : now) {
      const auto old = kept.find(name);
      if (old == kept.end() || old->second != digest) std::cout << "approved: " << name << " is now " << digest << '\n';
      file << name << ' ' << digest << '\n';
    }
  }
  CHECK(digests_kept() == now);
  for (int threads : {2, 3, 8}) CHECK(digests_now(threads) == now);
}
