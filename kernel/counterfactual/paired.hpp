#pragma once
// Plays of one community under the baseline and under the scenario, side by side.
#include "numerics/strict.hpp"

#include <cstdint>
#include <memory>
#include <vector>

#include "counterfactual/control.hpp"
#include "equilibrium/solution.hpp"
#include "turnout/play_block.hpp"

namespace folkmote {

/// How the mean difference is estimated. Each can be left out; none of them changes what is estimated.
struct Estimator {
  bool common_draws = true;  // baseline and scenario share every draw; without it the scenario draws its own
  bool over_stakes = true;   // the expectation over the stakes in place of the actions (conditional Monte Carlo)
  bool control = true;       // the turnout curves at the drawn obstacle as control variates
};

/// A counterfactual to be played.
struct PairedRun {
  const Solution& baseline;
  const Solution& scenario;
  Condition condition;
  Estimator estimator;
  std::uint64_t seed;
  bool expectations = true;  // without them `expected` stays 0
};

/// What the plays of one community have in common.
struct PairedCommunity {
  struct Side {
    Side(const Solution& solution, int community, const PairedRun& run, const StopFlag& stop);

    Knowledge knowledge;
    const Enclosure& ends;
    ObstacleLaw law;
    double expected[2] = {0.0, 0.0};  // E[A] at the least and the greatest end
    std::vector<Control> control;
  };

  /// What is made after the work is stopped is of no use.
  PairedCommunity(const PairedRun& run, int community, const StopFlag& stop);

  std::uint64_t community;
  const std::vector<double>& weights;
  double total;
  Side baseline, scenario;
};

class PairedPlayer {
 public:
  PairedPlayer(const PairedRun& run, const PairedCommunity& played);

  /// Plays the replications first .. first + lanes - 1.
  void play(std::int64_t first);

  // Of the last play; end 0 is the least, 1 the greatest.
  const Lanes& obstacle() const { return baseline_.obstacle(); }
  const Lanes& baseline(int end) const { return acted_[0][end]; }
  const Lanes& scenario(int end) const { return acted_[1][end]; }
  /// A number with the expectation of scenario less baseline, and no more variance than the estimator leaves it.
  const Lanes& estimate(int end) const { return estimate_[end]; }

 private:
  Lanes estimated(BlockPlayer& player, const PairedCommunity::Side& side, int which, int end);

  const PairedRun& run_;
  const PairedCommunity& played_;
  BlockPlayer baseline_, scenario_;
  PlayDraws draws_;
  bool any_stakes_;
  Lanes acted_[2][2]{};
  Lanes estimate_[2]{};
};

}  // namespace folkmote
