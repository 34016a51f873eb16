#pragma once
// What is known of the obstacle when turnout is asked for: nothing, a range, or its value.
#include "numerics/strict.hpp"

#include <limits>

#include "information/knowledge.hpp"

namespace folkmote {

/// theta in [low, high]; equal ends give theta.
struct Condition {
  double low = -std::numeric_limits<double>::infinity();
  double high = std::numeric_limits<double>::infinity();

  bool point() const { return low == high; }
};

/// theta's law in one community: N(mu, 1/alpha) truncated to the condition.
class ObstacleLaw {
 public:
  /// Throws BadArgument where the range has a prior chance below 1e-12: nothing can be said of what hardly happens.
  ObstacleLaw(const Knowledge& knowledge, const Condition& condition);

  /// theta by inversion from u in (0, 1): one uniform per play whatever the condition, so that plays under two
  /// conditions or two priors share it. Without a condition these are the bits of mu + normal / sqrt(alpha).
  double obstacle(double u) const;

  /// The range in standard units (theta - mu) sqrt(alpha), within 9 of 0, beyond which there is no chance to speak of.
  double low() const;
  double high() const;
  bool point() const { return point_; }  // theta is known
  bool whole() const { return whole_; }  // there is no condition

  double standardised(double theta) const { return (theta - mean_) * scale_; }
  double at(double z) const { return mean_ + z / scale_; }

 private:
  double mean_;
  double scale_;  // sqrt(alpha)
  Condition condition_;
  bool point_;
  bool whole_;
  bool mirrored_;  // drawn as -z, so that ranges far above the mean keep their precision
  double lower_, upper_;
};

}  // namespace folkmote
