#include "turnout/condition.hpp"

#include <algorithm>
#include <cmath>
#include <string>

#include "community/fault.hpp"
#include "numerics/normal.hpp"

namespace folkmote {

namespace {

constexpr double reach = 9.0;
constexpr double least_chance = 1e-12;

}  // namespace

ObstacleLaw::ObstacleLaw(const Knowledge& knowledge, const Condition& condition)
    : mean_(knowledge.prior_mean),
      scale_(std::sqrt(knowledge.prior_precision)),
      condition_(condition),
      point_(condition.point()),
      whole_(std::isinf(condition.low) && std::isinf(condition.high)),
      mirrored_(standardised(condition.low) > 0.0) {
  const double low = standardised(condition.low), high = standardised(condition.high);
  lower_ = normal_cdf(mirrored_ ? -high : low);
  upper_ = normal_cdf(mirrored_ ? -low : high);
  if (!point_ && !(upper_ - lower_ >= least_chance)) {
    throw BadArgument("given: the obstacle lies in this range with a chance below 1e-12 under the prior mean " +
                      std::to_string(mean_) + "; give a wider range, or one value.");
  }
}

double ObstacleLaw::obstacle(double u) const {
  if (point_) return condition_.low;
  if (whole_) return mean_ + normal_quantile(u) / scale_;
  const double z = normal_quantile(lower_ + u * (upper_ - lower_));
  return std::clamp(at(mirrored_ ? -z : z), condition_.low, condition_.high);
}

double ObstacleLaw::low() const { return std::max(standardised(condition_.low), -reach); }
double ObstacleLaw::high() const { return std::min(standardised(condition_.high), reach); }

}  // namespace folkmote
