#pragma once
// One end of the enclosure: the iterate that falls to the greatest equilibrium, or rises to the least.
#include "numerics/strict.hpp"

#include <cstdint>
#include <vector>

#include "equilibrium/best_reply.hpp"
#include "equilibrium/linearised.hpp"

namespace folkmote {

enum class Side : int { least = -1, greatest = +1 };

class End {
 public:
  /// Starts where nobody (least) or everybody (greatest) acts.
  End(BestReply& game, Side side, double tolerance);

  const std::vector<double>& cutoffs() const { return cutoffs_; }
  /// The extremal equilibrium is proved to lie within a quarter of the tolerance.
  bool certified() const { return certified_; }
  /// Certified, or unable to move further in double precision.
  bool finished() const { return certified_ || stalled_; }
  /// Sweeps and leaps so far.
  std::int64_t iterations() const { return iterations_; }

  /// One sweep of best replies and, where convergence is slow, a leap. `room`: distance to the other end.
  void advance(double room);

 private:
  BestReply::Limit limit() const { return side_ == Side::greatest ? BestReply::Limit::left : BestReply::Limit::right; }
  double sign() const { return static_cast<double>(side_); }

  void sweep();
  bool leap_together(double room);
  bool leap_by_newton();
  void measure_gains();
  bool take_if_safe(double step);
  bool certify();
  bool certify_along(const std::vector<double>& direction);

  BestReply& game_;
  Side side_;
  double slack_;
  std::vector<double> cutoffs_;
  std::vector<double> gains_;      // |F_i| at the cutoffs
  std::vector<double> direction_;  // of a leap
  std::vector<double> trial_;
  Linearised linearised_;
  double largest_ = 0.0;       // of the last sweep
  double last_largest_ = 0.0;  // of the sweep before
  std::int64_t iterations_ = 0;
  bool certified_ = false;
  bool stalled_ = false;
};

}  // namespace folkmote
