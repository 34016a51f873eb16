#pragma once
// Shared information (MODEL.md, section 2) in its sparse form: only the pairs with C_ij > 0, never n^2 numbers.
#include "numerics/strict.hpp"

#include <cstdint>
#include <span>
#include <vector>

#include "information/shared.hpp"
#include "parallel/workers.hpp"

namespace folkmote {

/// The law of one member's index given theta, and of theta given the index:
///   e_j | theta ~ N( mu + pull_j (theta - mu), spread_j ),   theta | e_i = t ~ N( mu + trust_i (t - mu), doubt_i ).
/// Two members who share no information meet through theta alone, so that
///   e_j | e_i = t ~ N( mu + pull_j trust_i (t - mu), spread_j + pull_j^2 doubt_i ).
struct ThetaLaws {
  explicit ThetaLaws(const Knowledge& knowledge);

  std::vector<double> pull;    // K_j / p_j
  std::vector<double> spread;  // K_j / p_j^2 + sigma_j^2
  std::vector<double> trust;   // Cov(theta, e_i) / E_i = V_i / E_i
  std::vector<double> doubt;   // 1/alpha - V_i^2 / E_i, written without cancellation
};

/// Who shares information with whom, by row, with the exact law of each pair. Members heard are in their listener's
/// row whether or not they have anything to share.
class Overlap {
 public:
  /// Upper bound on the number of ordered pairs that rows would hold: groups count with their square.
  static double pairs_at_most(const Knowledge& knowledge);

  /// `only_heard`: rows of the members heard and nobody else, for payoffs that see contacts only.
  /// `execution` splits the rows; it changes no number.
  Overlap(const Knowledge& knowledge, bool only_heard, const Execution& execution);

  struct Row {
    std::span<const std::uint32_t> member;  // in no order that matters; see partner() and heard()
    std::span<const double> one_less_rho;   // 1 - rho_ij
    std::span<const double> sd;             // s_ij
  };
  Row row(int i) const;

  static int partner(std::uint32_t entry) { return static_cast<int>(entry & 0x7fffffffU); }
  static bool heard(std::uint32_t entry) { return (entry >> 31) != 0; }

  std::int64_t pairs() const;

 private:
  /// The rows of members first .. first + rows - 1; 20 bytes a pair.
  struct Block {
    std::vector<std::int64_t> start;
    std::vector<std::uint32_t> member;
    std::vector<double> one_less_rho;
    std::vector<double> sd;
  };

  int block_size_;
  std::vector<Block> blocks_;
};

}  // namespace folkmote
