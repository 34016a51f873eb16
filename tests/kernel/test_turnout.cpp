// Analytic turnout against simulation, exact cases, and what is known of sharing signals.
#include <catch2/catch.hpp>
#include <cmath>

#include "community/fault.hpp"
#include "numerics/bits.hpp"
#include "numerics/normal.hpp"
#include "numerics/sums.hpp"
#include "small_studies.hpp"
#include "turnout/chance.hpp"
#include "turnout/moments.hpp"
#include "turnout/play_block.hpp"
#include "turnout/plays.hpp"
#include "turnout/tables.hpp"

using namespace folkmote;

namespace {

struct Sample {
  double mean, sd, mean_error, sd_error;
};

Sample sample_of(const std::vector<double>& values) {
  const double n = static_cast<double>(values.size());
  double sum = 0, second = 0, fourth = 0;
  for (double v : values) sum += v;
  const double mean = sum / n;
  for (double v : values) {
    const double d = (v - mean) * (v - mean);
    second += d;
    fourth += d * d;
  }
  second /= n;
  fourth /= n;
  const double sd = std::sqrt(second);
  // Delta method: Var(sd) = (mu4 - sd^4) / (4 n sd^2).
  return {mean, sd, sd / std::sqrt(n), std::sqrt((fourth - second * second) / n) / (2 * sd)};
}

std::vector<double> played(const Knowledge& k, const std::vector<double>& cutoffs, const std::vector<double>& weights,
                           int plays, std::uint64_t seed, std::optional<double> given) {
  Player player(k);
  std::vector<double> turnout;
  for (int r = 0; r < plays; ++r) {
    player.draw({seed, 0, static_cast<std::uint64_t>(r)}, given);
    turnout.push_back(player.turnout(cutoffs, weights));
  }
  return turnout;
}

double expected_turnout(const Solution& solution) {
  const Table table = community_table(solution);
  return std::get<std::vector<double>>(table.find("turnout_greatest")->values)[0];
}

}  // namespace

TEST_CASE("analytic and simulated turnout agree within Monte Carlo error on 200 random communities", "[turnout]") {
  int beyond = 0;
  for (std::uint64_t seed = 0; seed < 200; ++seed) {
    const studies::Mixed made = studies::mixed(seed);
    const Solution solution = studies::solved(made.study, made.beliefs, made.payoff);
    const Knowledge k = make_knowledge(*made.study, made.beliefs, 0);
    const SharedInformation shared(k);
    const auto& weights = made.study->communities[0].values.weight;
    const auto& cutoffs = solution.enclosures[0].greatest;
    const bool conditional = seed % 2 == 1;
    const std::optional<double> given = conditional ? std::optional<double>(0.4) : std::nullopt;
    const Moments analytic =
        conditional ? turnout_given(k, shared, weights, cutoffs, 0.4) : turnout_moments(k, shared, weights, cutoffs);
    const Sample sample = sample_of(played(k, cutoffs, weights, 4000, seed + 17, given));
    CAPTURE(seed, conditional, analytic.mean, sample.mean, analytic.sd, sample.sd);
    if (sample.sd == 0.0) continue;  // all plays alike: nothing to compare an error with
    CHECK(std::fabs(analytic.mean - sample.mean) < 4 * sample.mean_error);
    CHECK(std::fabs(analytic.sd - sample.sd) < 4 * sample.sd_error + 1e-4);
    beyond += std::fabs(analytic.mean - sample.mean) > 2 * sample.mean_error;
  }
  // About one in twenty lies beyond two standard errors; far fewer would mean that the errors are overstated.
  CHECK(beyond >= 2);
  CHECK(beyond <= 25);
}

TEST_CASE("the chance of at least q is exact without shared information", "[turnout]") {
  for (int size : {1, 2, 7, 40}) {
    const auto study = studies::one_community(size);
    const Solution solution = studies::solved(study, studies::beliefs(0.4, 1.0, 2.0, 0.3));
    const Knowledge k = make_knowledge(*study, solution.beliefs, 0);
    const SharedInformation shared(k);
    const auto& weights = study->communities[0].values.weight;
    const auto& cutoffs = solution.enclosures[0].greatest;
    REQUIRE(chance_is_exact(shared, weights));
    const std::vector<double> turnout = played(k, cutoffs, weights, 40000, 3, std::nullopt);
    double total = 0.0;
    for (double q : {0.25, 0.5, 1.0}) {
      const double analytic = chance_at_least(k, shared, weights, cutoffs, q);
      double hits = 0;
      for (double a : turnout) hits += a >= q;
      const double share = hits / 40000;
      CAPTURE(size, q, analytic, share);
      CHECK(std::fabs(analytic - share) < 4 * std::sqrt(analytic * (1 - analytic) / 40000) + 1e-9);
      total += analytic;
    }
    CHECK(total > 0.0);
    // E[A] is the sum over k of P(A >= k/n) / n.
    double expectation = 0.0;
    for (int count = 1; count <= size; ++count) {
      expectation += chance_at_least(k, shared, weights, cutoffs, static_cast<double>(count) / size) / size;
    }
    CHECK(expectation == Approx(turnout_moments(k, shared, weights, cutoffs).mean).margin(1e-8));
  }
}

TEST_CASE("with shared information the chance of at least q is a normal approximation of stated error", "[turnout]") {
  // The help pages state 0.05 for 20 members and more; measured here against 4,000 plays.
  double worst = 0.0;
  int compared = 0;
  for (std::uint64_t seed = 300; seed < 360; ++seed) {
    const studies::Mixed made = studies::mixed(seed);
    if (made.study->communities[0].size < 20) continue;
    const Solution solution = studies::solved(made.study, made.beliefs, made.payoff);
    const Knowledge k = make_knowledge(*made.study, made.beliefs, 0);
    const SharedInformation shared(k);
    const auto& weights = made.study->communities[0].values.weight;
    const auto& cutoffs = solution.enclosures[0].greatest;
    REQUIRE(!chance_is_exact(shared, weights));
    const std::vector<double> turnout = played(k, cutoffs, weights, 4000, seed, std::nullopt);
    for (double q : {0.25, 0.5, 0.75}) {
      double hits = 0;
      for (double a : turnout) hits += a >= q;
      worst = std::max(worst, std::fabs(hits / 4000 - chance_at_least(k, shared, weights, cutoffs, q)));
      ++compared;
    }
  }
  CAPTURE(worst);
  CHECK(compared >= 15);
  CHECK(worst < 0.05);
}

TEST_CASE("no benefit: turnout is the probit value", "[turnout]") {
  // A member acts iff m + nu <= -c, so that turnout is Phi((-c - mu) / sqrt(V + sigma^2)).
  Payoff payoff;
  payoff.benefit = {0.0};
  payoff.cost = {-0.7};
  const Solution solution = studies::solved(studies::one_community(9, {{0, 1}, {0, 2}, {5, 1}}),
                                            studies::beliefs(0.4, 1.5, 2.5, 0.3), payoff);
  const Knowledge k = make_knowledge(*solution.study, solution.beliefs, 0);
  const std::vector<double> chance = chances(k, solution.enclosures[0].least);
  for (int i = 0; i < 9; ++i) {
    const double held = i == 0 ? 7.5 : i == 5 ? 5.0 : 2.5;
    const double variance = held / (1.5 * (1.5 + held)) + 0.09;
    CHECK(chance[i] == Approx(normal_cdf((0.7 - 0.4) / std::sqrt(variance))).epsilon(1e-14));
  }
}

TEST_CASE("a gathering equals its exact links: the same draws and results", "[turnout]") {
  const int size = 12;
  const Table members = studies::member_table(size);
  const Table gathering = studies::group_table("gathering", {{0, 2, 4, 6, 8}, {4, 5, 6}});
  std::vector<studies::Link> links;
  for (const auto& group : {std::vector<int>{0, 2, 4, 6, 8}, std::vector<int>{4, 5, 6}}) {
    for (int i : group) {
      for (int j : group) {
        const studies::Link link{i, j};
        if (i != j && std::find(links.begin(), links.end(), link) == links.end()) links.push_back(link);
      }
    }
  }
  const auto gathered = std::make_shared<const Study>(make_study({members, nullptr, nullptr, &gathering}));
  const Beliefs beliefs = studies::beliefs(0.45, 1.0, 3.0, 0.2);
  const Solution a = studies::solved(gathered, beliefs);
  const Solution b = studies::solved(studies::one_community(size, links), beliefs);
  for (int i = 0; i < size; ++i) CHECK(std::fabs(a.enclosures[0].least[i] - b.enclosures[0].least[i]) < 1e-12);
  const PlayRange range{0, 50, 7, {}};
  CHECK(play_table(a, range, {}).digest() == play_table(b, range, {}).digest());
  CHECK(action_table(a, range, {}).digest() == action_table(b, range, {}).digest());
  const Table ta = turnout_table(a, {}, {}, {}), tb = turnout_table(b, {}, {}, {});
  for (const char* column : {"turnout_least", "turnout_greatest", "sd_least", "sd_greatest"}) {
    const auto& va = std::get<std::vector<double>>(ta.find(column)->values);
    const auto& vb = std::get<std::vector<double>>(tb.find(column)->values);
    CHECK(std::fabs(va[0] - vb[0]) < 1e-12);
  }
}

TEST_CASE("sharing signals lowers turnout where the obstacle is low and raises it where it is high", "[turnout]") {
  // Common practice, no published source: n = 200, preferential attachment with m = 2, alpha = 1, beta = 4:
  // mu = 0.1: 0.70 to 0.67; mu = 0.9: 0.30 to 0.33.
  drawn::Numbers numbers(11);
  const auto links = studies::preferential(200, 2, numbers);
  const auto apart = studies::one_community(200);
  const auto linked = studies::one_community(200, links, true);
  const double low_apart = expected_turnout(studies::solved(apart, studies::beliefs(0.1, 1.0, 4.0)));
  const double low_linked = expected_turnout(studies::solved(linked, studies::beliefs(0.1, 1.0, 4.0)));
  const double high_apart = expected_turnout(studies::solved(apart, studies::beliefs(0.9, 1.0, 4.0)));
  const double high_linked = expected_turnout(studies::solved(linked, studies::beliefs(0.9, 1.0, 4.0)));
  CHECK(low_apart == Approx(0.70).margin(0.005));
  CHECK(low_linked == Approx(0.67).margin(0.01));
  CHECK(high_apart == Approx(0.30).margin(0.005));
  CHECK(high_linked == Approx(0.33).margin(0.01));
}

TEST_CASE("plays do not depend on threads or on how the range is split", "[turnout]") {
  const studies::Mixed made = studies::mixed(4);
  const Solution solution = studies::solved(made.study, made.beliefs, made.payoff);
  const Table whole = play_table(solution, {0, 30, 99, {}}, {1, {}});
  CHECK(whole.digest() == play_table(solution, {0, 30, 99, {}}, {4, {}}).digest());
  const Table part = play_table(solution, {10, 5, 99, {}}, {});
  const auto& all = std::get<std::vector<double>>(whole.find("turnout_least")->values);
  const auto& some = std::get<std::vector<double>>(part.find("turnout_least")->values);
  for (int r = 0; r < 5; ++r) CHECK(some[r] == all[10 + r]);
  const Table other = play_table(solution, {0, 30, 100, {}}, {});
  CHECK(whole.digest() != other.digest());
}

TEST_CASE("plays four at a time are the plays one by one, to the bit", "[turnout]") {
  for (std::uint64_t seed = 0; seed < 60; ++seed) {
    const studies::Mixed made = studies::mixed(seed);
    const Knowledge k = make_knowledge(*made.study, made.beliefs, 0);
    const auto& weights = made.study->communities[0].values.weight;
    const std::vector<double> cutoffs(k.size, 0.3);
    const Condition condition = seed % 3 == 0 ? Condition{0.4, 0.4} : Condition{};
    const std::optional<double> given = condition.point() ? std::optional<double>(0.4) : std::nullopt;
    BlockPlayer block(k, condition);
    PlayDraws draws(k.size, k.broadcasts.size(), BlockPlayer::has_stakes(k));
    draws.fill({seed, 3, 5});
    block.play(draws);
    const Lanes shares = block.turnout(cutoffs, weights, ordered_sum(weights));
    Player single(k);
    for (int lane = 0; lane < lanes; ++lane) {
      CAPTURE(seed, lane);
      CHECK(single.draw({seed, 3, 5 + static_cast<std::uint64_t>(lane)}, given) == block.obstacle()[lane]);
      CHECK(single.turnout(cutoffs, weights) == shares[lane]);
      for (int i = 0; i < k.size; ++i) REQUIRE(single.indices()[i] == block.index(i, lane));
    }
  }
}

TEST_CASE("the obstacle within a range follows the truncated normal law", "[turnout]") {
  const Knowledge k = make_knowledge(*studies::one_community(2), studies::beliefs(0.3, 4.0, 1.0), 0);
  for (const auto& [low, high] : std::vector<std::pair<double, double>>{
           {-infinity, 0.1}, {0.2, 0.9}, {1.5, infinity}, {2.6, 3.0}, {-2.5, -2.0}, {0.3, 0.3000001}}) {
    const ObstacleLaw law(k, {low, high});
    CAPTURE(low, high);
    const double a = (low - 0.3) * 2, b = (high - 0.3) * 2;
    for (double u : {0.001, 0.1, 0.5, 0.9, 0.999}) {
      const double theta = law.obstacle(u), z = (theta - 0.3) * 2;
      CHECK((theta >= low && theta <= high));
      const bool far = a > 0;  // the share below theta, from the side on which it is exact
      const double below = far ? (normal_upper(a) - normal_upper(z)) / (normal_upper(a) - normal_upper(b))
                               : (normal_cdf(z) - normal_cdf(a)) / (normal_cdf(b) - normal_cdf(a));
      CHECK(std::fabs(below - (far ? 1 - u : u)) < 1e-9 + 1e-15 / (normal_cdf(b) - normal_cdf(a)));
    }
  }
  CHECK(ObstacleLaw(k, {0.7, 0.7}).obstacle(0.9) == 0.7);
  CHECK_THROWS_AS(ObstacleLaw(k, {5.0, infinity}), BadArgument);
}
