#pragma once
// Derivatives of an equilibrium in what it was computed from, by the implicit function theorem (MODEL.md, sections 4
// and 10). F(kappa; parameters) = 0 gives dkappa = -(dF/dkappa)^-1 dF.
#include "numerics/strict.hpp"

#include <span>
#include <vector>

#include "equilibrium/game_slopes.hpp"

namespace folkmote {

/// What derivatives are taken in. Numbers are those of the C interface and are never reused.
enum class Sensitive : int {
  prior_mean = 1,
  prior_precision = 2,
  signal_precision = 3,
  relay_precision = 4,
  stake_sd = 5,
  benefit = 16,
  cost = 17,
  broadcast_precision = 24,
};

/// As users read it; throws BadArgument for a number that names none.
const char* sensitive_name(Sensitive parameter);

/// Why an end of the equilibrium set has derivatives, or has none.
enum class EndStatus { solved, near_tangency, gain_jumps, not_converged, too_many_pairs };
const char* status_text(EndStatus status);

/// All values of one parameter in a community move alike; a broadcast's precision by itself.
struct CommonShift {
  Sensitive parameter;
  int broadcast = -1;
};

/// The derivatives of expected turnout, in every parameter at once.
struct TurnoutGradient {
  double prior_mean = 0.0;
  double prior_precision = 0.0;
  SourceGradient sources;
  std::vector<double> stake_sd;  // by member, as benefit and cost
  std::vector<double> benefit;
  std::vector<double> cost;
  LawGradient laws;

  /// Under a common shift.
  double total(const CommonShift& shift) const;
  /// In the members' own values, empty where a member has none of its own.
  std::span<const double> own(Sensitive parameter) const;
};

/// How members move under a common shift.
struct MemberSlopes {
  std::vector<double> cutoff;
  std::vector<double> chance;
};

/// One end of one community.
class EndSensitivity {
 public:
  /// `cutoffs` lie within `tolerance` of an equilibrium. The first three must outlive this object, which leaves the
  /// game's tangent at the equilibrium.
  EndSensitivity(const Knowledge& knowledge, const InformationSlopes& slopes, GameSlopes& game,
                 std::span<const double> weights, std::span<const double> cutoffs, double tolerance);

  EndStatus status() const { return status_; }

  /// By one transposed solve and one sweep back over the game; status() is solved.
  TurnoutGradient turnout_gradient();

  /// By one solve and one sweep over the game; status() is solved.
  MemberSlopes member_slopes(const CommonShift& shift);

 private:
  void add_member(int i, double by_variance, TurnoutGradient& gradient) const;

  const Knowledge& knowledge_;
  const InformationSlopes& slopes_;
  GameSlopes& game_;
  std::vector<double> weight_;  // omega_i / sum omega
  EndStatus status_;
  std::vector<double> cutoffs_;
  std::vector<double> density_;  // phi(y_i) / sqrt(E_i), y_i = (kappa_i - mu) / sqrt(E_i)
};

}  // namespace folkmote
