#pragma once
// Seeded plays of one community: the world is drawn, members pool what they hear, and act on their cutoffs.
#include "numerics/strict.hpp"

#include <cstdint>
#include <optional>
#include <span>
#include <vector>

#include "information/knowledge.hpp"

namespace folkmote {

/// Which draws a play uses. Every draw has a fixed address: theta is number 0 of its stream, x_i and nu_i are number i
/// of theirs, zeta_q is number q, and the relay noise of i hearing j is number i n + j. Two networks on the same
/// members therefore share every draw that both use (common random numbers).
struct PlayKey {
  std::uint64_t seed;
  std::uint64_t community;
  std::uint64_t replication;
};

/// Draws the index e_i = m_i + nu_i of every member, given theta or with theta from the prior.
class Player {
 public:
  explicit Player(const Knowledge& knowledge);

  /// Fills the indices and returns theta.
  double draw(const PlayKey& key, std::optional<double> given);

  std::span<const double> indices() const { return index_; }

  /// Weighted share of members with e_i <= kappa_i.
  double turnout(std::span<const double> cutoffs, std::span<const double> weights) const;

 private:
  void pool(const PlayKey& key);

  const Knowledge& knowledge_;
  std::vector<double> signal_;
  std::vector<double> stake_;
  std::vector<double> pooled_;
  std::vector<double> index_;
  bool relays_;  // some report is noisy
};

}  // namespace folkmote
