#pragma once
// Shared information (MODEL.md, section 2) in its sparse form: only the pairs with C_ij > 0, never n^2 numbers.
#include "numerics/strict.hpp"

#include <cstdint>
#include <optional>
#include <span>
#include <vector>

#include "information/shared.hpp"
#include "information/theta_laws.hpp"
#include "parallel/workers.hpp"

namespace folkmote {

/// Who shares information with whom, by row, with the exact law of each pair. Members heard are in their listener's
/// row whether or not they have anything to share; those who share nothing but a common report are in none.
class Overlap {
 public:
  /// Upper bound on the number of ordered pairs that rows would hold: groups count with their square.
  static double pairs_at_most(const Knowledge& knowledge, const std::optional<CommonReport>& common);

  /// `only_heard`: rows of the members heard and nobody else, for payoffs that see contacts only.
  /// `execution` splits the rows; it changes no number.
  Overlap(const Knowledge& knowledge, const std::optional<CommonReport>& common, bool only_heard,
          const Execution& execution);

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
