#pragma once
// Seeded plays of one community, four replications side by side: the fast form of Player (plays.hpp), with the same
// bits. Every list has the four values of a member next to each other, so that one look at who is heard serves four
// plays; the draws are apart from the pooling, so that a baseline and its scenario share them.
#include "numerics/strict.hpp"

#include <array>
#include <cstdint>
#include <span>
#include <vector>

#include "information/knowledge.hpp"
#include "random/purpose.hpp"
#include "turnout/condition.hpp"
#include "turnout/plays.hpp"

namespace folkmote {

inline constexpr int lanes = 4;
using Lanes = std::array<double, lanes>;

/// What chance decides in four plays: replications first .. first + 3.
class PlayDraws {
 public:
  /// `broadcasts`: how many any of the players hears; `stakes`: whether any of them has a stake.
  PlayDraws(int size, std::size_t broadcasts, bool stakes);

  void fill(const PlayKey& first);

  PlayKey key(int lane) const;
  const Lanes& obstacle() const { return obstacle_; }  // uniform
  const double* signal() const { return signal_.data(); }
  const double* stake() const { return stake_.data(); }
  const double* air() const { return air_.data(); }

 private:
  void spread(std::vector<double>& out, Purpose purpose);

  PlayKey first_{};
  Lanes obstacle_{};
  std::vector<double> signal_, stake_, air_;  // by number, then lane
  std::vector<double> row_;
};

class BlockPlayer {
 public:
  BlockPlayer(const Knowledge& knowledge, const Condition& condition);

  static bool has_stakes(const Knowledge& knowledge);

  void play(const PlayDraws& draws);

  const ObstacleLaw& law() const { return law_; }
  const Lanes& obstacle() const { return theta_; }
  double estimate(int i, int lane) const { return estimate_[i * lanes + lane]; }
  double index(int i, int lane) const { return index_[i * lanes + lane]; }

  /// Weighted share of members with e_i <= kappa_i; `total` is the sum of the weights.
  Lanes turnout(std::span<const double> cutoffs, std::span<const double> weights, double total) const;

  /// The same in expectation over the stakes nu_i, given all else: sum omega_i Phi( (kappa_i - m_i) / sigma_i ) over
  /// the total (conditional Monte Carlo; Hammersley 1956, "Conditional Monte Carlo", Journal of the ACM 3:73-76).
  Lanes turnout_over_stakes(std::span<const double> cutoffs, std::span<const double> weights, double total);

 private:
  void pool_exact();
  void pool_relayed(const PlayDraws& draws);
  void hear_broadcasts(const PlayDraws& draws);

  const Knowledge& knowledge_;
  ObstacleLaw law_;
  bool stakes_;
  bool relays_;
  Lanes theta_{};
  std::vector<double> signal_sd_;  // 1 / sqrt(beta_i) is not formed: the draw is divided, as Player does
  std::vector<double> signal_, worth_, estimate_, index_, chance_;
};

}  // namespace folkmote
