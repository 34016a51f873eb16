#include "numerics/strict.hpp"

#include "random/streams.hpp"

#include <limits>
#include <stdexcept>

#include "numerics/normal.hpp"

namespace folkmote {
namespace {

Engine engine_for(const StreamKey& key) {
  const EngineSeed seed = derive_engine_seed(key);
  return {join(seed.state_high, seed.state_low), join(seed.stream_high, seed.stream_low)};
}

}  // namespace

Stream::Stream(const StreamKey& key) : engine_(engine_for(key)), origin_(engine_.state()) {}

double Stream::normal() { return normal_quantile(uniform()); }

std::uint64_t Stream::below(std::uint64_t bound) {
  if (bound == 0) {
    throw std::invalid_argument("below: the bound must be at least 1");
  }
  Word128 product = static_cast<Word128>(bits()) * bound;
  if (static_cast<std::uint64_t>(product) < bound) {
    // 2^64 modulo bound: so many low parts would be one too many for some results.
    const std::uint64_t surplus = (0 - bound) % bound;
    while (static_cast<std::uint64_t>(product) < surplus) {
      product = static_cast<Word128>(bits()) * bound;
    }
  }
  return static_cast<std::uint64_t>(product >> 64);
}

void Stream::fill_uniform(std::span<double> out) {
  for (double& value : out) {
    value = uniform();
  }
}

void Stream::fill_normal(std::span<double> out) {
  fill_uniform(out);
  normal_quantile(out, out);
}

void Stream::seek(std::uint64_t position) {
  const bool forward = position >= position_;
  if (!forward) {
    engine_.set_state(origin_);
  }
  engine_.jump(forward ? position - position_ : position);
  position_ = position;
}

void Stream::advance(std::uint64_t count) {
  if (count > std::numeric_limits<std::uint64_t>::max() - position_) {
    throw std::out_of_range("advance: past the end of the stream");
  }
  seek(position_ + count);
}

}  // namespace folkmote
