// Reproducible inputs for tests: SplitMix64 (Steele, Lea and Flood 2014) and exact conversions only, so that every
// machine tests the same numbers.
#pragma once

#include "numerics/strict.hpp"

#include <cmath>
#include <cstdint>

namespace drawn {

class Numbers {
 public:
  explicit Numbers(std::uint64_t seed) : state_(seed) {}
  std::uint64_t bits() {
    state_ += 0x9e3779b97f4a7c15U;
    std::uint64_t z = state_;
    z = (z ^ (z >> 30)) * 0xbf58476d1ce4e5b9U;
    z = (z ^ (z >> 27)) * 0x94d049bb133111ebU;
    return z ^ (z >> 31);
  }
  double unit() { return static_cast<double>(bits() >> 11) * 0x1p-53; }  // [0, 1)
  double between(double low, double high) { return low + (high - low) * unit(); }
  // A positive number whose exponent is uniform over [low, high).
  double magnitude(int low, int high) {
    const int k = low + static_cast<int>(bits() % static_cast<std::uint64_t>(high - low));
    return std::ldexp(1.0 + unit(), k);
  }

 private:
  std::uint64_t state_;
};

}  // namespace drawn
