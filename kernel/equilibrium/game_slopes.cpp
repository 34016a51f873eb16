#include "equilibrium/game_slopes.hpp"

//   dN_ij = dC_ij / (p_i p_j) + [ (K_j/alpha) / (p_i p_j) - N_ij/p_i ] dK_i + [ the same of j ]
//           - [ K_i K_j / (alpha^2 p_i p_j) + N_ij/p_i + N_ij/p_j ] dalpha
//   dE_i  = dK_i / p_i^2 - (K_i / (alpha p_i)) (1/alpha + 1/p_i) dalpha + 2 sigma_i dsigma_i

namespace folkmote {

GameGradient::GameGradient(const Knowledge& knowledge)
    : benefit(knowledge.size, 0.0), stake_sd(benefit), variance(benefit), held(benefit) {
  sources = {benefit, benefit, std::vector<double>(knowledge.broadcasts.size(), 0.0)};
}

double variance_by_prior(const Knowledge& k, int i) {
  return -k.estimate_variance[i] * (1.0 / k.prior_precision + 1.0 / k.posterior_precision[i]);
}

CovarianceSlopes covariance_slopes(const Knowledge& k, double covariance, int i, int j) {
  const double alpha = k.prior_precision, p_i = k.posterior_precision[i], p_j = k.posterior_precision[j];
  const double both = 1.0 / (p_i * p_j);
  return {both, k.held[j] / alpha * both - covariance / p_i, k.held[i] / alpha * both - covariance / p_j,
          -(k.held[i] / alpha) * (k.held[j] / alpha) * both - covariance / p_i - covariance / p_j};
}

}  // namespace folkmote
