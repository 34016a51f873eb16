// pcg64 with a selectable sequence and a fast jump ahead.
//
// Generator: O'Neill (2014), "PCG: a family of simple fast space-efficient statistically
// good algorithms for random number generation", HMC-CS-2014-0905: a linear congruential
// generator modulo 2^128 with output function XSL-RR. The sequence is always given by
// number, never by an address in memory ("unique" streams), which would differ by run.
//
// Jump ahead: Brown (1994), "Random number generation with arbitrary strides",
// Transactions of the American Nuclear Society 71:202-203. A jump by d numbers maps the
// state x to m x + s c, where c is the increment, m = a^d and s = 1 + a + ... + a^(d-1)
// modulo 2^128. Neither m nor s depends on the sequence, so both are tabulated for every
// digit of d in base 16: a jump costs one multiply-add for each digit of d that is not 0,
// where Brown's doubling costs four multiplications for each bit.
#pragma once

#include "numerics/strict.hpp"

#include <cstdint>
#include <pcg_random.hpp>
#include <type_traits>

namespace folkmote {

using Word128 = pcg64::state_type;
static_assert(std::is_same_v<Word128, __uint128_t>, "a compiler with 128-bit integers is needed");

constexpr Word128 join(std::uint64_t high, std::uint64_t low) noexcept {
  return (static_cast<Word128>(high) << 64) | low;
}

class Engine : private pcg64 {
 public:
  static constexpr Word128 factor = pcg64::multiplier();

  Engine(Word128 state, Word128 sequence) : pcg64(state, sequence) {}

  std::uint64_t operator()() { return pcg64::operator()(); }

  // Forward by `count` numbers, as if they had been drawn.
  void jump(std::uint64_t count);

  Word128 state() const noexcept { return state_; }
  void set_state(Word128 state) noexcept { state_ = state; }
};

}  // namespace folkmote
