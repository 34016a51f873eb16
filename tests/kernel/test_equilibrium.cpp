// Cutoff equilibria against published conditions, exact limits and high-precision values.
#include <catch2/catch.hpp>
#include <cmath>
#include <map>

#include "numerics/roots.hpp"
#include "reference_table.hpp"
#include "small_studies.hpp"

using namespace folkmote;

namespace {

// gamma = alpha^2 (alpha + beta) / (beta (alpha + 2 beta)), Morris & Shin (2003).
double morris_shin_gamma(double alpha, double beta) {
  return alpha * alpha * (alpha + beta) / (beta * (alpha + 2 * beta));
}

Enclosure equal_members(double mu, double alpha, double beta, int size = 2, const SolveRule& rule = {}) {
  return studies::solved(studies::one_community(size), studies::beliefs(mu, alpha, beta), {}, rule).enclosures[0];
}

}  // namespace

TEST_CASE("no links, equal members: Morris & Shin's cutoff, both ends", "[equilibrium]") {
  // kappa = Phi(sqrt(gamma)(kappa - mu)), Morris & Shin (2003), sec. 3; roots by 160-digit bisection
  // (gg_investment_cutoffs.csv). With theta an obstacle instead of a benefit the equation is the same.
  const reference::Table table("gg_investment_cutoffs.csv");
  std::map<std::vector<double>, std::vector<double>> roots;
  for (std::size_t r = 0; r < table.size(); ++r) {
    roots[{table.number(r, "mu"), table.number(r, "alpha"), table.number(r, "beta")}].push_back(
        table.number(r, "kappa_posterior_cutoff"));
  }
  REQUIRE(roots.size() == 15);
  for (const auto& [key, all] : roots) {
    const double gamma = morris_shin_gamma(key[1], key[2]);
    const double critical = gamma / 6.283185307179586;
    CAPTURE(key[0], key[1], key[2], gamma);
    // Within 1e-4 of the critical point a root moves by far more than the rounding of its equation.
    const bool near_critical = std::fabs(critical - 1.0) < 1e-4;
    const SolveRule rule{near_critical ? 1e-8 : 1e-10, 40000000};
    const Enclosure found = equal_members(key[0], key[1], key[2], 2, rule);
    const double bar = near_critical ? 1e-7 : 1e-10;
    CHECK(std::fabs(found.least[0] - *std::min_element(all.begin(), all.end())) < bar);
    CHECK(std::fabs(found.greatest[0] - *std::max_element(all.begin(), all.end())) < bar);
    // The sup-norm bound is sqrt(gamma / 2 pi) here, so that it decides exactly when Morris & Shin's condition does.
    if (critical < 1.0) CHECK(std::fabs(found.contraction_bound - std::sqrt(critical)) < 1e-9);
    // Beyond it a single root is proved single by the bound on the enclosure.
    CHECK(found.verdict == (all.size() > 1 ? Verdict::several : Verdict::proved_unique));
    CHECK((found.contraction_bound < 1.0) == (all.size() == 1));
  }
}

TEST_CASE("the verdict changes where gamma crosses 2 pi at mu = 1/2", "[equilibrium]") {
  // beta = 1: alpha solves gamma(alpha, 1) = 2 pi (1 -+ 1e-6), from gg_investment_cutoffs.csv.
  const SolveRule rule{1e-8, 40000000};
  CHECK(equal_members(0.5, 2.8159766482620667, 1.0, 2, rule).verdict == Verdict::proved_unique);
  CHECK(equal_members(0.5, 2.8159792638490835, 1.0, 2, rule).verdict == Verdict::several);
  // The same for a larger community, a little further from the boundary.
  CHECK(equal_members(0.5, 2.81, 1.0, 40).verdict == Verdict::proved_unique);
  CHECK(equal_members(0.5, 2.83, 1.0, 40).verdict == Verdict::several);
}

TEST_CASE("precise own signals: the cutoff tends to the Laplacian 1/2", "[equilibrium]") {
  // Morris & Shin (2003), sec. 2; rate alpha (1/2 - mu) / (2 sqrt(pi beta)) (checks, 4e).
  for (double mu : {-1.0, 0.2, 0.9}) {
    for (double beta : {1e6, 1e8}) {
      const Enclosure found = equal_members(mu, 1.0, beta, 5);
      const double rate = (0.5 - mu) / (2 * std::sqrt(3.141592653589793 * beta));
      CAPTURE(mu, beta);
      CHECK(found.verdict == Verdict::proved_unique);
      CHECK(std::fabs(found.greatest[0] - 0.5) < 1e-3);
      CHECK(std::fabs((found.greatest[0] - 0.5) / rate - 1.0) < 2e-3);
    }
  }
}

TEST_CASE("two members of unequal precision", "[equilibrium]") {
  // Carlsson & van Damme (1993) set-up, normal prior (gg_two_player_asymmetric.csv, two methods agree to 1e-22).
  const reference::Table table("gg_two_player_asymmetric.csv");
  for (std::size_t r = 0; r < table.size(); ++r) {
    Beliefs beliefs = studies::beliefs(table.number(r, "mu"), table.number(r, "alpha"), 1.0);
    beliefs.signal_precision = {table.number(r, "beta1"), table.number(r, "beta2")};
    const Enclosure found = studies::solved(studies::one_community(2), beliefs).enclosures[0];
    CAPTURE(r);
    for (const auto& end : {found.least, found.greatest}) {
      CHECK(std::fabs(end[0] - table.number(r, "kappa1")) < 1e-10);
      CHECK(std::fabs(end[1] - table.number(r, "kappa2")) < 1e-10);
    }
  }
}

TEST_CASE("everyone hears everyone exactly and has no stake of its own: several", "[equilibrium]") {
  const Enclosure found =
      studies::solved(studies::one_community(6, studies::complete(6)), studies::beliefs(0.4, 1.0, 4.0)).enclosures[0];
  CHECK(found.verdict == Verdict::several);
  // All act up to theta-estimate b - c = 1, or up to -c = 0.
  for (int i = 0; i < 6; ++i) {
    CHECK(found.least[i] == 0.0);
    CHECK(found.greatest[i] == 1.0);
  }
  CHECK(std::isinf(found.contraction_bound));
}

TEST_CASE("no benefit: acting is a single decision and the cutoff is minus the cost", "[equilibrium]") {
  Payoff payoff;
  payoff.benefit = {0.0};
  payoff.cost = {0.3};
  const Enclosure found =
      studies::solved(studies::one_community(4, {{0, 1}, {2, 3}}, true), studies::beliefs(0.4, 1.0, 4.0, 0.2), payoff)
          .enclosures[0];
  CHECK(found.verdict == Verdict::proved_unique);
  for (int i = 0; i < 4; ++i) CHECK(found.greatest[i] == -0.3);
}

TEST_CASE("both ends are equilibria and enclose what best replies from anywhere reach", "[equilibrium]") {
  int several = 0;
  for (std::uint64_t seed = 0; seed < 60; ++seed) {
    // A precise prior and small stakes make several equilibria.
    studies::Mixed made = studies::mixed(seed, seed % 3 == 0 ? 0.05 : 1.0);
    if (seed % 3 == 0) made.beliefs.prior_precision = {200.0};
    const Enclosure found = studies::solved(made.study, made.beliefs, made.payoff).enclosures[0];
    CAPTURE(seed);
    REQUIRE(found.verdict != Verdict::not_converged);
    several += found.verdict == Verdict::several;
    const Knowledge knowledge = make_knowledge(*made.study, made.beliefs, 0);
    const SharedInformation shared(knowledge);
    BestReply game(knowledge, shared, make_stakes(*made.study, made.payoff, 0));
    for (const auto& end : {found.least, found.greatest}) {
      for (int i = 0; i < game.size(); ++i) CHECK(std::fabs(game.gain(i, end[i], end)) < 1e-8);
    }
    drawn::Numbers numbers(seed + 1000);
    std::vector<double> cutoffs(game.size());
    for (double& cutoff : cutoffs) cutoff = numbers.between(-2.0, 2.0);
    for (int sweep = 0; sweep < 3000; ++sweep) {
      for (int i = 0; i < game.size(); ++i) {
        cutoffs[i] = decreasing_root([&](double t) { return game.gain(i, t, cutoffs); }, game.lowest(i) - 1e-9,
                                     game.highest(i) + 1e-9, 1e-13);
      }
    }
    for (int i = 0; i < game.size(); ++i) {
      CHECK(cutoffs[i] >= found.least[i] - 1e-9);
      CHECK(cutoffs[i] <= found.greatest[i] + 1e-9);
    }
    if (found.contraction_bound < 1.0) CHECK(found.verdict == Verdict::proved_unique);
  }
  CHECK(several > 0);
}

TEST_CASE("a capped run says that it has not converged, and how wide it stands", "[equilibrium]") {
  const Enclosure found = equal_members(0.5, 2.0, 1.0, 2, {1e-12, 3});
  CHECK(found.verdict == Verdict::not_converged);
  CHECK(found.iterations == 3);
  CHECK(found.width > 1e-12);
  CHECK(found.least[0] < 0.5);
  CHECK(found.greatest[0] > 0.5);
}

TEST_CASE("a result does not depend on the number of threads", "[equilibrium]") {
  Table members(90);
  std::vector<std::int64_t> community(90), id(90);
  for (int i = 0; i < 90; ++i) {
    community[i] = i % 9;
    id[i] = i;
  }
  members.add("community", community);
  members.add("member", id);
  const auto study = std::make_shared<const Study>(make_study({members}));
  const Beliefs beliefs = studies::beliefs(0.3, 1.0, 2.0, 0.1);
  const Solution one = solve(study, beliefs, {}, {}, {1, {}});
  const Solution three = solve(study, beliefs, {}, {}, {3, {}});
  for (std::size_t c = 0; c < one.enclosures.size(); ++c) {
    CHECK(one.enclosures[c].least == three.enclosures[c].least);
    CHECK(one.enclosures[c].greatest == three.enclosures[c].greatest);
  }
}
