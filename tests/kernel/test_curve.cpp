// The turnout-curve engine against the dense form.
#include <catch2/catch.hpp>
#include <cmath>

#include "equilibrium/large.hpp"
#include "small_studies.hpp"

using namespace folkmote;

namespace {

struct Case {
  std::shared_ptr<const Study> study;
  Beliefs beliefs;
  Payoff payoff;
};

/// Both engines on one community.
struct Compared {
  Compared(const Case& c, const SolveRule& rule = {}, std::size_t least_audience = CurveGame::usual_audience)
      : knowledge(make_knowledge(*c.study, c.beliefs, 0)),
        shared(knowledge),
        dense(knowledge, shared, make_stakes(*c.study, c.payoff, 0)),
        curve(knowledge, make_stakes(*c.study, c.payoff, 0), {}, least_audience),
        dense_found(enclose(dense, rule, StopFlag{})),
        common(curve.curve().laws().common),
        curve_found(curve.serves() ? enclose_large(curve, rule, {2, {}}) : Enclosure{}) {}

  Knowledge knowledge;
  SharedInformation shared;
  BestReply dense;
  CurveGame curve;
  Enclosure dense_found;
  bool common;
  Enclosure curve_found;
};

void check_gains(Compared& c, std::uint64_t seed) {
  drawn::Numbers numbers(seed);
  std::vector<double> cutoffs(c.dense.size());
  for (double& cutoff : cutoffs) cutoff = numbers.between(-0.5, 1.2);
  for (const auto limit : {BestReply::Limit::left, BestReply::Limit::right}) {
    c.curve.set(cutoffs, limit, {1, {}});
    double worst = 0.0;
    for (int i = 0; i < c.dense.size(); ++i) {
      const double t = c.dense.lowest(i) + numbers.unit() * (c.dense.highest(i) - c.dense.lowest(i));
      const double gap = std::fabs(c.curve.gain(i, t) - c.dense.gain(i, t, cutoffs, limit));
      worst = std::max(worst, gap);
      CHECK(gap <= c.curve.error(i) + 1e-13);
    }
    CHECK(worst < 1e-12);
  }
}

/// The bound over the whole line is never smaller than the dense form's, and a little larger at most; a common report
/// leaves it valid, but wider.
void check_bound(const Compared& c) {
  const double dense = c.dense.contraction_bound(), curve = c.curve.contraction_bound({});
  if (!std::isfinite(dense)) return;
  CHECK(curve >= dense * (1.0 - 1e-12));
  if (!c.common) CHECK(curve <= dense * (1.0 + 1e-6) + 1e-9);
}

/// R_i(v) a little further along: it may have changed by the curvature at most.
void check_curvature(Compared& c, std::vector<double> cutoffs, const std::vector<double>& direction) {
  const double step = 0.01;
  std::vector<double> before;
  for (int i = 0; i < c.dense.size(); ++i) before.push_back(c.curve.along(i, -1.0));
  for (std::size_t i = 0; i < cutoffs.size(); ++i) cutoffs[i] += step * direction[i];
  c.curve.set(cutoffs, BestReply::Limit::left, {});
  REQUIRE(c.curve.set_direction(direction, {}));
  for (int i = 0; i < c.dense.size(); ++i) {
    CHECK(std::fabs(c.curve.along(i, -1.0) - before[i]) <= step * c.curve.curvature(i) + 1e-9);
  }
}

/// How gains move along a direction, against the sum of the dense form's derivatives.
void check_along(Compared& c, std::uint64_t seed) {
  drawn::Numbers numbers(seed);
  const int n = c.dense.size();
  std::vector<double> cutoffs(n), direction(n), row(n);
  for (int i = 0; i < n; ++i) {
    cutoffs[i] = c.dense.lowest(i) + 0.95 * numbers.unit() * (c.dense.highest(i) - c.dense.lowest(i));
    direction[i] = numbers.between(0.05, 1.0);
  }
  c.curve.set(cutoffs, BestReply::Limit::left, {});
  if (!c.curve.set_direction(direction, {})) return;
  for (int i = 0; i < n; ++i) {
    REQUIRE(c.dense.derivatives(i, cutoffs, row));
    double change = 0.0, size = 1.0;
    for (int j = 0; j < n; ++j) {
      change += row[j] * direction[j];
      size += std::fabs(row[j]);
    }
    const double high = c.curve.along(i, 1.0) - direction[i], low = c.curve.along(i, -1.0) - direction[i];
    CHECK(high >= change - 1e-13 * size);
    CHECK(low <= change + 1e-13 * size);
    CHECK(high - low < 1e-8 * size);
  }
  check_curvature(c, cutoffs, direction);
}

void check_cutoffs(const Compared& c) {
  check_bound(c);
  REQUIRE(c.curve_found.verdict != Verdict::not_converged);
  for (int i = 0; i < c.knowledge.size; ++i) {
    CHECK(std::fabs(c.curve_found.least[i] - c.dense_found.least[i]) < 1e-10);
    CHECK(std::fabs(c.curve_found.greatest[i] - c.dense_found.greatest[i]) < 1e-10);
  }
  // The dense form may prove more: on the finished enclosure.
  if (c.dense_found.verdict == Verdict::several)
    CHECK(c.curve_found.verdict == Verdict::several);
  else
    CHECK(c.curve_found.verdict != Verdict::several);
}

Case attachment(int size, double sigma, double beta, std::uint64_t seed, double mix = 0.0) {
  drawn::Numbers numbers(seed);
  Case c{studies::one_community(size, studies::preferential(size, 3, numbers), true),
         studies::beliefs(numbers.between(0.0, 1.0), 1.0, beta, sigma),
         {}};
  c.payoff.reach = {mix};
  return c;
}

}  // namespace

TEST_CASE("gains and cutoffs of the curve equal the dense form with every feature mixed", "[curve]") {
  for (std::uint64_t seed = 0; seed < 300; ++seed) {
    const studies::Mixed made = studies::mixed(seed, seed % 3 == 0 ? 0.1 : 1.0);
    CAPTURE(seed);
    Compared compared({made.study, made.beliefs, made.payoff});
    check_gains(compared, seed);
    check_along(compared, seed);
    check_cutoffs(compared);
  }
}

TEST_CASE("a report heard by many is counted by the curve as pairs would count it", "[curve]") {
  int with_common = 0, served = 0;
  for (std::uint64_t seed = 0; seed < 200; ++seed) {
    const studies::Mixed made = studies::mixed(seed, seed % 3 == 0 ? 0.1 : 1.0);
    CAPTURE(seed);
    Compared compared({made.study, made.beliefs, made.payoff}, {}, 3);
    if (!compared.common) continue;
    ++with_common;
    if (!compared.curve.serves()) continue;
    ++served;
    check_gains(compared, seed);
    check_along(compared, seed);
    check_cutoffs(compared);
  }
  CHECK(with_common > 60);
  CHECK(4 * served > 3 * with_common);
}

TEST_CASE("gains and cutoffs of the curve equal the dense form on networks with hubs", "[curve]") {
  int k = 0;
  for (const double sigma : {0.0, 1e-6, 0.05, 0.4}) {
    for (const double beta : {0.01, 2.0, 50.0, 1e4}) {
      for (const double mix : {0.0, 0.5, 1.0}) {
        CAPTURE(sigma, beta, mix);
        Compared compared(attachment(90, sigma, beta, static_cast<std::uint64_t>(++k), mix), {1e-11, 100000});
        check_gains(compared, static_cast<std::uint64_t>(k));
        check_along(compared, static_cast<std::uint64_t>(k));
        check_cutoffs(compared);
      }
    }
  }
}

TEST_CASE("stars whose hub knows nearly everything, and everybody alike", "[curve]") {
  for (const double beta : {0.5, 1e6}) {
    std::vector<studies::Link> star;
    for (int i = 1; i < 120; ++i) star.emplace_back(0, i);
    Compared hub({studies::one_community(120, star), studies::beliefs(0.3, 1.0, beta, 0.01), {}});
    check_gains(hub, 1);
    check_cutoffs(hub);
    Compared alike({studies::one_community(120), studies::beliefs(0.3, 1.0, beta, 0.0), {}});
    check_gains(alike, 2);
    check_cutoffs(alike);
    Compared all({studies::one_community(20, studies::complete(20)), studies::beliefs(0.3, 1.0, beta, 0.0), {}});
    check_gains(all, 3);
    check_cutoffs(all);
    CHECK(all.curve_found.verdict == Verdict::several);
  }
}

// Morris & Shin (2003): with no links and equal members the whole line is no contraction once gamma >= 2 pi, and the
// slope of the one equilibrium's equation is still below 1 for a mu away from 1/2 (re-derived; see gg_*.csv).
TEST_CASE("large communities near the critical point take few sweeps, and are proved on the finished enclosure",
          "[curve]") {
  for (const double gamma : {0.9 * 6.283185307179586, 0.99 * 6.283185307179586, 7.0, 9.0}) {
    // gamma = alpha^2 (alpha + beta) / (beta (alpha + 2 beta)) with alpha = 10 solved for beta.
    const double alpha = 10.0;
    const double b = gamma * alpha - alpha * alpha, a = 2.0 * gamma, c = -alpha * alpha * alpha;
    const double beta = (-b + std::sqrt(b * b - 4.0 * a * c)) / (2.0 * a);
    const Case made{studies::one_community(1200), studies::beliefs(0.62, alpha, beta, 0.0), {}};
    const Solution solution = solve(made.study, made.beliefs, made.payoff, {}, {2, {}});
    const Enclosure& found = solution.enclosures[0];
    CAPTURE(gamma, found.iterations, found.width, found.contraction_bound);
    CHECK(found.verdict == Verdict::proved_unique);
    CHECK(found.iterations <= 60);
    // kappa = Phi(sqrt(gamma) (kappa - mu)).
    const double kappa = found.greatest[0];
    CHECK(std::fabs(kappa - 0.5 * std::erfc(-std::sqrt(gamma) * (kappa - 0.62) / std::sqrt(2.0))) < 1e-9);
  }
}

TEST_CASE("solving takes the curve for a large community, with the same bytes for any number of threads", "[curve]") {
  const Case c = attachment(1500, 0.1, 2.0, 5);
  REQUIRE(is_large(1500));
  REQUIRE(curve_game(make_knowledge(*c.study, c.beliefs, 0), make_stakes(*c.study, c.payoff, 0), {}).has_value());
  const Solution one = solve(c.study, c.beliefs, c.payoff, {}, {1, {}});
  const Solution three = solve(c.study, c.beliefs, c.payoff, {}, {3, {}});
  CHECK(one.enclosures[0].verdict == Verdict::proved_unique);
  CHECK(one.enclosures[0].least == three.enclosures[0].least);
  CHECK(one.enclosures[0].greatest == three.enclosures[0].greatest);
  const Knowledge knowledge = make_knowledge(*c.study, c.beliefs, 0);
  const SharedInformation shared(knowledge);
  BestReply dense(knowledge, shared, make_stakes(*c.study, c.payoff, 0));
  const auto& cutoffs = one.enclosures[0].greatest;
  for (int i = 0; i < 1500; i += 7) CHECK(std::fabs(dense.gain(i, cutoffs[i], cutoffs)) < 1e-10);
}

TEST_CASE("a large community's run can be cancelled", "[curve]") {
  const Case c = attachment(20000, 0.1, 2.0, 5);
  CHECK_THROWS_AS(solve(c.study, c.beliefs, c.payoff, {}, {2, [](std::int64_t, std::int64_t) { return true; }}),
                  std::exception);
}
