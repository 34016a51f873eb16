#pragma once
// A running sum in two doubles (Knuth's two-sum; Dekker 1971), so that K_i - C_ij keeps its digits when two members
// hold nearly the same information, and is exactly zero when they hold the same.
#include "numerics/strict.hpp"

namespace folkmote {

struct TwoSum {
  double high = 0.0;
  double low = 0.0;

  void add(double term) {
    const double sum = high + term;
    const double part = sum - high;
    low += (high - (sum - part)) + (term - part);
    high = sum;
  }

  double value() const { return high + low; }
};

inline double difference(const TwoSum& a, const TwoSum& b) { return (a.high - b.high) + (a.low - b.low); }

}  // namespace folkmote
