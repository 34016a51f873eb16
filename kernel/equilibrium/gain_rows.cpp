#include "equilibrium/gain_rows.hpp"

#include "numerics/normal.hpp"
#include "numerics/sums.hpp"

namespace folkmote {

void GainRow::clear(int size) {
  gain = prior_mean = benefit = 0.0;
  for (std::vector<double>* part : {&cutoff, &covariance, &variance}) part->assign(size, 0.0);
}

bool ShareRows::fill(int i, std::span<const double> cutoffs, GainRow& row) {
  row.clear(size());
  const ReachRow reach = reach_of(stakes_, knowledge_, i);
  const double variance = knowledge_.index_variance[i];
  const double above_mean = cutoffs[i] - knowledge_.prior_mean;
  if (variance == 0.0) return false;
  double carried = 0.0, kept = 0.0;
  z_.resize(reach.member.size());
  for (std::size_t k = 0; k < z_.size(); ++k) {
    const int j = reach.member[k];
    const ConditionalLaw law = shared_.law(i, j);
    if (law.sd == 0.0) return false;
    z_[k] = ((cutoffs[j] - cutoffs[i]) + law.one_less_rho * above_mean) / law.sd;
    const double pull = stakes_.benefit[i] * reach.weight[k] * normal_density(z_[k]) / law.sd;
    const double by_variance = -0.5 * pull * z_[k] / law.sd;  // dF_i/ds_ij^2
    const double rho = shared_.covariance(i, j) / variance;
    row.cutoff[j] = pull;
    row.covariance[j] = -pull * above_mean / variance - 2.0 * by_variance * rho;
    row.variance[j] += by_variance;
    row.variance[i] += rho * (pull * above_mean / variance + by_variance * rho);
    carried += pull * (1.0 - law.one_less_rho);
    kept += pull * law.one_less_rho;
  }
  normal_cdf(z_, z_);
  row.benefit = ordered_dot(reach.weight, z_);
  row.gain = stakes_.benefit[i] * row.benefit - stakes_.cost[i] - cutoffs[i];
  // dz_ij/dt = -rho_ij / s_ij, dz_ij/dmu = -(1 - rho_ij) / s_ij.
  row.cutoff[i] = -1.0 - carried;
  row.prior_mean = -kept;
  return true;
}

}  // namespace folkmote
