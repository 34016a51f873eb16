#pragma once
// sum_j omega_j (1 - rho_ij) / s_ij, and sum_j omega_j / s_ij^2, over everybody, every pair taken as independent given
// theta, without n^2 terms.
#include "numerics/strict.hpp"

#include <span>
#include <vector>

#include "information/overlap.hpp"

namespace folkmote {

/// A term depends on the two members' laws only, and falls in each of pull, spread (of j), trust and doubt (of i).
/// Members of equal laws are summed as one; where there are too many different laws, neighbours in order share the
/// smallest values among them, which makes the sum an upper bound.
class IndependentBound {
 public:
  IndependentBound(const ThetaLaws& laws, std::span<const double> weight);

  /// At least the sum for member i.
  double sum(int member) const { return sums_[class_of_[member]]; }

  /// At least sum_j omega_j / s_ij^2.
  double inverse_variances(int member) const { return inverse_variances_[class_of_[member]]; }

  /// The term of the pair of i and a member of this pull and spread itself: (1 - rho_ij) / s_ij without shared
  /// information.
  double term(int i, double pull, double spread) const;

 private:
  struct Class {
    double pull, spread, trust, doubt, weight;
  };
  void classify(std::span<const double> weight);

  const ThetaLaws& laws_;
  std::vector<int> class_of_;
  std::vector<Class> classes_;
  std::vector<double> sums_;
  std::vector<double> inverse_variances_;
};

}  // namespace folkmote
