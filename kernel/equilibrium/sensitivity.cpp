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
//   dN_ij = dC_ij / (p_i p_j) + [ (K_j/alpha) / (p_i p_j) - N_ij/p_i ] dK_i + [ the same of j ]
//           - [ K_i K_j / (alpha^2 p_i p_j) + N_ij/p_i + N_ij/p_j ] dalpha
//   dE_i  = dK_i / p_i^2 - (K_i / (alpha p_i)) (1/alpha + 1/p_i) dalpha + 2 sigma_i dsigma_i

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

/// dE_i / dalpha.
double variance_by_prior(const Knowledge& k, int i) {
  return -k.estimate_variance[i] * (1.0 / k.prior_precision + 1.0 / k.posterior_precision[i]);
}

/// The derivatives of N_ij.
struct CovarianceSlopes {
  double shared, held_i, held_j, prior_precision;
};

CovarianceSlopes covariance_slopes(const Knowledge& k, double covariance, int i, int j) {
  const double alpha = k.prior_precision, p_i = k.posterior_precision[i], p_j = k.posterior_precision[j];
  const double both = 1.0 / (p_i * p_j);
  return {both, k.held[j] / alpha * both - covariance / p_i, k.held[i] / alpha * both - covariance / p_j,
          -(k.held[i] / alpha) * (k.held[j] / alpha) * both - covariance / p_i - covariance / p_j};
}

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
    case EndStatus::too_large:
      return "too large";
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

EndSensitivity::EndSensitivity(const Knowledge& knowledge, const SharedInformation& shared,
                               const InformationSlopes& slopes, GainRows& game, std::span<const double> weights,
                               std::span<const double> cutoffs, double tolerance)
    : knowledge_(knowledge),
      shared_(shared),
      slopes_(slopes),
      game_(game),
      weight_(weights.begin(), weights.end()),
      shared_row_(weights.size()) {
  const double total = ordered_sum(weights);
  for (double& weight : weight_) weight /= total;
  Polished found = polish(game, cutoffs, tolerance);
  status_ = found.outcome == Polished::Outcome::solved  ? EndStatus::solved
            : found.outcome == Polished::Outcome::jumps ? EndStatus::gain_jumps
                                                        : EndStatus::near_tangency;
  if (status_ != EndStatus::solved) return;
  cutoffs_ = std::move(found.cutoffs);
  tangent_ = std::move(found.tangent);
  for (int i = 0; i < knowledge.size; ++i) {
    const double sd = std::sqrt(knowledge.index_variance[i]);
    density_.push_back(normal_density((cutoffs_[i] - knowledge.prior_mean) / sd) / sd);
  }
}

TurnoutGradient EndSensitivity::turnout_gradient() {
  const std::size_t n = weight_.size();
  std::vector<double> by_cutoff(n);
  for (std::size_t i = 0; i < n; ++i) by_cutoff[i] = weight_[i] * density_[i];
  const auto worth = tangent_.worth(by_cutoff);
  TurnoutGradient gradient;
  if (!worth) {
    status_ = EndStatus::near_tangency;
    return gradient;
  }
  gradient.laws.held.assign(n, 0.0);
  std::vector<double> by_variance(n), by_covariance(n * n);
  for (std::size_t i = 0; i < n; ++i) {
    const double above_mean = cutoffs_[i] - knowledge_.prior_mean;
    by_variance[i] = -0.5 * by_cutoff[i] * above_mean / knowledge_.index_variance[i];
    gradient.prior_mean -= by_cutoff[i];
  }
  for (std::size_t i = 0; i < n; ++i) {
    game_.fill(static_cast<int>(i), cutoffs_, row_);
    const double x = (*worth)[i];
    gradient.prior_mean += x * row_.prior_mean;
    gradient.benefit.push_back(x * row_.benefit);
    gradient.cost.push_back(-x);
    for (std::size_t j = 0; j < n; ++j) {
      by_variance[j] += x * row_.variance[j];
      by_covariance[i * n + j] = x * row_.covariance[j];
    }
  }
  gradient.laws.shared.assign(n * n, 0.0);
  add_pairs(by_covariance, gradient);
  for (std::size_t i = 0; i < n; ++i) add_member(static_cast<int>(i), by_variance[i], gradient);
  gradient.sources = slopes_.gradient(gradient.laws);
  return gradient;
}

void EndSensitivity::add_pairs(std::span<const double> covariance, TurnoutGradient& gradient) const {
  const std::size_t n = weight_.size();
  LawGradient& laws = gradient.laws;
  for (std::size_t i = 0; i < n; ++i) {
    for (std::size_t j = i + 1; j < n; ++j) {
      const double by = covariance[i * n + j] + covariance[j * n + i];
      if (by == 0.0) continue;
      const int a = static_cast<int>(i), b = static_cast<int>(j);
      const CovarianceSlopes slopes = covariance_slopes(knowledge_, shared_.covariance(a, b), a, b);
      laws.shared[i * n + j] = laws.shared[j * n + i] = by * slopes.shared;
      laws.held[i] += by * slopes.held_i;
      laws.held[j] += by * slopes.held_j;
      gradient.prior_precision += by * slopes.prior_precision;
    }
  }
}

void EndSensitivity::add_member(int i, double by_variance, TurnoutGradient& gradient) const {
  const double p = knowledge_.posterior_precision[i];
  gradient.laws.held[i] += by_variance / p / p;
  gradient.prior_precision += by_variance * variance_by_prior(knowledge_, i);
  gradient.stake_sd.push_back(2.0 * knowledge_.stake_sd[i] * by_variance);
}

MemberSlopes EndSensitivity::member_slopes(const CommonShift& shift) {
  const std::size_t n = weight_.size();
  const double alpha = when(shift.parameter == Sensitive::prior_precision);
  const double sigma = when(shift.parameter == Sensitive::stake_sd);
  const double mu = when(shift.parameter == Sensitive::prior_mean);
  std::vector<double> held(n), variance(n), raised_by(n);
  for (std::size_t i = 0; i < n; ++i) {
    const int member = static_cast<int>(i);
    const double p = knowledge_.posterior_precision[i];
    held[i] = slopes_.held(change_of(shift.parameter), shift.broadcast, member);
    variance[i] =
        held[i] / p / p + alpha * variance_by_prior(knowledge_, member) + sigma * 2.0 * knowledge_.stake_sd[i];
  }
  for (std::size_t i = 0; i < n; ++i) raised_by[i] = raised(static_cast<int>(i), shift, held, variance);
  const auto moved = tangent_.moved(raised_by);
  MemberSlopes slopes;
  if (!moved) {
    status_ = EndStatus::near_tangency;
    return slopes;
  }
  slopes.cutoff = *moved;
  for (std::size_t i = 0; i < n; ++i) {
    const double above_mean = cutoffs_[i] - knowledge_.prior_mean;
    const double spread = 0.5 * above_mean * variance[i] / knowledge_.index_variance[i];
    slopes.chance.push_back(density_[i] * (slopes.cutoff[i] - mu - spread));
  }
  return slopes;
}

/// dF_i at fixed cutoffs.
double EndSensitivity::raised(int i, const CommonShift& shift, std::span<const double> held,
                              std::span<const double> variance) {
  game_.fill(i, cutoffs_, row_);
  slopes_.shared(change_of(shift.parameter), shift.broadcast, i, shared_row_);
  const double alpha = when(shift.parameter == Sensitive::prior_precision);
  double sum = ordered_dot(row_.variance, variance);
  for (int j = 0; j < knowledge_.size; ++j) {
    if (row_.covariance[j] == 0.0) continue;
    const CovarianceSlopes slopes = covariance_slopes(knowledge_, shared_.covariance(i, j), i, j);
    sum += row_.covariance[j] * (slopes.shared * shared_row_[j] + slopes.held_i * held[i] + slopes.held_j * held[j] +
                                 slopes.prior_precision * alpha);
  }
  if (shift.parameter == Sensitive::prior_mean) sum += row_.prior_mean;
  if (shift.parameter == Sensitive::benefit) sum += row_.benefit;
  if (shift.parameter == Sensitive::cost) sum -= 1.0;
  return sum;
}

}  // namespace folkmote
