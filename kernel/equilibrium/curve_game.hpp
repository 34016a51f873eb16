#pragma once
// The share game of a large community: gains from the turnout curve, pairs that share information corrected (MODEL.md,
// section 4). The same F_i(t; kappa) as BestReply at a cost of nodes and overlapping pairs, never of n^2.
#include "numerics/strict.hpp"

#include <algorithm>
#include <cmath>
#include <optional>
#include <span>
#include <vector>

#include "equilibrium/best_reply.hpp"
#include "equilibrium/turnout_curve.hpp"
#include "payoff/payoff.hpp"

namespace folkmote {

class IndependentBound;

class CurveGame {
 public:
  CurveGame(const Knowledge& knowledge, Stakes stakes, const Execution& execution,
            std::size_t least_audience = usual_audience);

  /// An audience of this size or more is counted by the curve, not by pairs: there the two cost the same.
  static constexpr std::size_t usual_audience = 1000;

  /// False where a common report would need more layers than can be held: ask for an audience that nobody has.
  bool serves() const { return std::isfinite(curve_.layers()); }

  int size() const { return static_cast<int>(stakes_.benefit.size()); }
  /// Cutoff of a member when nobody, or everybody in its reach, acts.
  double lowest(int member) const { return lowest_[member]; }
  double highest(int member) const { return highest_[member]; }

  /// Sets the cutoffs of everybody else and tabulates the curve.
  void set(std::span<const double> cutoffs, BestReply::Limit at_jump, const Execution& execution);

  /// F_i(t; cutoffs set).
  double gain(int member, double t) const;
  /// The root of F_i from the side on which `from` lies, as BestReply::reply.
  double reply(int member, double from) const;
  /// Bound on the error of gain().
  double error(int member) const { return error_[member]; }

  /// max_i b_i sum_j w_ij (1 - rho_ij) / (s_ij sqrt(2 pi)), never smaller than that.
  double contraction_bound(const Execution& execution) const;

  /// Prepares along() for a direction 0 < v <= 1 at the cutoffs set; false where gains jump.
  bool set_direction(std::span<const double> direction, const Execution& execution);
  /// R_i(v) = b_i sum_j w_ij phi(z_ij) (v_j - rho_ij v_i) / s_ij at the cutoffs set: when all cutoffs, t with them,
  /// move by r v, F_i moves at the rate R_i(v) - v_i. Not less than that, errors included, when `outward` is 1; not
  /// more when it is -1.
  double along(int member, double outward) const;
  /// At least |dR_i(v)/dr|: b_i sum_j w_ij max|phi'| / s_ij^2.
  double curvature(int member) const { return curvature_[member]; }

  /// Normal CDFs that one sweep takes when each gain is asked once: nodes, pairs and direct sums. For benches.
  double evaluations() const {
    const double n = static_cast<double>(size()), pairs = static_cast<double>(overlap_.pairs());
    return curve_.evaluations() + n + 2.0 * pairs + n * static_cast<double>(curve_.direct_members());
  }

  const TurnoutCurve& curve() const { return curve_; }

 private:
  /// Sums of omega_j P(e_j <= kappa_j | e_i = t) over the pairs of a row.
  struct Pairs {
    double heard = 0.0;       // over the members heard
    double correction = 0.0;  // over all: exact less independent
  };
  Pairs pairs(int member, double t) const;

  /// task(i) for every member, split over workers.
  template <class Task>
  void for_members(const Execution& execution, const Task& task) const {
    constexpr int members = 4096;  // of one task
    run_tasks((size() + members - 1) / members, execution, [&](std::int64_t block, const StopFlag&) {
      const int first = static_cast<int>(block) * members;
      for (int i = first; i < std::min(size(), first + members); ++i) task(i);
    });
  }
  double contraction_of(int member, const IndependentBound& independent) const;
  double error_bound(int member) const;
  void bound_curvature(const Execution& execution);
  double pairs_along(int member, double& error) const;

  /// What a pair needs of the other member, side by side: one line of memory is fetched for it, not four.
  struct Partner {
    double cutoff, pull, spread, weight;
  };
  void lay_apart(int member, double t, std::span<const std::uint32_t> entries, std::span<double> margin,
                 std::span<double> sd) const;

  double prior_mean_;
  Stakes stakes_;
  std::optional<CommonReport> common_;
  Overlap overlap_;
  std::vector<double> heard_weight_;  // sum of omega over the members heard
  std::vector<double> lowest_;
  std::vector<double> highest_;
  TurnoutCurve curve_;
  std::vector<Partner> partners_;
  double largest_ = 0.0;  // size of the largest cutoff
  std::vector<double> error_;
  std::vector<double> direction_;
  std::vector<double> curvature_;  // empty until it is asked for
  bool has_step_ = false;          // some pair's index is certain
  BestReply::Limit limit_ = BestReply::Limit::left;
};

}  // namespace folkmote
