#pragma once
// P(A >= q): the chance that turnout reaches a threshold.
#include "numerics/strict.hpp"

#include <span>

#include "information/shared.hpp"
#include "parallel/workers.hpp"

namespace folkmote {

/// The smallest number of members whose share is at least the threshold: A >= q in doubles, as a play decides it.
int members_needed(int size, double threshold);

/// Whether P(A >= q) is computed exactly: no shared information, equal weights, at most 500 members.
bool chance_is_exact(const SharedInformation& shared, std::span<const double> weights);

/// P(A >= q | theta): exact by the Poisson-binomial recursion where chance_is_exact; else the normal approximation with
/// mean and standard deviation given theta, shared information included.
double chance_at_least_given(const Knowledge& knowledge, const SharedInformation& shared,
                             std::span<const double> weights, std::span<const double> cutoffs, double threshold,
                             double obstacle);

/// P(A >= q), integrated over the prior of theta by adaptive Gauss-Legendre panels to about 1e-9; of no use once
/// `stop` is raised.
double chance_at_least(const Knowledge& knowledge, const SharedInformation& shared, std::span<const double> weights,
                       std::span<const double> cutoffs, double threshold, const StopFlag* stop = nullptr);

}  // namespace folkmote
