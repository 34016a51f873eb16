#include "numerics/strict.hpp"

#include "random/engine.hpp"

#include <array>
#include <cstddef>

namespace folkmote {
namespace {

// The map x -> multiplier * x + sum * increment.
struct Stride {
  Word128 multiplier;
  Word128 sum;
};

constexpr Stride followed_by(const Stride& first, const Stride& second) {
  return {first.multiplier * second.multiplier, second.multiplier * first.sum + second.sum};
}

constexpr std::size_t digits = 16;
constexpr std::size_t base = 16;
using StrideTable = std::array<std::array<Stride, base>, digits>;

constexpr StrideTable make_strides() {
  StrideTable table{};
  Stride unit{Engine::factor, 1};
  for (auto& row : table) {
    row[0] = {1, 0};
    for (std::size_t digit = 1; digit < base; ++digit) {
      row[digit] = followed_by(row[digit - 1], unit);
    }
    unit = followed_by(row[base - 1], unit);
  }
  return table;
}

constexpr StrideTable strides = make_strides();

}  // namespace

void Engine::jump(std::uint64_t count) {
  for (std::size_t place = 0; count != 0; ++place, count /= base) {
    const std::size_t digit = count % base;
    if (digit != 0) {
      const Stride& stride = strides[place][digit];
      state_ = stride.multiplier * state_ + stride.sum * increment();
    }
  }
}

}  // namespace folkmote
