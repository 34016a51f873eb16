#pragma once
// The game's linearisation at an equilibrium, solved to full accuracy (see linearised.hpp for the quick form that the
// search uses).
#include "numerics/strict.hpp"

#include <optional>
#include <span>
#include <vector>

#include "equilibrium/gain_rows.hpp"

namespace folkmote {

/// dF/dkappa = -D (I - P): D_i = -dF_i/dt >= 1, and P_ij = (dF_i/dkappa_j) / D_i >= 0 is how much of a move of j's
/// cutoff passes into i's reply.
class Tangent {
 public:
  /// Takes the derivatives at `cutoffs`; false where a gain jumps.
  bool set(GainRows& game, std::span<const double> cutoffs);

  std::span<const double> gains() const { return gains_; }

  /// (dF/dkappa)^-1 (-right): how cutoffs move when the gains are raised by `right`.
  std::optional<std::vector<double>> moved(std::span<const double> right) const;

  /// The multipliers x >= 0 with -(dF/dkappa)^T x = right: what a rise of each gain is worth, cutoffs being worth
  /// `right`.
  std::optional<std::vector<double>> worth(std::span<const double> right) const;

  /// The sup-norm of (I - P)^-1. At an extremal equilibrium I - P is an M-matrix, whose inverse has no negative entry,
  /// so that it is the largest entry of (I - P)^-1 1 (Berman & Plemmons 1979). Infinite where it is not, or where the
  /// matrix is singular: two equilibria meet there, or have just parted.
  double amplification() const;

 private:
  std::vector<double> apply(std::span<const double> v) const;
  std::vector<double> apply_transposed(std::span<const double> v) const;
  std::span<const double> row(int i) const {
    return {passed_.data() + static_cast<std::size_t>(i) * diagonal_.size(), diagonal_.size()};
  }

  std::vector<double> gains_;
  std::vector<double> diagonal_;  // D
  std::vector<double> passed_;    // P by row
};

/// Newton's steps from cutoffs within `tolerance` of an equilibrium to the equilibrium itself, and the linearisation
/// there.
struct Polished {
  enum class Outcome { solved, jumps, singular } outcome;
  std::vector<double> cutoffs;
  Tangent tangent;
};
Polished polish(GainRows& game, std::span<const double> cutoffs, double tolerance);

}  // namespace folkmote
