#include "numerics/strict.hpp"

// Do streams with neighbouring keys behave as if they had nothing to do with each other?
//
// The same statistics are also computed for a generator whose mixing is too weak, and
// must raise the alarm there.

#include <algorithm>
#include <array>
#include <catch2/catch.hpp>
#include <cmath>
#include <cstdint>
#include <vector>

#include "random/streams.hpp"
#include "random_statistics.hpp"

using namespace folkmote;

namespace {

constexpr std::size_t million = 1'000'000;

using Words = std::array<std::uint64_t, 4>;  // seed, purpose, community, replication

StreamKey key_of(const Words& words) { return {words[0], Purpose{words[1]}, words[2], words[3]}; }

std::uint64_t first_draw(const Words& words) { return Stream(key_of(words)).bits(); }

// Too weak: nearby keys give nearby multiples of one constant.
std::uint64_t weak_first_draw(const Words& words) { return (words[0] + words[1] + words[2] + words[3]) * golden_gamma; }

// Base keys as a study has them: one seed, few purposes, small indices.
Words base_key(std::size_t k) { return {42, 1 + k % 7, k / 7 % 128, k / 896}; }

template <class Draw>
std::vector<std::uint64_t> along(std::size_t word, std::size_t count, Draw draw) {
  std::vector<std::uint64_t> drawn(count);
  Words key{42, 1, 0, 0};
  for (std::uint64_t& value : drawn) {
    value = draw(key);
    ++key[word];
  }
  return drawn;
}

double neighbour_deviation(const std::vector<std::uint64_t>& drawn, std::size_t lag) {
  PairDeviation deviation;
  for (std::size_t k = lag; k < drawn.size(); ++k) {
    deviation.add(drawn[k - lag], drawn[k]);
  }
  return deviation.value();
}

double cell_deviation(const std::vector<std::uint64_t>& drawn, int shift) {
  std::vector<std::uint64_t> counts(65536);
  for (const std::uint64_t value : drawn) {
    ++counts[(value >> shift) & 65535U];
  }
  return chi_square_deviation(counts);
}

std::vector<std::uint32_t> days_of(const std::vector<std::uint64_t>& drawn, int shift) {
  std::vector<std::uint32_t> days;
  for (const std::uint64_t value : drawn) {
    days.push_back(static_cast<std::uint32_t>(value >> shift));
  }
  return days;
}

// Makes room for a zero bit. Flipping that bit then never leads to another base key; if it
// did, the pair would be counted twice and the statistics would spread too widely.
std::uint64_t with_zero_at(std::uint64_t value, std::size_t place) {
  const std::uint64_t below = (std::uint64_t{1} << place) - 1;
  return ((value & ~below) << 1) | (value & below);
}

struct BitFlips {
  double largest_pair = 0.0;    // over the 256 bits of a key, each from `per_bit` pairs
  double pooled_pair = 0.0;     // all of them together
  double largest_change = 0.0;  // over 256 x 64 pairs of a key bit and an output bit
};

using BitCounts = std::array<std::uint64_t, 64>;

double largest_change(const BitCounts& changes, std::size_t trials) {
  double largest = 0.0;
  for (const std::uint64_t count : changes) {
    const double gap = static_cast<double>(count) - 0.5 * static_cast<double>(trials);
    largest = std::max(largest, std::fabs(gap) / std::sqrt(0.25 * static_cast<double>(trials)));
  }
  return largest;
}

template <class Draw>
BitFlips flip_key_bits(std::size_t per_bit, Draw draw) {
  BitFlips result;
  PairDeviation pooled;
  for (std::size_t bit = 0; bit < 256; ++bit) {
    PairDeviation single;
    BitCounts changes{};
    for (std::size_t k = 0; k < per_bit; ++k) {
      Words key = base_key(bit * per_bit + k);
      key[bit / 64] = with_zero_at(key[bit / 64], bit % 64);
      const std::uint64_t before = draw(key);
      key[bit / 64] |= std::uint64_t{1} << (bit % 64);
      const std::uint64_t after = draw(key);
      single.add(before, after);
      pooled.add(before, after);
      for (std::size_t place = 0; place < 64; ++place) {
        changes[place] += ((before ^ after) >> place) & 1U;
      }
    }
    result.largest_pair = std::max(result.largest_pair, std::fabs(single.value()));
    result.largest_change = std::max(result.largest_change, largest_change(changes, per_bit));
  }
  result.pooled_pair = std::fabs(pooled.value());
  return result;
}

// Undoes derive_engine_seed: that it can be undone is why no two keys share 256 bits.
StreamKey key_behind(const EngineSeed& seed) {
  Words lane{seed.state_high, seed.state_low, seed.stream_high, seed.stream_low};
  for (std::size_t step = 4 * mixing_rounds; step-- > 0;) {
    lane[(step + 1) % 4] ^= splitmix64_finalise(lane[step % 4] + (step + 1) * golden_gamma);
  }
  return key_of(lane);
}

template <class Draw>
std::vector<std::uint64_t> residues(std::uint64_t bound, std::uint64_t cells, Draw draw) {
  Stream stream({1, Purpose::test, bound, cells});
  std::vector<std::uint64_t> counts(cells);
  for (std::size_t k = 0; k < million; ++k) {
    ++counts[draw(stream, bound) % cells];
  }
  return counts;
}

}  // namespace

TEST_CASE("keys that differ by one in a word: first numbers are unrelated", "[random][quality]") {
  for (std::size_t word = 0; word < 4; ++word) {
    INFO("word " << word);
    const auto drawn = along(word, million + 1, first_draw);
    CHECK(std::fabs(neighbour_deviation(drawn, 1)) < surprise);
    CHECK(std::fabs(neighbour_deviation(drawn, 2)) < surprise);
    for (const int shift : {0, 24, 48}) {
      CHECK(std::fabs(cell_deviation(drawn, shift)) < surprise);
    }
    CHECK(std::fabs(collision_deviation(days_of(drawn, 32))) < surprise);
    CHECK(std::fabs(collision_deviation(days_of(drawn, 0))) < surprise);
  }
  const auto weak = along(2, million + 1, weak_first_draw);
  CHECK(std::fabs(neighbour_deviation(weak, 1)) > surprise);
  CHECK(std::fabs(cell_deviation(weak, 48)) > surprise);
  CHECK(std::fabs(collision_deviation(days_of(weak, 32))) > surprise);
}

TEST_CASE("keys that differ by one in a word: whole streams are unrelated", "[random][quality]") {
  for (std::size_t word = 0; word < 4; ++word) {
    Words key{42, 1, 0, 0};
    Stream first(key_of(key));
    ++key[word];
    Stream second(key_of(key));
    PairDeviation same_place, one_apart;
    std::uint64_t previous = 0;
    for (std::size_t k = 0; k < million; ++k) {
      const std::uint64_t here = first.bits();
      const std::uint64_t there = second.bits();
      same_place.add(here, there);
      one_apart.add(previous, there);
      previous = here;
    }
    INFO("word " << word);
    CHECK(std::fabs(same_place.value()) < surprise);
    CHECK(std::fabs(one_apart.value()) < surprise);
  }
}

TEST_CASE("keys that differ in one bit: every output bit changes half the time", "[random][quality]") {
  const BitFlips flips = flip_key_bits(16384, first_draw);
  CHECK(flips.largest_pair < surprise);
  CHECK(flips.pooled_pair < surprise);
  // The largest of 16,384 needs a wider bound: 5.2 keeps the chance of a wrong alarm at 0.3 %.
  CHECK(flips.largest_change < 5.2);
  const BitFlips weak = flip_key_bits(256, weak_first_draw);
  CHECK(weak.largest_pair > surprise);
  CHECK(weak.largest_change > 5.2);
}

TEST_CASE("keys that differ in one bit: every bit of the derived state changes half the time", "[random][quality]") {
  // Without pcg64 behind it, which would hide a mixing with too few rounds.
  const std::array<std::uint64_t EngineSeed::*, 4> parts{&EngineSeed::state_high, &EngineSeed::state_low,
                                                         &EngineSeed::stream_high, &EngineSeed::stream_low};
  for (const auto part : parts) {
    const auto derived = [part](const Words& words) { return derive_engine_seed(key_of(words)).*part; };
    const BitFlips flips = flip_key_bits(4096, derived);
    CHECK(flips.largest_pair < surprise);
    CHECK(flips.pooled_pair < surprise);
    CHECK(flips.largest_change < 5.2);
  }
}

TEST_CASE("birthday spacings over the first numbers of neighbouring keys", "[random][quality]") {
  constexpr std::size_t size = 4096, years = 128;
  const double expected = years * std::pow(static_cast<double>(size), 3) * 0x1p-34;
  const auto deviation = [&](auto draw) {
    double equal = 0.0;
    for (std::size_t year = 0; year < years; ++year) {
      std::vector<std::uint32_t> days;
      for (std::size_t k = 0; k < size; ++k) {
        days.push_back(static_cast<std::uint32_t>(draw(base_key(year * size + k)) >> 32));
      }
      equal += static_cast<double>(equal_spacings(days));
    }
    return (equal - expected) / std::sqrt(expected);
  };
  CHECK(std::fabs(deviation(first_draw)) < surprise);
  CHECK(std::fabs(deviation(weak_first_draw)) > surprise);
}

TEST_CASE("different keys start different generators", "[random][quality]") {
  std::vector<std::uint64_t> states, sequences;
  for (std::size_t k = 0; k < million; ++k) {
    const StreamKey key = key_of(base_key(k));
    const EngineSeed seed = derive_engine_seed(key);
    REQUIRE(key_behind(seed) == key);
    // Parts of 64 bits repeat among 10^6 keys with chance 3e-8 each.
    states.push_back(seed.state_high ^ seed.state_low);
    sequences.push_back(seed.stream_high ^ (seed.stream_low << 1));
  }
  CHECK(repeats(states) == 0);
  CHECK(repeats(sequences) == 0);
}

TEST_CASE("normal draws follow the standard normal law", "[random][quality]") {
  std::vector<double> drawn(million);
  Stream({42, Purpose::test, 0, 0}).fill_normal(drawn);
  const auto mean_of_power = [&](int power, std::size_t lag) {
    double sum = 0.0;
    for (std::size_t k = lag; k < drawn.size(); ++k) {
      sum += lag == 0 ? std::pow(drawn[k], power) : drawn[k] * drawn[k - lag];
    }
    return sum / static_cast<double>(drawn.size() - lag);
  };
  const double unit = surprise / std::sqrt(static_cast<double>(million));
  // Variances of the powers of a standard normal: 1, 2, 15, 96; of a product of two: 1.
  CHECK(std::fabs(mean_of_power(1, 0)) < unit);
  CHECK(std::fabs(mean_of_power(2, 0) - 1.0) < std::sqrt(2.0) * unit);
  CHECK(std::fabs(mean_of_power(3, 0)) < std::sqrt(15.0) * unit);
  CHECK(std::fabs(mean_of_power(4, 0) - 3.0) < std::sqrt(96.0) * unit);
  CHECK(std::fabs(mean_of_power(2, 1)) < unit);
  // Kolmogorov's law gives sqrt(N) D > 2.5 a chance of 7e-6.
  CHECK(normal_distance(drawn) < 2.5);
  for (double& value : drawn) {
    value += 0.01;
  }
  CHECK(normal_distance(drawn) > 2.5);
}

TEST_CASE("uniform draws fill the interval and never touch its ends", "[random][quality]") {
  Stream stream({42, Purpose::test, 1, 0});
  std::vector<std::uint64_t> counts(1000);
  for (std::size_t k = 0; k < 2 * million; ++k) {
    const double value = stream.uniform();
    REQUIRE((value > 0.0 && value < 1.0));
    ++counts[static_cast<std::size_t>(value * 1000.0)];
  }
  CHECK(std::fabs(chi_square_deviation(counts)) < surprise);
}

TEST_CASE("below() is unbiased", "[random][quality]") {
  const auto kernel = [](Stream& stream, std::uint64_t bound) { return stream.below(bound); };
  // Without rejection, 3 * 2^62 makes multiples of 3 twice as likely as the others.
  const auto biased = [](Stream& stream, std::uint64_t bound) {
    return static_cast<std::uint64_t>((static_cast<Word128>(stream.bits()) * bound) >> 64);
  };
  constexpr std::uint64_t large = std::uint64_t{3} << 62;
  for (const std::uint64_t bound : {2U, 6U, 10U, 1000U, 4097U}) {
    INFO("bound " << bound);
    CHECK(std::fabs(chi_square_deviation(residues(bound, bound, kernel))) < surprise);
  }
  CHECK(std::fabs(chi_square_deviation(residues(large, 3, kernel))) < surprise);
  CHECK(std::fabs(chi_square_deviation(residues(large, 3, biased))) > surprise);
}
