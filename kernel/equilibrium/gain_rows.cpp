#include "equilibrium/gain_rows.hpp"

#include "numerics/normal.hpp"
#include "numerics/sums.hpp"

namespace folkmote {

void GainRow::clear(int size) {
  gain = prior_mean = benefit = 0.0;
  for (std::vector<double>* part : {&cutoff, &covariance, &variance}) part->assign(size, 0.0);
}

PairSlopes pair_slopes(double z, const ConditionalLaw& law, double above_mean, double own_variance) {
  const double rho = 1.0 - law.one_less_rho;
  const double pull = normal_density(z) / law.sd;
  const double by_variance = -0.5 * pull * z / law.sd;  // in s_ij^2
  const double by_rho = pull * above_mean / own_variance;
  return {pull,        -by_rho - 2.0 * by_variance * rho,
          by_variance, rho * (by_rho + by_variance * rho),
          pull * rho,  pull * law.one_less_rho};
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
    const PairSlopes slopes = pair_slopes(z_[k], law, above_mean, variance);
    const double worth = stakes_.benefit[i] * reach.weight[k];
    row.cutoff[j] = worth * slopes.cutoff;
    row.covariance[j] = worth * slopes.covariance;
    row.variance[j] += worth * slopes.other;
    row.variance[i] += worth * slopes.own;
    carried += worth * slopes.carried;
    kept += worth * slopes.kept;
  }
  normal_cdf(z_, z_);
  row.benefit = ordered_dot(reach.weight, z_);
  row.gain = stakes_.benefit[i] * row.benefit - stakes_.cost[i] - cutoffs[i];
  row.cutoff[i] = -1.0 - carried;
  row.prior_mean = -kept;
  return true;
}

}  // namespace folkmote
