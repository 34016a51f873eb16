#pragma once
// What derivatives of an equilibrium need of a game: its linearisation in the cutoffs, and how the gains move with
// everything else. A payoff, or a way of counting, that is to have derivatives implements this.
#include "numerics/strict.hpp"

#include <span>
#include <vector>

#include "equilibrium/tangent.hpp"
#include "information/slopes.hpp"

namespace folkmote {

/// A change of what the game is played with, along which gains are differentiated.
struct GameShift {
  double prior_mean = 0.0;
  double prior_precision = 0.0;
  double benefit = 0.0;
  double cost = 0.0;
  double stake_sd = 0.0;
  std::vector<double> held;      // dK_i
  std::vector<double> variance;  // dE_i, all of it
  Change change = Change::none;  // for dC_ij
  int broadcast = -1;
};

/// Partial derivatives of sum_i x_i F_i at fixed cutoffs. Those in E_i stand apart: what E_i is made of comes later.
struct GameGradient {
  double prior_mean = 0.0;
  double prior_precision = 0.0;
  std::vector<double> benefit;   // in b_i
  std::vector<double> stake_sd;  // in sigma_i, beside E_i
  std::vector<double> variance;  // in E_i
  std::vector<double> held;      // in K_i, beside E_i
  std::vector<double> shared;    // in C_ij, n x n as in LawGradient; empty: in `sources` already
  SourceGradient sources;        // through C_ij, where that is not held

  explicit GameGradient(const Knowledge& knowledge);
};

class GameSlopes {
 public:
  virtual ~GameSlopes() = default;
  virtual Tangent& tangent() = 0;
  /// At the cutoffs of tangent().set(), which are given again.
  virtual GameGradient gradient(std::span<const double> cutoffs, std::span<const double> multipliers) = 0;
  /// dF_i for every member.
  virtual std::vector<double> raised(std::span<const double> cutoffs, const GameShift& shift) = 0;
};

/// dE_i / dalpha, K_i and sigma_i held.
double variance_by_prior(const Knowledge& knowledge, int i);

/// The derivatives of N_ij = (K_i K_j / alpha + C_ij) / (p_i p_j), given its value.
struct CovarianceSlopes {
  double shared, held_i, held_j, prior_precision;
};
CovarianceSlopes covariance_slopes(const Knowledge& knowledge, double covariance, int i, int j);

}  // namespace folkmote
