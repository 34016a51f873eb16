// Scenario edits against studies made from edited tables, and counterfactuals against analytic differences.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <set>

#include "community/fault.hpp"
#include "counterfactual/prospective.hpp"
#include "small_studies.hpp"

using namespace folkmote;

namespace {

const std::vector<double>& reals(const Table& table, const char* column) {
  return std::get<std::vector<double>>(table.find(column)->values);
}

std::size_t link_count(const Study& study) { return study.communities[0].links.speaker.size(); }

}  // namespace

TEST_CASE("adding and cutting links equals starting from the edited table", "[scenario]") {
  const auto base = studies::one_community(6, {{0, 1}, {2, 3}, {3, 2}});
  Scenario scenario(base);
  scenario.add_links(studies::link_table({{4, 5}}), true);
  const Table cut = studies::link_table({{2, 3}});
  scenario.cut_links(&cut, false);
  const auto expected = studies::one_community(6, {{0, 1}, {3, 2}, {4, 5}, {5, 4}});
  CHECK(scenario.edited().digest() == expected->digest());
  scenario.cut_links(nullptr, false);
  CHECK(link_count(scenario.edited()) == 0);
  CHECK(base->digest() == studies::one_community(6, {{0, 1}, {2, 3}, {3, 2}})->digest());
}

TEST_CASE("an edit that cannot be served is refused and changes nothing", "[scenario]") {
  Scenario scenario(studies::one_community(6, {{0, 1}, {2, 3}}));
  const std::uint64_t before = scenario.digest();
  const Table absent = studies::link_table({{0, 1}, {4, 5}});
  CHECK_THROWS_AS(scenario.cut_links(&absent, false), BadData);
  CHECK_THROWS_AS(scenario.add_links(absent, false), BadData);
  CHECK_THROWS_AS(scenario.thin_links(1.5, 1), BadArgument);
  CHECK_THROWS_AS(scenario.broadcast(nullptr, 0.0), BadArgument);
  CHECK_THROWS_AS(scenario.shift_cost(nullptr, std::nan("")), BadArgument);
  CHECK_THROWS_AS(scenario.shift_benefit(nullptr, std::nan("")), BadArgument);
  CHECK_THROWS_AS(scenario.rewire_links(-0.1, 1), BadArgument);
  CHECK_THROWS_AS(scenario.forward_reports(0), BadArgument);
  CHECK_THROWS_AS(scenario.set_beliefs(Parameter::stake_sd, {0.1, 0.2}), BadArgument);
  CHECK_THROWS_AS(scenario.set_beliefs(Parameter::cost, {0.1}), BadArgument);
  CHECK(scenario.digest() == before);
}

TEST_CASE("thinning loses the nearest whole number of contacts, both directions together", "[scenario]") {
  drawn::Numbers numbers(3);
  const auto links = studies::preferential(60, 3, numbers);  // 6 + 56 * 3 = 174 contacts
  const auto base = studies::one_community(60, links, true);
  REQUIRE(link_count(*base) == 348);
  std::vector<int> lost(60, 0);
  for (std::uint64_t seed = 0; seed < 200; ++seed) {
    Scenario scenario(base);
    scenario.thin_links(0.1, seed);  // 17.4 rounds to 17
    REQUIRE(link_count(scenario.edited()) == 348 - 34);
    const Links& kept = scenario.edited().communities[0].links;
    for (int i = 0; i < 60; ++i) {
      lost[i] += static_cast<int>(base->communities[0].links.start[i + 1] - base->communities[0].links.start[i] -
                                  (kept.start[i + 1] - kept.start[i]));
    }
  }
  // Every contact is as likely to go as any other: member i loses Binomial-like 200 * degree * 17/174.
  for (int i = 0; i < 60; ++i) {
    const double degree =
        static_cast<double>(base->communities[0].links.start[i + 1] - base->communities[0].links.start[i]);
    const double expected = 200 * degree * 17 / 174;
    CHECK(std::fabs(lost[i] - expected) < 4.5 * std::sqrt(expected));
  }
  Scenario all(base), none(base);
  all.thin_links(1.0, 5);
  none.thin_links(0.0, 5);
  CHECK(link_count(all.edited()) == 0);
  CHECK(none.edited().digest() == base->digest());
}

TEST_CASE("set_beliefs overrides the parameter and any column of that name", "[scenario]") {
  drawn::Numbers numbers(1);
  const Table members = studies::mixed_members(8, 1.0, numbers);
  const auto base = std::make_shared<const Study>(make_study({members}));
  Scenario scenario(base);
  scenario.set_beliefs(Parameter::signal_precision, {2.0});
  scenario.set_beliefs(Parameter::prior_mean, {0.9});
  Beliefs given = studies::beliefs(0.1, 1.0, 1.0);
  const Beliefs beliefs = scenario.apply(given);
  const Knowledge k = make_knowledge(scenario.edited(), beliefs, 0);
  for (int i = 0; i < 8; ++i) CHECK(k.signal_precision[i] == 2.0);
  CHECK(k.prior_mean == 0.9);
  CHECK(make_knowledge(*base, given, 0).signal_precision[0] != 2.0);
}

TEST_CASE("no edit: no difference in any draw", "[counterfactual]") {
  const studies::Mixed made = studies::mixed(12);
  const Solution baseline = studies::solved(made.study, made.beliefs, made.payoff);
  const Table table = counterfactual_table(baseline, Scenario(made.study), {0, 50, 7, {}}, {}, {});
  for (const char* column : {"difference_least", "difference_greatest", "simulated_least", "simulated_greatest",
                             "standard_error_least", "spread_low", "spread_high"}) {
    for (double value : reals(table, column)) CHECK(value == 0.0);
  }
}

TEST_CASE("common random numbers: the simulated difference is the analytic one, with a small error",
          "[counterfactual]") {
  for (std::uint64_t seed = 0; seed < 12; ++seed) {
    const studies::Mixed made = studies::mixed(seed + 40);
    const Solution baseline = studies::solved(made.study, made.beliefs, made.payoff);
    Scenario scenario(made.study);
    scenario.broadcast(nullptr, 1.5);
    if (seed % 2 == 0) scenario.shift_cost(nullptr, 0.1);
    if (seed % 3 == 0) scenario.thin_links(0.3, seed);
    if (seed % 4 == 0) scenario.forward_reports(2);
    if (seed % 5 == 0) scenario.gathering(nullptr);
    const Table table = counterfactual_table(baseline, scenario, {0, 3000, seed, {}}, {}, {2, {}});
    for (int end = 0; end < 2; ++end) {
      const double analytic = reals(table, end == 0 ? "difference_least" : "difference_greatest")[1];
      const double simulated = reals(table, end == 0 ? "simulated_least" : "simulated_greatest")[1];
      const double error = reals(table, end == 0 ? "standard_error_least" : "standard_error_greatest")[1];
      CAPTURE(seed, analytic, simulated, error);
      CHECK(std::fabs(analytic - simulated) < 4 * error);
      // Independent plays would have an error near sqrt(2) sd(A) / sqrt(3000), about 0.01 here.
      CHECK(error < 0.008);
    }
    CHECK(counterfactual_table(baseline, scenario, {0, 3000, seed, {}}, {}, {1, {}}).digest() == table.digest());
  }
}

TEST_CASE("several equilibria: the whole interval goes downstream", "[counterfactual]") {
  const auto study = studies::one_community(5, studies::complete(5));
  const Solution baseline = studies::solved(study, studies::beliefs(0.4, 1.0, 4.0));
  Scenario scenario(study);
  scenario.shift_cost(nullptr, 0.1);
  const Table table = counterfactual_table(baseline, scenario, {0, 0, 0, {}}, {}, {});
  CHECK(*std::get<std::vector<Text>>(table.find("baseline_verdict")->values)[0] == "several");
  CHECK(reals(table, "baseline_least")[0] < reals(table, "baseline_greatest")[0]);
  CHECK(reals(table, "difference_low")[0] < reals(table, "difference_least")[0]);
  CHECK(reals(table, "difference_high")[0] > reals(table, "difference_greatest")[0]);
  CHECK(std::isnan(reals(table, "standard_error_least")[0]));
}

TEST_CASE("a scenario of another study is refused", "[counterfactual]") {
  const Solution baseline = studies::solved(studies::one_community(4), studies::beliefs(0.4, 1.0, 4.0));
  CHECK_THROWS_AS(counterfactual_table(baseline, Scenario(studies::one_community(5)), {0, 0, 0, {}}, {}, {}),
                  BadArgument);
  CHECK_NOTHROW(counterfactual_table(baseline, Scenario(studies::one_community(4)), {0, 0, 0, {}}, {}, {}));
}

TEST_CASE("rewiring keeps how many each member hears and is heard by, and every relay precision", "[counterfactual]") {
  for (std::uint64_t seed = 0; seed < 40; ++seed) {
    CAPTURE(seed);
    const studies::Mixed made = studies::mixed(seed);
    Scenario scenario(made.study);
    scenario.rewire_links(1.0, seed);
    const Links &before = made.study->communities[0].links, &after = scenario.edited().communities[0].links;
    CHECK(before.start == after.start);
    const int n = made.study->communities[0].size;
    std::vector<int> heard(n, 0);
    for (int speaker : before.speaker) ++heard[speaker];
    for (int speaker : after.speaker) --heard[speaker];
    CHECK(std::all_of(heard.begin(), heard.end(), [](int count) { return count == 0; }));
    bool sound = true;
    for (int i = 0; i < n; ++i) {
      std::multiset<double> relays;
      for (std::int64_t k = before.start[i]; k < before.start[i + 1]; ++k) relays.insert(before.relay_precision[k]);
      for (std::int64_t k = after.start[i]; k < after.start[i + 1]; ++k) {
        const auto own =
            std::find_if(relays.begin(), relays.end(), [&](double r) { return r == after.relay_precision[k]; });
        sound = sound && after.speaker[k] != i && own != relays.end();
        if (own != relays.end()) relays.erase(own);
        sound = sound && (k == after.start[i] || after.speaker[k - 1] < after.speaker[k]);
      }
    }
    CHECK(sound);
  }
}

// Common practice, no published source: of many exchanges little of the old network is left, and a share of them leaves
// the rest. On a ring of 60 a random pair is linked with chance 2/59.
TEST_CASE("rewiring a share moves about that share of contacts, and their partners", "[counterfactual]") {
  std::vector<studies::Link> ring;
  for (int i = 0; i < 60; ++i) ring.emplace_back(i, (i + 1) % 60);
  const auto study = studies::one_community(60, ring, true);
  const auto kept = [&](double share) {
    int count = 0;
    for (std::uint64_t seed = 0; seed < 50; ++seed) {
      Scenario scenario(study);
      scenario.rewire_links(share, seed);
      const Links& after = scenario.edited().communities[0].links;
      for (int i = 0; i < 60; ++i) {
        for (std::int64_t k = after.start[i]; k < after.start[i + 1]; ++k) {
          const int apart = std::abs(after.speaker[k] - i);
          count += apart == 1 || apart == 59;
        }
      }
    }
    return count / 50.0 / 120.0;
  };
  CHECK(kept(0.0) == 1.0);
  // 6 contacts of 60 exchange with 6 others, now and then the same twice.
  CHECK(std::fabs(kept(0.1) - 0.8) < 0.03);
  CHECK(kept(1.0) < 0.25);
}

TEST_CASE("a benefit that is shifted acts as one that was given", "[counterfactual]") {
  const auto study = studies::one_community(12, studies::complete(5), false);
  const Beliefs beliefs = studies::beliefs(0.4, 1.0, 2.0, 0.2);
  Scenario scenario(study);
  scenario.shift_benefit(nullptr, 0.25);
  scenario.shift_benefit(nullptr, -0.5);
  Payoff given;
  given.benefit = {0.75};
  const Solution shifted = studies::solved(std::make_shared<const Study>(scenario.edited()), beliefs);
  CHECK(shifted.enclosures[0].greatest == studies::solved(study, beliefs, given).enclosures[0].greatest);
  CHECK(study->digest() != scenario.edited().digest());
  scenario.shift_benefit(nullptr, -1.0);
  CHECK_THROWS_AS(studies::solved(std::make_shared<const Study>(scenario.edited()), beliefs), BadArgument);
}
