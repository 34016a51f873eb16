#include "equilibrium/sensitivity.hpp"

#include <cmath>

#include "community/fault.hpp"
#include "numerics/normal.hpp"
#include "numerics/sums.hpp"

// Backward. Expected turnout is T = sum_i (omega_i / Omega) Phi(y_i), y_i = (kappa_i - mu) / sqrt(E_i). With the
// multipliers x of one transposed solve, -(dF/dkappa)^T x = dT/dkappa, the derivative of T along every parameter is the
// partial derivative of
//   L = T + sum_i x_i F_i
// at fixed cutoffs (the adjoint method; Cacuci 1981). L depends on the parameters through mu, E_i and N_ij, these
// through alpha, sigma_i, K_i and C_ij, and these through the precisions (InformationSlopes): one sweep over all pairs
// gives the gradient in all of them, candidate links included, which touch K_i and the C_ij of all who share with i.
//
// Forward. For the cutoffs themselves: one solve per shift.

namespace folkmote {

namespace {

Change change_of(Sensitive parameter) {
  switch (parameter) {
    case Sensitive::signal_precision:
      return Change::signal_precision;
    case Sensitive::relay_precision:
      return Change::relay_precision;
    case Sensitive::broadcast_precision:
      return Change::broadcast_precision;
    default:
      return Change::none;
  }
}

double when(bool condition) { return condition ? 1.0 : 0.0; }

}  // namespace

const char* sensitive_name(Sensitive parameter) {
  switch (parameter) {
    case Sensitive::prior_mean:
      return "prior_mean";
    case Sensitive::prior_precision:
      return "prior_precision";
    case Sensitive::signal_precision:
      return "signal_precision";
    case Sensitive::relay_precision:
      return "relay_precision";
    case Sensitive::stake_sd:
      return "stake_sd";
    case Sensitive::benefit:
      return "benefit";
    case Sensitive::cost:
      return "cost";
    case Sensitive::broadcast_precision:
      return "broadcast_precision";
  }
  throw BadArgument("there is no derivative in parameter number " + std::to_string(static_cast<int>(parameter)) +
                    "; see folkmote_sensitivity.");
}

const char* status_text(EndStatus status) {
  switch (status) {
    case EndStatus::solved:
      return "solved";
    case EndStatus::near_tangency:
      return "near a tangency";
    case EndStatus::gain_jumps:
      return "a gain jumps";
    case EndStatus::too_many_pairs:
      return "too many pairs";
    default:
      return "not converged";
  }
}

double TurnoutGradient::total(const CommonShift& shift) const {
  switch (shift.parameter) {
    case Sensitive::prior_mean:
      return prior_mean;
    case Sensitive::prior_precision:
      return prior_precision;
    case Sensitive::broadcast_precision:
      return sources.broadcast_precision[shift.broadcast];
    default:
      return ordered_sum(own(shift.parameter));
  }
}

std::span<const double> TurnoutGradient::own(Sensitive parameter) const {
  switch (parameter) {
    case Sensitive::signal_precision:
      return sources.signal_precision;
    case Sensitive::relay_precision:
      return sources.relay_precision;
    case Sensitive::stake_sd:
      return stake_sd;
    case Sensitive::benefit:
      return benefit;
    case Sensitive::cost:
      return cost;
    default:
      return {};
  }
}

EndSensitivity::EndSensitivity(const Knowledge& knowledge, const InformationSlopes& slopes, GameSlopes& game,
                               std::span<const double> weights, std::span<const double> cutoffs, double tolerance)
    : knowledge_(knowledge),
      slopes_(slopes),
      game_(game),
      weight_(weights.begin(), weights.end()),
      cutoffs_(cutoffs.begin(), cutoffs.end()) {
  const double total = ordered_sum(weights);
  for (double& weight : weight_) weight /= total;
  const Outcome outcome = polish(game.tangent(), cutoffs_, tolerance);
  status_ = outcome == Outcome::solved  ? EndStatus::solved
            : outcome == Outcome::jumps ? EndStatus::gain_jumps
                                        : EndStatus::near_tangency;
  if (status_ != EndStatus::solved) return;
  for (int i = 0; i < knowledge.size; ++i) {
    const double sd = std::sqrt(knowledge.index_variance[i]);
    density_.push_back(normal_density((cutoffs_[i] - knowledge.prior_mean) / sd) / sd);
  }
}

TurnoutGradient EndSensitivity::turnout_gradient() {
  const std::size_t n = weight_.size();
  std::vector<double> by_cutoff(n);
  for (std::size_t i = 0; i < n; ++i) by_cutoff[i] = weight_[i] * density_[i];
  const auto worth = game_.tangent().worth(by_cutoff);
  TurnoutGradient result;
  if (!worth) {
    status_ = EndStatus::near_tangency;
    return result;
  }
  GameGradient game = game_.gradient(cutoffs_, *worth);
  result.prior_mean = game.prior_mean - ordered_sum(by_cutoff);
  result.prior_precision = game.prior_precision;
  result.benefit = std::move(game.benefit);
  result.stake_sd = std::move(game.stake_sd);
  result.laws = {std::move(game.held), std::move(game.shared)};
  for (std::size_t i = 0; i < n; ++i) {
    const double above_mean = cutoffs_[i] - knowledge_.prior_mean;
    const double direct = -0.5 * by_cutoff[i] * above_mean / knowledge_.index_variance[i];
    add_member(static_cast<int>(i), game.variance[i] + direct, result);
    result.cost.push_back(-(*worth)[i]);
  }
  result.sources = slopes_.gradient(result.laws);
  const auto add = [](std::vector<double>& to, const std::vector<double>& from) {
    for (std::size_t k = 0; k < to.size(); ++k) to[k] += from[k];
  };
  add(result.sources.signal_precision, game.sources.signal_precision);
  add(result.sources.relay_precision, game.sources.relay_precision);
  add(result.sources.broadcast_precision, game.sources.broadcast_precision);
  return result;
}

void EndSensitivity::add_member(int i, double by_variance, TurnoutGradient& gradient) const {
  const double p = knowledge_.posterior_precision[i];
  gradient.laws.held[i] += by_variance / p / p;
  gradient.prior_precision += by_variance * variance_by_prior(knowledge_, i);
  gradient.stake_sd[i] += 2.0 * knowledge_.stake_sd[i] * by_variance;
}

MemberSlopes EndSensitivity::member_slopes(const CommonShift& shift) {
  const std::size_t n = weight_.size();
  GameShift game;
  game.prior_mean = when(shift.parameter == Sensitive::prior_mean);
  game.prior_precision = when(shift.parameter == Sensitive::prior_precision);
  game.benefit = when(shift.parameter == Sensitive::benefit);
  game.cost = when(shift.parameter == Sensitive::cost);
  game.stake_sd = when(shift.parameter == Sensitive::stake_sd);
  game.change = change_of(shift.parameter);
  game.broadcast = shift.broadcast;
  for (int i = 0; i < knowledge_.size; ++i) {
    const double p = knowledge_.posterior_precision[i];
    game.held.push_back(slopes_.held(game.change, shift.broadcast, i));
    game.variance.push_back(game.held[i] / p / p + game.prior_precision * variance_by_prior(knowledge_, i) +
                            game.stake_sd * 2.0 * knowledge_.stake_sd[i]);
  }
  const auto moved = game_.tangent().moved(game_.raised(cutoffs_, game));
  MemberSlopes slopes;
  if (!moved) {
    status_ = EndStatus::near_tangency;
    return slopes;
  }
  slopes.cutoff = *moved;
  for (std::size_t i = 0; i < n; ++i) {
    const double above_mean = cutoffs_[i] - knowledge_.prior_mean;
    const double spread = 0.5 * above_mean * game.variance[i] / knowledge_.index_variance[i];
    slopes.chance.push_back(density_[i] * (slopes.cutoff[i] - game.prior_mean - spread));
  }
  return slopes;
}

}  // namespace folkmote
