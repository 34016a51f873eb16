// SplitMix64: Steele, Lea & Flood (2014), "Fast splittable pseudorandom number
// generators", OOPSLA 2014, with the finaliser constants of D. Stafford's variant 13.
// The kernel uses the finaliser to turn keys into generator states; it draws no
// numbers from the generator itself, which is here so that the finaliser can be
// checked against published outputs.
#pragma once

#include "numerics/strict.hpp"

#include <cstdint>

namespace folkmote {

// The odd number nearest to 2^64 divided by the golden ratio.
inline constexpr std::uint64_t golden_gamma = 0x9e3779b97f4a7c15U;

// A bijection of 64-bit words in which every input bit moves every output bit.
// It maps 0 to 0, so callers add a non-zero constant first.
constexpr std::uint64_t splitmix64_finalise(std::uint64_t word) noexcept {
  word = (word ^ (word >> 30)) * 0xbf58476d1ce4e5b9U;
  word = (word ^ (word >> 27)) * 0x94d049bb133111ebU;
  return word ^ (word >> 31);
}

class SplitMix64 {
 public:
  explicit constexpr SplitMix64(std::uint64_t seed) noexcept : state_(seed) {}

  constexpr std::uint64_t next() noexcept {
    state_ += golden_gamma;
    return splitmix64_finalise(state_);
  }

 private:
  std::uint64_t state_;
};

}  // namespace folkmote
