// From the key of a stream to the 256 bits that start its generator.
#pragma once

#include "numerics/strict.hpp"

#include <array>
#include <cstddef>
#include <cstdint>

#include "random/purpose.hpp"
#include "random/splitmix64.hpp"

namespace folkmote {

// Names one stream. `community` and `replication` are indices from 0 that do not
// depend on how the work is split over threads, processes or machines.
struct StreamKey {
  std::uint64_t seed = 0;
  Purpose purpose = Purpose::test;
  std::uint64_t community = 0;
  std::uint64_t replication = 0;

  friend constexpr bool operator==(const StreamKey&, const StreamKey&) = default;
};

// Two 128-bit numbers: where the generator starts, and which of its 2^127 sequences
// it follows (the highest bit of the second is not used by the generator).
struct EngineSeed {
  std::uint64_t state_high;
  std::uint64_t state_low;
  std::uint64_t stream_high;
  std::uint64_t stream_low;

  friend constexpr bool operator==(const EngineSeed&, const EngineSeed&) = default;
};

inline constexpr std::size_t mixing_rounds = 4;

// The mixing function. The four key words sit in four lanes of 64 bits. A round goes
// once round the ring: each lane is xored with the SplitMix64 finaliser of the lane
// before it plus a constant, and the constants are successive multiples of golden_gamma:
//
//     lane[1] ^= F(lane[0] + g), lane[2] ^= F(lane[1] + 2g),
//     lane[3] ^= F(lane[2] + 3g), lane[0] ^= F(lane[3] + 4g), and so on to 16g.
//
// Why this form: every step can be undone (it is an unbalanced Feistel step), so two
// different keys never give the same 256 bits. A sponge with one 64-bit word of state
// would be as fast, but about 2^32 keys would suffice for two of them to share all
// their numbers, and a large study with many replications comes near that many.
// After two rounds every lane depends on all four words; the other two are margin.
constexpr EngineSeed derive_engine_seed(const StreamKey& key) noexcept {
  std::array<std::uint64_t, 4> lane{key.seed, static_cast<std::uint64_t>(key.purpose), key.community, key.replication};
  std::uint64_t constant = 0;
  for (std::size_t step = 0; step < 4 * mixing_rounds; ++step) {
    constant += golden_gamma;
    lane[(step + 1) % 4] ^= splitmix64_finalise(lane[step % 4] + constant);
  }
  return {lane[0], lane[1], lane[2], lane[3]};
}

}  // namespace folkmote
