#pragma once
// Anderson acceleration of a fixed-point iteration (Anderson 1965; Walker & Ni 2011, the unconstrained form).
#include "numerics/strict.hpp"

#include <deque>
#include <span>
#include <vector>

namespace folkmote {

class Mixing {
 public:
  /// The next iterate from the present one and what the map makes of it.
  std::vector<double> next(std::span<const double> present, std::span<const double> image);

  /// Forgets the past, after a step that did not help.
  void restart() { *this = Mixing(); }

 private:
  static constexpr std::size_t depth = 5;

  std::vector<double> last_residual_;
  std::vector<double> last_image_;
  std::deque<std::vector<double>> residual_changes_;
  std::deque<std::vector<double>> image_changes_;
};

}  // namespace folkmote
