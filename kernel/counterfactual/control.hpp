#pragma once
// The expected turnout given the obstacle as a control variate of a play (Hammersley & Handscomb 1964, Monte Carlo
// Methods, section 5.5): a curve of theta whose mean is known.
#include "numerics/strict.hpp"

#include <span>
#include <vector>

#include "parallel/workers.hpp"
#include "turnout/condition.hpp"

namespace folkmote {

/// E[A | theta], linear between 129 values of theta and constant beyond them; its mean under theta's law is exact for
/// the curve as drawn here, so that a play less curve(theta) plus mean() has the expectation of the play, whatever the
/// curve has missed.
class Control {
 public:
  /// Leaves the curve unfinished once the work is stopped. theta known: the curve is its own mean, and there is nothing
  /// to take off.
  Control(const Knowledge& knowledge, const ObstacleLaw& law, std::span<const double> weights,
          std::span<const double> cutoffs, const StopFlag& stop);

  double curve(double theta) const;
  double mean() const { return mean_; }

 private:
  ObstacleLaw law_;
  double low_ = 0.0, step_ = 0.0;  // of the values, in standard units
  std::vector<double> value_;
  double mean_ = 0.0;
};

/// E[A] under theta's law: by formula without a condition and for one theta, else by quadrature to about 1e-12.
double expected_turnout(const Knowledge& knowledge, const ObstacleLaw& law, std::span<const double> weights,
                        std::span<const double> cutoffs);

}  // namespace folkmote
