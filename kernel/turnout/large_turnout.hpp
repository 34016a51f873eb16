#pragma once
// Analytic turnout of a large community: only pairs that share information are looked at (MODEL.md, section 6).
#include "numerics/strict.hpp"

#include <functional>
#include <optional>
#include <span>
#include <vector>

#include "information/overlap.hpp"
#include "turnout/moments.hpp"

namespace folkmote {

/// Above this size the dense form's n^2 numbers are no longer worth their memory.
bool is_large_for_turnout(int size);

class LargeTurnout {
 public:
  /// Where more pairs share information than can be held this throws std::bad_alloc. An audience of `least_audience`
  /// or more is integrated over, not expanded into pairs.
  LargeTurnout(const Knowledge& knowledge, std::span<const double> weights, const Execution& execution,
               std::size_t least_audience = 1000);

  /// As turnout_moments and turnout_given.
  Moments moments(std::span<const double> cutoffs) const;
  Moments moments_given(std::span<const double> cutoffs, double obstacle) const;
  /// As chance_at_least and chance_at_least_given, by the normal approximation.
  double chance(std::span<const double> cutoffs, double threshold) const;
  double chance_given(std::span<const double> cutoffs, double threshold, double obstacle) const;

 private:
  using Base = std::function<double(int i, int j)>;

  double mean_at(std::span<const double> cutoffs, double above_mean, double shift) const;
  double narrowest(bool of_theta) const;
  double variance_of_curve(std::span<const double> cutoffs, bool theta_too, double above_mean) const;
  Moments add_pairs(std::span<const double> z, std::span<const double> variance, const Base& base, const Base& exact,
                    double of_curve, double mean) const;
  double bar(double threshold) const;

  const Knowledge& knowledge_;
  std::vector<double> weights_;
  Execution execution_;
  std::optional<CommonReport> common_;
  ThetaLaws laws_;
  Overlap overlap_;
  double common_variance_ = 0.0;  // Var(M)
};

}  // namespace folkmote
