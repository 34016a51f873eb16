// Extreme input: a right answer or one clear error, never NaN, never a hang.
#include <catch2/catch.hpp>
#include <cmath>
#include <map>
#include <string>

#include "equilibrium/large.hpp"
#include "small_studies.hpp"
#include "turnout/chance.hpp"
#include "turnout/moments.hpp"

using namespace folkmote;

namespace {

constexpr double exact = std::numeric_limits<double>::infinity();

struct Shape {
  const char* name;
  int size;
  std::vector<studies::Link> links;
  bool gathering;  // of everybody, on top of the links
};

std::vector<Shape> shapes() {
  std::vector<studies::Link> star, path;
  for (int i = 1; i < 25; ++i) star.emplace_back(0, i);
  for (int i = 1; i < 6; ++i) path.emplace_back(i, i - 1);
  return {{"one", 1, {}, false},
          {"two apart", 2, {}, false},
          {"two", 2, studies::complete(2), false},
          {"no links", 9, {}, false},
          {"path", 6, path, false},
          {"star", 25, star, false},
          {"complete", 8, studies::complete(8), false},
          {"duplicated", 8, studies::complete(8), true}};
}

/// One community; `broadcast` 0: none, else its precision, heard by every other member.
std::shared_ptr<const Study> make(const Shape& shape, double relay, double broadcast) {
  const Table members = studies::member_table(shape.size);
  Table links = studies::link_table(shape.links);
  links.add("relay_precision", std::vector<double>(shape.links.size(), relay));
  std::vector<int> all, some;
  for (int i = 0; i < shape.size; ++i) {
    all.push_back(i);
    if (i % 2 == 0) some.push_back(i);
  }
  Table broadcasts = studies::group_table("broadcast", {some});
  broadcasts.add("precision", std::vector<double>(some.size(), broadcast));
  const Table gatherings = studies::group_table("gathering", {all});
  return std::make_shared<const Study>(
      make_study({members, shape.links.empty() ? nullptr : &links, broadcast > 0.0 ? &broadcasts : nullptr,
                  shape.gathering ? &gatherings : nullptr, nullptr, false}));
}

/// What must hold of any enclosure.
void check_sound(const Enclosure& found, const Knowledge& knowledge, double low, double high) {
  bool finite = true, ordered = true, inside = true;
  const double slack = 1e-10 + 1e-14 * std::max(std::fabs(low), std::fabs(high));
  for (int i = 0; i < knowledge.size; ++i) {
    finite = finite && std::isfinite(found.least[i]) && std::isfinite(found.greatest[i]);
    ordered = ordered && found.least[i] <= found.greatest[i];
    inside = inside && found.least[i] >= low - slack && found.greatest[i] <= high + slack;
  }
  CHECK(finite);
  CHECK(ordered);
  CHECK(inside);
  CHECK(found.width >= 0.0);
  CHECK_FALSE(std::isnan(found.contraction_bound));
  if (found.verdict == Verdict::proved_unique) CHECK(found.contraction_bound < 1.0);
}

/// At an answer everybody is indifferent at its cutoff, as nearly as the gains can be computed.
void check_answer(BestReply& game, const Enclosure& found, double tolerance) {
  for (int i = 0; i < game.size(); ++i) {
    CHECK(game.gain(i, found.greatest[i] + tolerance, found.greatest) <= 0.0);
    CHECK(game.gain(i, found.least[i] - tolerance, found.least, BestReply::Limit::right) >= 0.0);
  }
}

void check_turnout(const Knowledge& knowledge, const Enclosure& found) {
  const SharedInformation shared(knowledge);
  const std::vector<double> weights(knowledge.size, 1.0);
  const Moments all = turnout_moments(knowledge, shared, weights, found.greatest);
  CHECK((all.mean >= 0.0 && all.mean <= 1.0));
  CHECK((all.sd >= 0.0 && all.sd <= 0.5000001));
  const Moments given = turnout_given(knowledge, shared, weights, found.least, knowledge.prior_mean);
  CHECK((given.mean >= 0.0 && given.mean <= 1.0));
  CHECK((given.sd >= 0.0 && given.sd <= 0.5000001));
  const double chance = chance_at_least_given(knowledge, shared, weights, found.least, 0.5, knowledge.prior_mean);
  CHECK((chance >= 0.0 && chance <= 1.0));
}

struct Setting {
  double alpha, beta, relay, broadcast, sigma, cost;
};

std::vector<Setting> settings() {
  std::vector<Setting> made;
  for (const double alpha : {1e-8, 1.0, 1e8}) {
    for (const double beta : {0.0, 1e-8, 1e8}) {
      for (const double relay : {1e-8, exact}) {
        for (const double broadcast : {0.0, 1e8}) {
          for (const double sigma : {0.0, 1e-8, 1.0, 1e8}) {
            for (const double cost : {0.3, 1e6}) made.push_back({alpha, beta, relay, broadcast, sigma, cost});
          }
        }
      }
    }
  }
  return made;
}

}  // namespace

TEST_CASE("precisions from 1e-8 to 1e8 on every small shape", "[extremes]") {
  std::map<std::string, int> verdicts;
  for (const Shape& shape : shapes()) {
    std::shared_ptr<const Study> study;
    double relay = 0.0, broadcast = -1.0;
    for (const Setting& s : settings()) {
      if (shape.links.empty() && s.relay != exact) continue;
      CAPTURE(shape.name, s.alpha, s.beta, s.relay, s.broadcast, s.sigma, s.cost);
      if (s.relay != relay || s.broadcast != broadcast) study = make(shape, relay = s.relay, broadcast = s.broadcast);
      const Beliefs beliefs = studies::beliefs(0.4, s.alpha, s.beta, s.sigma);
      Payoff payoff;
      payoff.cost = {s.cost};
      const Solution solution = studies::solved(study, beliefs, payoff, {1e-10, 300});
      const Enclosure& found = solution.enclosures[0];
      ++verdicts[verdict_text(found.verdict)];
      const Knowledge knowledge = make_knowledge(*study, beliefs, 0);
      check_sound(found, knowledge, -s.cost, (shape.size > 1 ? 1.0 : 0.0) - s.cost);
      const SharedInformation shared(knowledge);
      BestReply game(knowledge, shared, make_stakes(*study, payoff, 0));
      if (found.verdict != Verdict::not_converged) check_answer(game, found, 1e-9 * std::max(1.0, std::fabs(s.cost)));
      check_turnout(knowledge, found);
      if (shape.size < 6) continue;
      CurveGame curve(knowledge, make_stakes(*study, payoff, 0), {});
      const Enclosure same = enclose_large(curve, {1e-10, 100}, {});
      check_sound(same, knowledge, -s.cost, 1.0 - s.cost);
      if (same.verdict == Verdict::not_converged || found.verdict == Verdict::not_converged) continue;
      for (int i = 0; i < knowledge.size; ++i) {
        CHECK(std::fabs(same.greatest[i] - found.greatest[i]) < 2e-10 * std::max(1.0, std::fabs(s.cost)));
        CHECK(std::fabs(same.least[i] - found.least[i]) < 2e-10 * std::max(1.0, std::fabs(s.cost)));
      }
    }
  }
  // Where cutoffs of 10^6 meet signals of precision 10^8, or all share all they know but for stakes of 10^-8, doubles
  // do not resolve the answer: these end as "not converged", with their width, and are few.
  int all = 0;
  for (const auto& [verdict, count] : verdicts) all += count;
  CAPTURE(all);
  CHECK(verdicts["not converged"] < 0.15 * all);
}

TEST_CASE("alone, a member acts when its index is at most minus its cost", "[extremes]") {
  const Solution solution = studies::solved(studies::one_community(1), studies::beliefs(0.4, 1.0, 2.0, 0.1));
  CHECK(std::fabs(solution.enclosures[0].greatest[0]) <= 1e-10);
  CHECK(solution.enclosures[0].verdict == Verdict::proved_unique);
}

TEST_CASE("a cap on sweeps ends a run that is not done, with its width", "[extremes]") {
  const Solution solution =
      studies::solved(studies::one_community(40), studies::beliefs(0.62, 10.0, 8.0, 0.0), {}, {1e-10, 1});
  const Enclosure& found = solution.enclosures[0];
  CHECK(found.verdict == Verdict::not_converged);
  CHECK(found.width > 0.0);
  CHECK(std::isfinite(found.width));
}
