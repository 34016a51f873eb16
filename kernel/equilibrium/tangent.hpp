#pragma once
// The game's linearisation at an equilibrium, solved to full accuracy (see linearised.hpp for the quick form that the
// search uses).
#include "numerics/strict.hpp"

#include <optional>
#include <span>
#include <vector>

#include "parallel/workers.hpp"

namespace folkmote {

/// Thrown out of a task whose run has been stopped, so that it ends at once. The task itself has not failed: it catches
/// this, and whoever stopped the run says why.
struct Stopped {};

/// dF/dkappa = -D (I - P): D_i = -dF_i/dt >= 1, and P_ij = (dF_i/dkappa_j) / D_i >= 0 is how much of a move of j's
/// cutoff passes into i's reply.
class Tangent {
 public:
  /// Products throw Stopped once `stop` is raised; nullptr: never.
  explicit Tangent(const StopFlag* stop) : stop_(stop) {}
  virtual ~Tangent() = default;
  Tangent(const Tangent&) = delete;
  Tangent& operator=(const Tangent&) = delete;

  /// Takes the derivatives at `cutoffs`; false where a gain jumps.
  virtual bool set(std::span<const double> cutoffs) = 0;

  /// F at the cutoffs set.
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

 protected:
  /// P v, and P^T v.
  virtual std::vector<double> passed(std::span<const double> v) const = 0;
  virtual std::vector<double> passed_back(std::span<const double> v) const = 0;

  std::vector<double> gains_;
  std::vector<double> diagonal_;  // D

 private:
  std::vector<double> kept(std::span<const double> v, bool back) const;

  const StopFlag* stop_;
};

enum class Outcome { solved, jumps, singular };

/// Newton's steps from `cutoffs`, within `tolerance` of an equilibrium, to the equilibrium itself, where the tangent is
/// left. Singular where they lead elsewhere, or where the amplification is too large for derivatives of six digits.
Outcome polish(Tangent& tangent, std::vector<double>& cutoffs, double tolerance);

}  // namespace folkmote
