#pragma once
// The game linearised at a vector of cutoffs, and the move that would change every gain as asked.
#include "numerics/strict.hpp"

#include <optional>
#include <span>
#include <vector>

#include "equilibrium/best_reply.hpp"

namespace folkmote {

class Linearised {
 public:
  explicit Linearised(int size)
      : size_(size), matrix_(static_cast<std::size_t>(size) * static_cast<std::size_t>(size)) {}

  /// Takes the derivatives at `cutoffs`; false where the gain jumps.
  bool set(BestReply& game, std::span<const double> cutoffs);

  /// v with -dF/dkappa v = rates, to three digits: moving all cutoffs down along v raises the gains at `rates`. Nothing
  /// when the solver does not get there.
  std::optional<std::vector<double>> direction(std::span<const double> rates) const;

 private:
  std::vector<double> apply(std::span<const double> v) const;

  int size_;
  std::vector<double> matrix_;  // -dF_i/dkappa_j by row, each divided by its diagonal entry
  std::vector<double> diagonal_;
};

}  // namespace folkmote
