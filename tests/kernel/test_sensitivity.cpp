// Derivatives by the implicit function theorem against central differences of the slow game, closed forms and limits.
#include <catch2/catch.hpp>
#include <cmath>
#include <functional>
#include <map>

#include "equilibrium/dense_slopes.hpp"
#include "equilibrium/wide_slopes.hpp"
#include "slow_game.hpp"
#include "small_studies.hpp"
#include "turnout/sensitivity_tables.hpp"
#include "turnout/tables.hpp"

using namespace folkmote;

namespace {

const std::vector<Sensitive> all{Sensitive::prior_mean,
                                 Sensitive::prior_precision,
                                 Sensitive::signal_precision,
                                 Sensitive::relay_precision,
                                 Sensitive::stake_sd,
                                 Sensitive::benefit,
                                 Sensitive::cost,
                                 Sensitive::broadcast_precision};

const std::vector<double>& reals(const Table& table, const std::string& column) {
  return std::get<std::vector<double>>(table.find(column)->values);
}
const std::vector<std::int64_t>& integers(const Table& table, const std::string& column) {
  return std::get<std::vector<std::int64_t>>(table.find(column)->values);
}
const std::vector<Text>& texts(const Table& table, const std::string& column) {
  return std::get<std::vector<Text>>(table.find(column)->values);
}

/// Moves one parameter of everybody (member -1), or of one member, by `by`.
slow::Game moved(slow::Game game, const std::string& parameter, std::int64_t broadcast, int member, double by) {
  if (parameter == "prior_mean") game.mu += by;
  if (parameter == "prior_precision") game.alpha += by;
  if (parameter == "broadcast_precision") game.broadcasts[broadcast - 1].precision += by;
  for (int i = 0; i < game.size(); ++i) {
    if (member >= 0 && i != member) continue;
    if (parameter == "signal_precision") game.beta[i] += by;
    if (parameter == "stake_sd") game.sigma[i] += by;
    if (parameter == "benefit") game.benefit[i] += by;
    if (parameter == "cost") game.cost[i] += by;
    for (int k = 0; k < game.size(); ++k) {
      if (parameter == "relay_precision" && game.relay[i][k] > 0.0) game.relay[i][k] += by;
    }
  }
  return game;
}

/// Signals may be 0 in everybody's or the member's row, and cannot go below.
int side_of(const slow::Game& game, const std::string& parameter, int member) {
  if (parameter != "signal_precision") return 0;
  for (int i = 0; i < game.size(); ++i) {
    if ((member < 0 || i == member) && game.beta[i] == 0.0) return +1;
  }
  return 0;
}

/// Differences are taken of equilibria known to about 1e-14 with steps of 2e-3: 1e-10 at best; 1e-6 is the promise.
void agree(double found, double expected) {
  CAPTURE(found, expected);
  CHECK(std::fabs(found - expected) < 1e-6 * std::max(1.0, std::fabs(expected)));
}

/// Small against what moves: stakes come down to 0.015, and where a signal begins everything bends.
double step_of(const slow::Game& game, const std::string& parameter, int side) {
  if (side != 0) return 1e-4;
  if (parameter != "stake_sd") return 1e-3;
  return 1e-2 * *std::min_element(game.sigma.begin(), game.sigma.end());
}

struct Ends {
  std::string name;
  std::vector<double> cutoffs;
};

}  // namespace

TEST_CASE("random mixed communities: every derivative agrees with central differences", "[sensitivity]") {
  int several = 0, compared = 0;
  for (std::uint64_t seed = 0; seed < 60; ++seed) {
    studies::Mixed made = studies::mixed(seed, seed % 4 == 0 ? 0.3 : 1.0);
    if (seed % 4 == 0) made.beliefs.prior_precision = {60.0};
    const Solution solution = studies::solved(made.study, made.beliefs, made.payoff);
    const Enclosure& enclosure = solution.enclosures[0];
    several += enclosure.verdict == Verdict::several;
    const Table community = sensitivity_table(solution, all, {});
    const Table members = member_sensitivity_table(solution, all, {});
    const Table links = link_sensitivity_table(solution, {});
    const slow::Game game =
        slow::of(make_knowledge(*made.study, made.beliefs, 0), make_stakes(*made.study, made.payoff, 0));
    const int n = game.size();
    drawn::Numbers numbers(seed + 500);
    for (const Ends& end : {Ends{"least", enclosure.least}, Ends{"greatest", enclosure.greatest}}) {
      CAPTURE(seed, n, end.name);
      if (texts(community, "status_" + end.name)[0] != "solved") continue;
      for (std::size_t row = 0; row < community.rows(); ++row) {
        const std::string parameter = *texts(community, "parameter")[row];
        const std::int64_t broadcast = integers(community, "broadcast")[row];
        CAPTURE(parameter, broadcast);
        const auto answer = [&](double by) {
          return slow::solve(moved(game, parameter, broadcast, -1, by), end.cutoffs);
        };
        const int side = side_of(game, parameter, -1);
        const double step = step_of(game, parameter, side);
        agree(reals(community, "turnout_" + end.name)[row],
              slow::derivative([&](double by) { return answer(by).turnout; }, step, side));
        const int i = static_cast<int>(numbers.bits() % static_cast<unsigned>(n));
        const std::size_t member_row = row * static_cast<std::size_t>(n) + static_cast<std::size_t>(i);
        REQUIRE(*texts(members, "parameter")[member_row] == parameter);
        agree(reals(members, "cutoff_" + end.name)[member_row],
              slow::derivative([&](double by) { return answer(by).cutoff[i]; }, step, side));
        agree(reals(members, "chance_" + end.name)[member_row],
              slow::derivative([&](double by) { return answer(by).chance[i]; }, step, side));
        const double own = reals(members, "turnout_own_" + end.name)[member_row];
        const bool has_own = parameter.substr(0, 5) != "prior" && parameter != "broadcast_precision";
        REQUIRE(std::isnan(own) == !has_own);
        if (!has_own) continue;
        agree(own,
              slow::derivative(
                  [&](double by) { return slow::solve(moved(game, parameter, broadcast, i, by), end.cutoffs).turnout; },
                  step_of(game, parameter, side_of(game, parameter, i)), side_of(game, parameter, i)));
        compared += 4;
      }
      for (int sample = 0; sample < 8; ++sample) {
        const std::size_t row = numbers.bits() % links.rows();
        const auto i = static_cast<int>(integers(links, "listener")[row]);
        const auto k = static_cast<int>(integers(links, "speaker")[row]);
        CAPTURE(i, k);
        const double heard = game.heard(i, k);
        CHECK(std::fabs(reals(links, "precision")[row] - heard) <= 1e-15 * heard);
        double expected = 0.0;
        if (game.beta[k] > 0.0) {
          expected = slow::derivative(
              [&](double by) {
                slow::Game other = game;
                other.report[i][k] = heard + by;
                return slow::solve(other, end.cutoffs).turnout;
              },
              1e-3 * std::min(1.0, game.beta[k]));
        }
        agree(reals(links, "turnout_" + end.name)[row], expected);
        ++compared;
      }
    }
  }
  CHECK(several > 0);
  CHECK(compared > 500);
}

TEST_CASE("the members' own derivatives add up to the community's", "[sensitivity]") {
  for (std::uint64_t seed = 100; seed < 130; ++seed) {
    const studies::Mixed made = studies::mixed(seed);
    const Solution solution = studies::solved(made.study, made.beliefs, made.payoff);
    const Table community = sensitivity_table(solution, all, {});
    const Table members = member_sensitivity_table(solution, all, {});
    const std::vector<double>& weight = made.study->communities[0].values.weight;
    const std::size_t n = weight.size();
    double total = 0.0;
    for (double w : weight) total += w;
    for (std::size_t row = 0; row < community.rows(); ++row) {
      double own = 0.0, chance = 0.0;
      for (std::size_t i = 0; i < n; ++i) {
        own += reals(members, "turnout_own_greatest")[row * n + i];
        chance += weight[i] / total * reals(members, "chance_greatest")[row * n + i];
      }
      const double expected = reals(community, "turnout_greatest")[row];
      CAPTURE(seed, *texts(community, "parameter")[row]);
      // Backward by one transposed solve, forward by one solve each: two ways to the same number.
      CHECK(std::fabs(chance - expected) < 1e-9 * std::max(1.0, std::fabs(expected)));
      if (!std::isnan(own)) CHECK(std::fabs(own - expected) < 1e-9 * std::max(1.0, std::fabs(expected)));
    }
  }
}

TEST_CASE("no links, equal members: the derivative of Morris & Shin's cutoff", "[sensitivity]") {
  // kappa = Phi(sqrt(gamma)(kappa - mu)) with gamma = alpha^2 (alpha + beta) / (beta (alpha + 2 beta)) (Morris & Shin
  // 2003, sec. 3), differentiated by hand: dkappa/dmu = -g phi / (1 - g phi), g = sqrt(gamma); with a cost c,
  // kappa + c = Phi(...), dkappa/dc = -1 / (1 - g phi).
  for (const auto& [mu, alpha, beta] :
       {std::tuple{0.2, 1.0, 1.0}, std::tuple{0.7, 2.0, 1.5}, std::tuple{0.45, 0.5, 8.0}}) {
    const Solution solution = studies::solved(studies::one_community(5), studies::beliefs(mu, alpha, beta));
    const Table members = member_sensitivity_table(solution, std::vector{Sensitive::prior_mean, Sensitive::cost}, {});
    const double g = std::sqrt(alpha * alpha * (alpha + beta) / (beta * (alpha + 2 * beta)));
    const double kappa = solution.enclosures[0].greatest[0];
    const double pull = g * normal_density(g * (kappa - mu));
    for (int i = 0; i < 5; ++i) {
      CHECK(std::fabs(reals(members, "cutoff_greatest")[i] + pull / (1.0 - pull)) < 1e-9);
      CHECK(std::fabs(reals(members, "cutoff_least")[5 + i] + 1.0 / (1.0 - pull)) < 1e-9);
    }
  }
}

TEST_CASE("forwarded reports: a common rise of all relay precisions", "[sensitivity]") {
  std::vector<studies::Link> path;
  for (int i = 1; i < 8; ++i) path.emplace_back(i, i - 1);
  Scenario scenario(studies::one_community(8, path, true));
  scenario.forward_reports(3);
  Beliefs beliefs = studies::beliefs(0.3, 1.0, 2.0, 0.2);
  const auto at = [&](double relay) {
    beliefs.relay_precision = {relay};
    return studies::solved(std::make_shared<const Study>(scenario.edited()), beliefs, {}, {1e-13, 100000});
  };
  const auto turnout = [&](double by) { return reals(community_table(at(3.0 + by)), "turnout_greatest")[0]; };
  const Table found = sensitivity_table(at(3.0), std::vector{Sensitive::relay_precision}, {});
  const double expected = slow::derivative(turnout, 1e-2);
  CHECK(std::fabs(expected) > 1e-4);
  CHECK(std::fabs(reals(found, "turnout_greatest")[0] - expected) < 1e-8);
}

TEST_CASE("where there is no derivative the status says why, and there is no number", "[sensitivity]") {
  const auto status = [](const Solution& solution) {
    const Table table = sensitivity_table(solution, std::vector{Sensitive::cost}, {});
    const Table links = link_sensitivity_table(solution, {});
    const bool solved = *texts(table, "status_greatest")[0] == "solved";
    CHECK(std::isnan(reals(table, "turnout_greatest")[0]) == !solved);
    CHECK(std::isnan(reals(links, "turnout_greatest")[0]) == !solved);
    CHECK(texts(links, "status_greatest")[0] == texts(table, "status_greatest")[0]);
    return *texts(table, "status_greatest")[0];
  };
  const auto equal = [](double alpha, const SolveRule& rule) {
    return studies::solved(studies::one_community(4), studies::beliefs(0.5, alpha, 1.0), {}, rule);
  };
  // Morris & Shin's boundary: alpha solves gamma(alpha, 1) = 2 pi (1 - 1e-6), from gg_investment_cutoffs.csv. There the
  // amplification is 2e6.
  CHECK(status(equal(2.8159766482620667, {1e-8, 40000000})) == "near a tangency");
  CHECK(status(equal(2.7, {})) == "solved");
  CHECK(status(equal(0.5, {1e-12, 2})) == "not converged");
  CHECK(status(studies::solved(studies::one_community(4, studies::complete(4)), studies::beliefs(0.4, 1.0, 4.0))) ==
        "a gain jumps");
}

TEST_CASE("both ends have their own derivatives where there are several equilibria", "[sensitivity]") {
  const Solution solution = studies::solved(studies::one_community(6), studies::beliefs(0.55, 6.0, 1.0));
  REQUIRE(solution.enclosures[0].verdict == Verdict::several);
  const Table table = sensitivity_table(solution, std::vector{Sensitive::cost}, {});
  const slow::Game game =
      slow::of(make_knowledge(*solution.study, solution.beliefs, 0), make_stakes(*solution.study, solution.payoff, 0));
  for (const Ends& end :
       {Ends{"least", solution.enclosures[0].least}, Ends{"greatest", solution.enclosures[0].greatest}}) {
    agree(reals(table, "turnout_" + end.name)[0],
          slow::derivative([&](double by) { return slow::solve(moved(game, "cost", 0, -1, by), end.cutoffs).turnout; },
                           1e-3));
  }
  CHECK(reals(table, "turnout_least")[0] != reals(table, "turnout_greatest")[0]);
}

TEST_CASE("a large community: whole solutions apart, and candidate links refused with their number", "[sensitivity]") {
  drawn::Numbers numbers(9);
  const auto study = studies::one_community(2500, studies::preferential(2500, 3, numbers), true);
  const auto at = [&](double cost, double alpha, double beta) {
    Payoff payoff;
    payoff.cost = {cost};
    return studies::solved(study, studies::beliefs(0.3, alpha, beta, 0.2), payoff, {1e-11, 100000});
  };
  const Solution solution = at(0.1, 1.0, 2.0);
  const Table table = sensitivity_table(
      solution, std::vector{Sensitive::cost, Sensitive::prior_precision, Sensitive::signal_precision}, {});
  REQUIRE(*texts(table, "status_least")[0] == "solved");
  const auto turnout = [&](double cost, double alpha, double beta) {
    return reals(community_table(at(cost, alpha, beta)), "turnout_greatest")[0];
  };
  const std::vector<double>& found = reals(table, "turnout_greatest");
  CHECK(std::fabs(found[0] - slow::derivative([&](double h) { return turnout(0.1 + h, 1.0, 2.0); }, 1e-2)) < 1e-6);
  CHECK(std::fabs(found[1] - slow::derivative([&](double h) { return turnout(0.1, 1.0 + h, 2.0); }, 1e-2)) < 1e-6);
  CHECK(std::fabs(found[2] - slow::derivative([&](double h) { return turnout(0.1, 1.0, 2.0 + h); }, 1e-2)) < 1e-6);
  CHECK_THROWS_WITH(link_sensitivity_table(solution, {}), Catch::Contains("2500") && Catch::Contains("2000"));
}

TEST_CASE("more pairs than can be held are refused", "[sensitivity]") {
  std::vector<int> everybody(7100);
  for (int i = 0; i < 7100; ++i) everybody[i] = i;
  Table broadcasts = studies::group_table("broadcast", {everybody});
  broadcasts.add("precision", std::vector<double>(7100, 1.0));
  const Table members = studies::member_table(7100);
  const auto study =
      std::make_shared<const Study>(make_study({members, nullptr, &broadcasts, nullptr, nullptr, false}));
  const Table table =
      sensitivity_table(studies::solved(study, studies::beliefs(0.3, 1.0, 1.0, 0.5)), std::vector{Sensitive::cost}, {});
  CHECK(*texts(table, "status_least")[0] == "too many pairs");
  CHECK(std::isnan(reals(table, "turnout_least")[0]));
}

TEST_CASE("derivatives do not depend on the number of threads", "[sensitivity]") {
  const studies::Mixed made = studies::mixed(3);
  const Solution solution = studies::solved(made.study, made.beliefs, made.payoff);
  CHECK(sensitivity_table(solution, all, {1, {}}).digest() == sensitivity_table(solution, all, {3, {}}).digest());
  CHECK(link_sensitivity_table(solution, {1, {}}).digest() == link_sensitivity_table(solution, {3, {}}).digest());
}

namespace {

/// Every derivative of one end by both ways of counting; the largest difference, relative where above 1.
double largest_difference(EndSensitivity& one, EndSensitivity& other, const Community& community) {
  REQUIRE(one.status() == other.status());
  if (one.status() != EndStatus::solved) return 0.0;
  double largest = 0.0;
  const auto compare = [&](double a, double b) {
    largest = std::max(largest, std::fabs(a - b) / std::max(1.0, std::fabs(a)));
  };
  const TurnoutGradient dense = one.turnout_gradient(), wide = other.turnout_gradient();
  for (Sensitive parameter : all) {
    const bool of_broadcasts = parameter == Sensitive::broadcast_precision;
    for (int q = 0; q < (of_broadcasts ? static_cast<int>(community.broadcasts.size()) : 1); ++q) {
      const CommonShift shift{parameter, of_broadcasts ? q : -1};
      compare(dense.total(shift), wide.total(shift));
      const MemberSlopes a = one.member_slopes(shift), b = other.member_slopes(shift);
      for (std::size_t i = 0; i < a.cutoff.size(); ++i) {
        compare(a.cutoff[i], b.cutoff[i]);
        compare(a.chance[i], b.chance[i]);
      }
      const auto own = dense.own(parameter), theirs = wide.own(parameter);
      REQUIRE(own.size() == theirs.size());
      for (std::size_t i = 0; i < own.size(); ++i) compare(own[i], theirs[i]);
    }
  }
  return largest;
}

double dense_against_wide(const Solution& solution) {
  const Knowledge knowledge = make_knowledge(*solution.study, solution.beliefs, 0);
  const SharedInformation shared(knowledge);
  const Stakes stakes = make_stakes(*solution.study, solution.payoff, 0);
  const InformationSlopes slopes(knowledge);
  ShareRows rows(knowledge, shared, stakes);
  double largest = 0.0;
  for (const auto& cutoffs : {solution.enclosures[0].least, solution.enclosures[0].greatest}) {
    DenseSlopes dense(knowledge, shared, slopes, rows, nullptr);
    WideSlopes wide(knowledge, slopes, stakes, nullptr);
    EndSensitivity one(knowledge, slopes, dense, stakes.weight, cutoffs, 1e-9);
    EndSensitivity other(knowledge, slopes, wide, stakes.weight, cutoffs, 1e-9);
    largest = std::max(largest, largest_difference(one, other, solution.study->communities[0]));
  }
  return largest;
}

}  // namespace

TEST_CASE("by the grid of theta as over all pairs", "[sensitivity]") {
  for (std::uint64_t seed = 200; seed < 240; ++seed) {
    studies::Mixed made = studies::mixed(seed, seed % 2 == 0 ? 0.3 : 1.0);
    CAPTURE(seed);
    CHECK(dense_against_wide(studies::solved(made.study, made.beliefs, made.payoff)) < 1e-9);
  }
  drawn::Numbers numbers(5);
  const auto study = studies::one_community(400, studies::preferential(400, 3, numbers), true);
  CHECK(dense_against_wide(studies::solved(study, studies::beliefs(0.4, 1.0, 2.0, 0.1))) < 1e-9);
  // Nobody has a stake of its own, and some know much more than others.
  Beliefs uneven = studies::beliefs(0.4, 1.0, 2.0);
  uneven.signal_precision.assign(400, 0.02);
  for (int i = 0; i < 400; i += 7) uneven.signal_precision[i] = 60.0;
  CHECK(dense_against_wide(studies::solved(study, uneven)) < 1e-9);
  Payoff some;
  some.benefit.assign(400, 1.0);
  for (int i = 0; i < 400; i += 5) some.benefit[i] = 0.0;
  some.reach = {0.4};
  CHECK(dense_against_wide(studies::solved(study, uneven, some)) < 1e-9);
}
