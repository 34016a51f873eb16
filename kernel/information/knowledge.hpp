#pragma once
// What members know (MODEL.md, section 2): information held, pooled estimates and their variances.
#include "numerics/strict.hpp"

#include <cstdint>
#include <limits>
#include <vector>

#include "community/parameters.hpp"
#include "community/study.hpp"

namespace folkmote {

/// The parameters of beliefs as the caller set them. Member and link columns override them.
struct Beliefs {
  Spread prior_mean;                                                // mu
  Spread prior_precision;                                           // alpha
  Spread signal_precision;                                          // beta
  Spread relay_precision{std::numeric_limits<double>::infinity()};  // gamma
  Spread stake_sd{0.0};                                             // sigma

  Spread& of(Parameter parameter);
};

/// Throws BadArgument where a parameter is not set or has the wrong length for the study.
void check_beliefs(const Study& study, const Beliefs& beliefs);

/// One community's beliefs and reports, resolved. Reports of listener i stand at start[i] .. start[i + 1] - 1.
struct Knowledge {
  int size = 0;
  double prior_mean = 0.0;
  double prior_precision = 0.0;
  std::vector<double> signal_precision;  // beta_i
  std::vector<double> stake_sd;          // sigma_i

  std::vector<std::int64_t> start;
  std::vector<int> speaker;              // j, increasing within a listener
  std::vector<double> relay_precision;   // gamma_ij; infinite: exact
  std::vector<double> relay_slope;       // dgamma_ij when all relays gain the same: 1 but for forwarded reports
  std::vector<double> report_precision;  // beta_ij = beta_j gamma_ij / (beta_j + gamma_ij)

  std::vector<Broadcast> broadcasts;  // tau_q and S_q

  std::vector<double> held;                 // K_i
  std::vector<double> posterior_precision;  // p_i = alpha + K_i
  std::vector<double> estimate_variance;    // V_i = K_i / (alpha p_i)
  std::vector<double> index_variance;       // E_i = V_i + sigma_i^2
};

/// Resolves beliefs for one community; check_beliefs has passed.
Knowledge make_knowledge(const Study& study, const Beliefs& beliefs, int community);

}  // namespace folkmote
