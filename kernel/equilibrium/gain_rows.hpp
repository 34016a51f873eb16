#pragma once
// Everything that a member's net gain depends on, differentiated at a vector of cutoffs: what the implicit function
// theorem needs of a payoff.
#include "numerics/strict.hpp"

#include <span>
#include <vector>

#include "information/shared.hpp"
#include "payoff/payoff.hpp"

namespace folkmote {

/// The derivatives of one pair's chance Phi(z_ij), z_ij = ( (kappa_j - mu) - (N_ij / E_i)(kappa_i - mu) ) / s_ij and
/// s_ij^2 = E_j - N_ij^2 / E_i.
struct PairSlopes {
  double cutoff;      // in kappa_j: phi(z_ij) / s_ij
  double covariance;  // in N_ij
  double other;       // in E_j
  double own;         // in E_i
  double carried;     // in kappa_i, less its sign
  double kept;        // in mu, less its sign
};
PairSlopes pair_slopes(double z, const ConditionalLaw& law, double above_mean, double own_variance);

/// F_i at t = kappa_i and its partial derivatives. The laws of the indices enter through N_ij = Cov(e_i, e_j) and
/// E_j = Var(e_j). The cost enters every payoff as -c_i.
struct GainRow {
  double gain = 0.0;
  double prior_mean = 0.0;         // dF_i/dmu, N and E held
  double benefit = 0.0;            // dF_i/db_i
  std::vector<double> cutoff;      // dF_i/dkappa_j; at i itself dF_i/dt
  std::vector<double> covariance;  // dF_i/dN_ij; 0 at i
  std::vector<double> variance;    // dF_i/dE_j, i itself included

  void clear(int size);
};

/// One payoff's game. Rows may be asked for in any order; the object holds scratch, so that one thread uses it.
class GainRows {
 public:
  virtual ~GainRows() = default;
  virtual int size() const = 0;
  /// False where the gain jumps, so that there is no derivative: an index is certain, given another or at all.
  virtual bool fill(int member, std::span<const double> cutoffs, GainRow& row) = 0;
};

/// The share payoff, F_i = b_i sum_j w_ij Phi(z_ij) - c_i - kappa_i. Who is in a member's reach is held fixed.
class ShareRows : public GainRows {
 public:
  ShareRows(const Knowledge& knowledge, const SharedInformation& shared, const Stakes& stakes)
      : knowledge_(knowledge), shared_(shared), stakes_(stakes) {}

  int size() const override { return knowledge_.size; }
  bool fill(int member, std::span<const double> cutoffs, GainRow& row) override;

 private:
  const Knowledge& knowledge_;
  const SharedInformation& shared_;
  const Stakes& stakes_;
  std::vector<double> z_;
};

}  // namespace folkmote
