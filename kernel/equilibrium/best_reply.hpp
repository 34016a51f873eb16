#pragma once
// Best replies in cutoffs (MODEL.md, section 4), dense form: every member against every other in its reach.
#include "numerics/strict.hpp"

#include <span>
#include <vector>

#include "information/shared.hpp"
#include "payoff/payoff.hpp"

namespace folkmote {

/// The net gain of the marginal member,
///   F_i(t; kappa) = b_i sum_j w_ij Phi( [ (kappa_j - t) + (1 - rho_ij)(t - mu) ] / s_ij ) - c_i - t,
/// decreasing in t with slope at most -1 and non-decreasing in every kappa_j.
class BestReply {
 public:
  BestReply(const Knowledge& knowledge, const SharedInformation& shared, const Stakes& stakes);

  int size() const { return static_cast<int>(rows_.size()); }

  /// Where members share all information and have no stakes of their own, F_i jumps down: whoever has the same index
  /// as j acts exactly when j does. `at_jump` chooses the limit from the left (they act) or from the right.
  enum class Limit { left, right };

  /// F_i(t; cutoffs).
  double gain(int member, double t, std::span<const double> cutoffs, Limit at_jump = Limit::left);

  /// The root of F_i, from the side on which `from` lies: with the limit from the left the value returned is at least
  /// the root when gain(from) <= 0, with the limit from the right at most when gain(from) >= 0. So iterates stay on
  /// their side. They move at least 49/50 of the way.
  double reply(int member, double from, std::span<const double> cutoffs, Limit at_jump);

  /// How F_i moves when all cutoffs, its own t included, move together along `direction` v > 0: the largest value that
  ///   -dF_i/ds = v_i + b_i sum_j w_ij phi(z_ij) (rho_ij v_i - v_j) / s_ij
  /// can take on the way from cutoffs to cutoffs + step * v. Infinite where the gain jumps.
  double steepest(int member, std::span<const double> cutoffs, std::span<const double> direction, double step);

  /// Derivatives at `cutoffs`: row[j] = dF_i/dkappa_j >= 0 for j != i, and row[i] = dF_i/dt <= -1. False where the gain
  /// jumps.
  bool derivatives(int member, std::span<const double> cutoffs, std::span<double> row);

  /// The largest value on the box least <= kappa <= greatest of
  ///   b_i sum_j w_ij phi(z_ij) (v_j - rho_ij v_i) / s_ij.
  double surviving(int member, std::span<const double> least, std::span<const double> greatest,
                   std::span<const double> v) const;

  /// Cutoff of a member when nobody, or everybody in its reach, acts.
  double lowest(int member) const { return -rows_[member].cost; }
  double highest(int member) const;

  /// max_i b_i sum_j w_ij (1 - rho_ij) / (s_ij sqrt(2 pi)), rounded outward. Below 1 the best reply is a sup-norm
  /// contraction, so that there is one equilibrium (with no links and equal members: Morris & Shin 2003).
  double contraction_bound() const;

 private:
  /// One member's reach; struct of arrays so that the normal CDF runs over a block.
  struct Row {
    double benefit;
    double cost;
    std::vector<int> member;
    std::vector<double> weight;        // w_ij
    std::vector<double> one_less_rho;  // 1 - rho_ij
    std::vector<double> sd;            // s_ij
    bool has_step = false;             // some s_ij is 0
  };

  double expected_share(const Row& row, double t, std::span<const double> cutoffs, Limit at_jump);
  void apply_steps(const Row& row, double t, std::span<const double> cutoffs, Limit at_jump, std::span<double> z) const;

  void standardise(const Row& row, double t, std::span<const double> cutoffs, std::span<double> z) const;

  double prior_mean_;
  std::vector<Row> rows_;
  std::vector<double> scratch_;
  std::vector<double> moved_;
};

}  // namespace folkmote
