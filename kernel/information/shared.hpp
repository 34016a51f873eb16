#pragma once
// Shared information (MODEL.md, section 2) in its dense form, and the laws of pairs of indices that follow from it.
#include "numerics/strict.hpp"

#include <vector>

#include "information/knowledge.hpp"

namespace folkmote {

/// Law of e_j given e_i = t: normal with mean mu + (1 - one_less_rho)(t - mu) and standard deviation sd.
struct ConditionalLaw {
  double one_less_rho;  // 1 - rho_ij, in [0, 1]
  double sd;            // s_ij
};

/// What the law of a pair takes of one member, side by side.
struct PairMember {
  PairMember(const Knowledge& knowledge, int i)
      : held(knowledge.held[i]),
        precision(knowledge.posterior_precision[i]),
        estimate_variance(knowledge.estimate_variance[i]),
        index_variance(knowledge.index_variance[i]),
        stake_variance(knowledge.stake_sd[i] * knowledge.stake_sd[i]) {}

  double held;               // K_i
  double precision;          // p_i
  double estimate_variance;  // V_i
  double index_variance;     // E_i
  double stake_variance;     // sigma_i^2
};

/// The law of e_j given e_i from C_ij, own = K_i - C_ij and other = K_j - C_ij.
ConditionalLaw pair_law(const PairMember& i, const PairMember& j, double alpha, double shared, double own,
                        double other);

/// C_ij and what i holds beyond it, for all pairs of one community.
class SharedInformation {
 public:
  explicit SharedInformation(const Knowledge& knowledge);

  /// C_ij, i != j.
  double shared(int i, int j) const { return shared_[at(i, j)]; }
  /// u_ij = K_i - C_ij >= 0: what i holds that j does not; exactly 0 where j holds all of it.
  double unshared(int i, int j) const { return unshared_[at(i, j)]; }
  /// Cov(e_i, e_j) = (K_i K_j / alpha + C_ij) / (p_i p_j), i != j.
  double covariance(int i, int j) const;
  /// Cov(e_i, e_j | theta) = C_ij / (p_i p_j), i != j.
  double covariance_given_obstacle(int i, int j) const;
  ConditionalLaw law(int i, int j) const;
  /// Whether any two members share information.
  bool any() const { return any_; }

 private:
  std::size_t at(int i, int j) const {
    return static_cast<std::size_t>(i) * static_cast<std::size_t>(knowledge_.size) + static_cast<std::size_t>(j);
  }
  void fill();

  const Knowledge& knowledge_;
  std::vector<double> shared_;
  std::vector<double> unshared_;
  bool any_ = false;
};

}  // namespace folkmote
