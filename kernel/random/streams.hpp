// Keyed streams of random numbers whose every number has an address.
#pragma once

#include "numerics/strict.hpp"

#include <cstdint>
#include <span>

#include "random/engine.hpp"
#include "random/stream_key.hpp"

namespace folkmote {

// The promise: the same stream version, the same inputs and the same 64-bit seed give
// the same bytes, for any number of threads, any sharding, any caller language, any
// compiler (gcc, clang) and any CPU (x86-64, aarch64).
// Any change of the numbers that some key gives, or of the purposes and positions the
// model draws from, raises this number and replaces tests/reference/golden_streams.csv.
inline constexpr unsigned stream_version = 1;

// From a 64-bit word to a number strictly inside (0, 1): the midpoint (k + 1/2) 2^-53 of
// one of 2^53 equal cells, k being the upper 53 bits.
// In the lower half the midpoint is exact; the smallest result is 2^-54.
// In the upper half k + 1/2 has one bit too many and is rounded to the even neighbour, so
// results are multiples of 2^-52. The last midpoint would round to 1: it becomes the
// greatest number below 1, which is 1 - 2^-53. So neither 0 nor 1 can be returned.
inline double uniform_from_bits(std::uint64_t bits) noexcept {
  constexpr double below_one = 1.0 - 0x1p-53;
  // Through a signed integer: the conversion is then one instruction on every target.
  const double cell = static_cast<double>(static_cast<std::int64_t>(bits >> 11));
  const double middle = (cell + 0.5) * 0x1p-53;
  return middle < below_one ? middle : below_one;
}

// One stream. A cheap value (64 bytes): copy it to draw the same numbers twice.
//
// Positions count 64-bit words from 0. bits(), uniform() and normal() take exactly one,
// so "number k of this stream" means the same whoever draws it and whatever was drawn
// before: the relay noise of a pair of members stays the same when other links are added
// or cut. below() may take more than one; do not mix it with positions.
// The words have positions 0 to 2^64 - 2. Position 2^64 - 1 is the end: it can be
// reached, but nothing may be drawn there (no program lives long enough to step to it).
class Stream {
 public:
  explicit Stream(const StreamKey& key);

  std::uint64_t bits() {
    ++position_;
    return engine_();
  }

  // Strictly inside (0, 1); see uniform_from_bits.
  double uniform() { return uniform_from_bits(bits()); }

  // Standard normal by inversion: normal_quantile(uniform()). It lies within
  // -8.3 and 8.3, the quantiles of 2^-54 and 1 - 2^-53.
  double normal();

  // A whole number from 0 to bound - 1, each exactly as likely as the others.
  // Lemire (2019), "Fast random integer generation in an interval", ACM Transactions on
  // Modeling and Computer Simulation 29(1):3. May reject words, with probability below
  // bound / 2^64 for each. Throws std::invalid_argument if bound is 0.
  std::uint64_t below(std::uint64_t bound);

  // The same numbers as that many calls one after the other.
  void fill_uniform(std::span<double> out);
  void fill_normal(std::span<double> out);

  // Where the next word comes from.
  std::uint64_t position() const noexcept { return position_; }

  // Makes the word at `position` the next one. Forward it costs one multiply-add for each
  // hexadecimal digit of the distance, at most 16; backward the distance is from 0.
  void seek(std::uint64_t position);

  // Skips `count` words. Throws std::out_of_range, and stays, if the end would be passed.
  void advance(std::uint64_t count);

 private:
  Engine engine_;
  Word128 origin_;  // The state at position 0.
  std::uint64_t position_ = 0;
};

}  // namespace folkmote
