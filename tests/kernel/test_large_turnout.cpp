// The sparse form of analytic turnout against the dense one.
#include <catch2/catch.hpp>
#include <cmath>

#include "small_studies.hpp"
#include "turnout/chance.hpp"
#include "turnout/large_turnout.hpp"

using namespace folkmote;

namespace {

std::vector<double> some_cutoffs(int size, std::uint64_t seed) {
  drawn::Numbers numbers(seed + 1000);
  std::vector<double> cutoffs(size);
  for (double& cutoff : cutoffs) cutoff = numbers.between(-0.3, 1.0);
  return cutoffs;
}

}  // namespace

TEST_CASE("moments of turnout by overlapping pairs equal those by all pairs", "[turnout]") {
  int with_common = 0;
  for (std::uint64_t seed = 0; seed < 120; ++seed) {
    CAPTURE(seed);
    const studies::Mixed made = studies::mixed(seed);
    const Knowledge knowledge = make_knowledge(*made.study, made.beliefs, 0);
    const std::vector<double>& weights = made.study->communities[0].values.weight;
    const std::vector<double> cutoffs = some_cutoffs(knowledge.size, seed);
    const SharedInformation shared(knowledge);
    for (const std::size_t audience : {std::size_t{3}, std::size_t{1000}}) {
      const LargeTurnout large(knowledge, weights, {2, {}}, audience);
      with_common += common_report(knowledge, audience).has_value();
      const Moments all = turnout_moments(knowledge, shared, weights, cutoffs), same = large.moments(cutoffs);
      CHECK(std::fabs(all.mean - same.mean) < 1e-12);
      CHECK(std::fabs(all.sd - same.sd) < 1e-8);
      for (const double obstacle : {-0.5, 0.3, 1.4}) {
        const Moments given = turnout_given(knowledge, shared, weights, cutoffs, obstacle);
        const Moments sparse = large.moments_given(cutoffs, obstacle);
        CHECK(std::fabs(given.mean - sparse.mean) < 1e-12);
        CHECK(std::fabs(given.sd - sparse.sd) < 1e-8);
      }
    }
  }
  CHECK(with_common > 60);
}

TEST_CASE("the chance of a share by overlapping pairs equals that by all pairs", "[turnout]") {
  drawn::Numbers numbers(3);
  const auto study = studies::one_community(200, studies::preferential(200, 2, numbers), true);
  const Beliefs beliefs = studies::beliefs(0.4, 1.0, 2.0, 0.2);
  const Knowledge knowledge = make_knowledge(*study, beliefs, 0);
  const std::vector<double> weights(200, 1.0), cutoffs = some_cutoffs(200, 3);
  const SharedInformation shared(knowledge);
  const LargeTurnout large(knowledge, weights, {1, {}});
  for (const double threshold : {0.0, 0.1, 0.4, 0.75, 1.0}) {
    CAPTURE(threshold);
    CHECK(std::fabs(chance_at_least(knowledge, shared, weights, cutoffs, threshold) -
                    large.chance(cutoffs, threshold)) < 1e-6);
    CHECK(std::fabs(chance_at_least_given(knowledge, shared, weights, cutoffs, threshold, 0.5) -
                    large.chance_given(cutoffs, threshold, 0.5)) < 1e-9);
  }
}
