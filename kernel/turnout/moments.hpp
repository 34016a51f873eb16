#pragma once
// Analytic turnout given cutoffs (MODEL.md, section 6): chances, expectation, variance, the curve given theta.
#include "numerics/strict.hpp"

#include <span>
#include <vector>

#include "information/shared.hpp"

namespace folkmote {

/// P(e_i <= kappa_i) for every member.
std::vector<double> chances(const Knowledge& knowledge, std::span<const double> cutoffs);

/// P(e_i <= kappa_i | theta) = Phi( (kappa_i - mu - (K_i/p_i)(theta - mu)) / sqrt(K_i/p_i^2 + sigma_i^2) ).
std::vector<double> chances_given(const Knowledge& knowledge, std::span<const double> cutoffs, double obstacle);

struct Moments {
  double mean;
  double sd;
};

/// Weighted turnout A = sum omega_i a_i / sum omega_i; pairs by the bivariate normal.
Moments turnout_moments(const Knowledge& knowledge, const SharedInformation& shared, std::span<const double> weights,
                        std::span<const double> cutoffs);

/// The same given theta: only members who share information are dependent.
Moments turnout_given(const Knowledge& knowledge, const SharedInformation& shared, std::span<const double> weights,
                      std::span<const double> cutoffs, double obstacle);

/// sum omega_i chance_i / sum omega_i.
double weighted_mean(std::span<const double> weights, std::span<const double> chance);

}  // namespace folkmote
