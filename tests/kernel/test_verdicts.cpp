// Verdicts on 2,000 random communities, against a search for equilibria from many starts.
#include <catch2/catch.hpp>
#include <cmath>
#include <iostream>
#include <map>

#include "equilibrium/uniqueness.hpp"
#include "numerics/roots.hpp"
#include "small_studies.hpp"

using namespace folkmote;

namespace {

/// Best replies in turn from a random start until they settle; false when they do not.
bool settle(BestReply& game, std::vector<double>& cutoffs) {
  for (int sweep = 0; sweep < 4000; ++sweep) {
    double moved = 0.0;
    for (int i = 0; i < game.size(); ++i) {
      const auto gain = [&](double t) { return game.gain(i, t, cutoffs); };
      const double next = decreasing_root(gain, game.lowest(i) - 1e-9, game.highest(i) + 1e-9, 1e-13);
      moved = std::max(moved, std::fabs(next - cutoffs[i]));
      cutoffs[i] = next;
    }
    if (moved < 1e-12) return true;
  }
  return false;
}

double apart(const std::vector<double>& a, const std::vector<double>& b) {
  double most = 0.0;
  for (std::size_t i = 0; i < a.size(); ++i) most = std::max(most, std::fabs(a[i] - b[i]));
  return most;
}

}  // namespace

TEST_CASE("2,000 random communities: a proof is never contradicted, and several are several", "[verdicts]") {
  std::map<Verdict, int> count;
  int proved_by_box = 0;
  for (std::uint64_t seed = 0; seed < 2000; ++seed) {
    studies::Mixed made = studies::mixed(seed, seed % 2 == 0 ? 1.0 : 0.1);
    if (seed % 4 == 1) made.beliefs.prior_precision = {40.0};
    if (seed % 4 == 3) made.beliefs.prior_precision = {400.0};
    const Enclosure found = studies::solved(made.study, made.beliefs, made.payoff).enclosures[0];
    ++count[found.verdict];
    CAPTURE(seed, found.contraction_bound, found.width);
    CHECK((found.verdict == Verdict::proved_unique) == (found.contraction_bound < 1.0));
    if (seed % 10 > 1) continue;
    const Knowledge knowledge = make_knowledge(*made.study, made.beliefs, 0);
    const SharedInformation shared(knowledge);
    BestReply game(knowledge, shared, make_stakes(*made.study, made.payoff, 0));
    proved_by_box += found.verdict == Verdict::proved_unique && game.contraction_bound() >= 1.0;
    drawn::Numbers numbers(seed);
    std::vector<double> first;
    for (int start = 0; start < 4; ++start) {
      std::vector<double> cutoffs(game.size());
      for (double& cutoff : cutoffs) cutoff = start == 0 ? 9.0 : start == 1 ? -9.0 : numbers.between(-2.0, 2.0);
      if (!settle(game, cutoffs)) continue;
      if (start == 0) first = cutoffs;
      CHECK(apart(cutoffs, start == 0 ? found.greatest : start == 1 ? found.least : cutoffs) < 1e-8);
      if (found.verdict == Verdict::proved_unique) CHECK(apart(cutoffs, found.greatest) < 1e-8);
    }
  }
  std::cout << "verdicts on 2,000 random communities: proved unique " << count[Verdict::proved_unique] << ", bracketed "
            << count[Verdict::bracketed] << ", several " << count[Verdict::several] << ", not converged "
            << count[Verdict::not_converged] << '\n';
  CHECK(proved_by_box > 5);
  CHECK(count[Verdict::several] > 50);
  CHECK(count[Verdict::proved_unique] > 1000);
  CHECK(count[Verdict::not_converged] == 0);
}

TEST_CASE("the bound on a box that holds two equilibria is never below 1", "[verdicts]") {
  int several = 0;
  for (std::uint64_t seed = 0; seed < 200; ++seed) {
    studies::Mixed made = studies::mixed(seed, 0.1);
    made.beliefs.prior_precision = {400.0};
    const Enclosure found = studies::solved(made.study, made.beliefs, made.payoff).enclosures[0];
    if (found.verdict != Verdict::several) continue;
    ++several;
    const Knowledge knowledge = make_knowledge(*made.study, made.beliefs, 0);
    const SharedInformation shared(knowledge);
    const BestReply game(knowledge, shared, make_stakes(*made.study, made.payoff, 0));
    CHECK(box_bound(game, found.least, found.greatest) >= 1.0);
  }
  CHECK(several > 20);
}
