#include "numerics/strict.hpp"

// The generator against published outputs, and the interface of a stream.

#include <bit>
#include <catch2/catch.hpp>
#include <cmath>
#include <limits>
#include <stdexcept>
#include <string>
#include <vector>

#include "numerics/normal.hpp"
#include "random/digest.hpp"
#include "random/streams.hpp"
#include "random_table.hpp"

using namespace folkmote;

namespace {

const StreamKey some_key{20240229, Purpose::relay, 17, 3};

std::vector<std::uint64_t> words_by_stepping(std::size_t count) {
  Stream stream(some_key);
  std::vector<std::uint64_t> words(count);
  for (std::uint64_t& word : words) {
    word = stream.bits();
  }
  return words;
}

bool same_bits(double a, double b) { return std::bit_cast<std::uint64_t>(a) == std::bit_cast<std::uint64_t>(b); }

}  // namespace

TEST_CASE("SplitMix64 gives the published numbers", "[random]") {
  std::size_t rows = 0;
  for (const auto& row : random_table("splitmix64.csv")) {
    SplitMix64 generator(row.integer("seed"));
    for (std::uint64_t skipped = 0; skipped < row.integer("index"); ++skipped) {
      generator.next();
    }
    CHECK(generator.next() == row.integer("value"));
    ++rows;
  }
  CHECK(rows == 60);
}

TEST_CASE("pcg64 gives the published numbers, by stepping and by our jump", "[random]") {
  std::size_t rows = 0;
  for (const auto& row : random_table("pcg.csv")) {
    if (row.text("generator") != "pcg64") {
      continue;
    }
    const std::uint64_t index = row.integer("index");
    INFO("seed " << row.text("seed") << ", index " << index);
    Engine jumping(row.integer("seed"), row.integer("stream"));
    jumping.jump(index);
    CHECK(jumping() == row.integer("value"));
    if (index <= 1'000'000) {
      Engine stepping(row.integer("seed"), row.integer("stream"));
      for (std::uint64_t skipped = 0; skipped < index; ++skipped) {
        stepping();
      }
      CHECK(stepping() == row.integer("value"));
    }
    ++rows;
  }
  CHECK(rows == 30 + 12 + 3);
}

TEST_CASE("the installed pcg32 gives the published numbers", "[random]") {
  std::size_t rows = 0;
  for (const auto& row : random_table("pcg.csv")) {
    if (row.text("generator") != "pcg32") {
      continue;
    }
    pcg32 generator(row.integer("seed"), row.integer("stream"));
    generator.advance(row.integer("index"));
    CHECK(generator() == row.integer("value"));
    ++rows;
  }
  CHECK(rows == 30 + 12 + 3);
}

TEST_CASE("the jump is the library's own jump, for any distance", "[random]") {
  SplitMix64 distances(11);
  for (int shift = 0; shift < 64; ++shift) {
    const std::uint64_t distance = distances.next() >> shift;
    INFO("distance " << distance);
    const Word128 state = join(distances.next(), distances.next());
    const Word128 sequence = join(distances.next(), distances.next());
    Engine ours(state, sequence);
    pcg64 library(state, sequence);
    ours.jump(distance);
    library.advance(distance);
    CHECK(ours() == library());
  }
}

TEST_CASE("a number has an address: seek and advance equal stepping", "[random]") {
  const auto words = words_by_stepping(5000);
  Stream stream(some_key);
  SECTION("any place, forward and backward") {
    SplitMix64 places(5);
    for (int trial = 0; trial < 2000; ++trial) {
      const std::uint64_t place = places.next() % words.size();
      stream.seek(place);
      REQUIRE(stream.position() == place);
      REQUIRE(stream.bits() == words[place]);
      REQUIRE(stream.position() == place + 1);
    }
  }
  SECTION("short steps") {
    for (std::uint64_t skip = 0; stream.position() + skip < words.size(); ++skip) {
      stream.advance(skip);
      const std::uint64_t place = stream.position();
      REQUIRE(stream.bits() == words[place]);
    }
  }
  SECTION("far away and back") {
    constexpr std::uint64_t end = std::numeric_limits<std::uint64_t>::max();
    stream.seek(end - 1);
    stream.bits();
    CHECK(stream.position() == end);
    CHECK_THROWS_AS(stream.advance(1), std::out_of_range);
    stream.seek(3);
    CHECK(stream.bits() == words[3]);
    stream.advance(end - 4);
    CHECK(stream.position() == end);
  }
}

TEST_CASE("each kind of draw takes the word at its position", "[random]") {
  const auto words = words_by_stepping(64);
  Stream stream(some_key);
  for (std::size_t place = 0; place + 2 < words.size(); place += 3) {
    REQUIRE(stream.bits() == words[place]);
    REQUIRE(same_bits(stream.uniform(), uniform_from_bits(words[place + 1])));
    const double expected = normal_quantile(uniform_from_bits(words[place + 2]));
    REQUIRE(same_bits(stream.normal(), expected));
  }
}

TEST_CASE("filling an array equals repeated calls", "[random]") {
  for (const std::size_t size : {0U, 1U, 7U, 64U, 1000U, 4099U}) {
    Stream filled(some_key);
    Stream called(some_key);
    std::vector<double> uniforms(size), normals(size);
    filled.fill_uniform(uniforms);
    filled.fill_normal(normals);
    bool equal = true;
    for (const double value : uniforms) {
      equal = equal && same_bits(value, called.uniform());
    }
    for (const double value : normals) {
      equal = equal && same_bits(value, called.normal());
    }
    CHECK(equal);
    CHECK(filled.position() == 2 * size);
    CHECK(filled.bits() == called.bits());
  }
}

TEST_CASE("a uniform number is never 0 or 1", "[random]") {
  constexpr std::uint64_t all = std::numeric_limits<std::uint64_t>::max();
  CHECK(uniform_from_bits(0) == 0x1p-54);
  CHECK(uniform_from_bits(all) == 1.0 - 0x1p-53);
  CHECK(uniform_from_bits(all >> 1) < 0.5);
  CHECK(uniform_from_bits((all >> 1) + 1) == 0.5);
  // Cells at both ends and in the middle stay in order, within half a cell of the midpoint.
  for (const std::uint64_t start : {std::uint64_t{0}, (all >> 1) - 2048 * 500, all - 2048 * 1000}) {
    double previous = 0.0;
    for (std::uint64_t step = 0; step <= 1000; ++step) {
      const double value = uniform_from_bits(start + 2048 * step);
      const double lower = static_cast<double>((start + 2048 * step) >> 11) * 0x1p-53;
      REQUIRE((value >= previous && value > 0.0 && value < 1.0));
      REQUIRE(std::fabs(value - lower) <= 0x1p-53);
      previous = value;
    }
  }
  CHECK(std::isfinite(normal_quantile(uniform_from_bits(0))));
  CHECK(std::isfinite(normal_quantile(uniform_from_bits(all))));
}

TEST_CASE("below() stays in range and refuses 0", "[random]") {
  Stream stream(some_key);
  CHECK_THROWS_AS(stream.below(0), std::invalid_argument);
  CHECK(stream.position() == 0);
  const std::uint64_t all = std::numeric_limits<std::uint64_t>::max();
  for (const std::uint64_t bound : {std::uint64_t{1}, std::uint64_t{2}, std::uint64_t{10}, all}) {
    for (int draw = 0; draw < 1000; ++draw) {
      REQUIRE(stream.below(bound) < bound);
    }
  }
}

TEST_CASE("FNV-1a gives the published digests", "[random]") {
  // From the test vectors of the authors (isthe.com/chongo/tech/comp/fnv).
  CHECK(Digest().value() == 0xcbf29ce484222325U);
  CHECK(Digest().raw("a").value() == 0xaf63dc4c8601ec8cU);
  CHECK(Digest().raw("foobar").value() == 0x85944171f73967e8U);
}

TEST_CASE("the digest reads the canonical form and nothing else", "[random]") {
  const auto of = [](auto item) { return Digest().add(item).value(); };
  using namespace std::string_literals;
  CHECK(of(1.0) == Digest().raw("d\0\0\0\0\0\0\xf0\x3f"s).value());
  CHECK(of(-2) == Digest().raw("n\xfe\xff\xff\xff\xff\xff\xff\xff"s).value());
  CHECK(of("ab") == Digest().raw("s\x02\0\0\0\0\0\0\0ab"s).value());

  CHECK(of(-0.0) == of(0.0));
  CHECK(of(-std::nan("7")) == of(std::numeric_limits<double>::quiet_NaN()));
  CHECK(of(5) == of(std::uint64_t{5}));
  CHECK(of(-1) != of(std::numeric_limits<std::uint64_t>::max()));
  CHECK(of(1) != of(1.0));
  CHECK(of(1.0) != of(std::nextafter(1.0, 2.0)));
  CHECK(Digest().add("ab").add("c").value() != Digest().add("a").add("bc").value());

  const std::vector<double> numbers{1.0, -0.0, 3.5};
  const std::vector<std::int32_t> small{1, -2, 3};
  const std::vector<std::int64_t> large{1, -2, 3};
  CHECK(of(std::span(numbers)) != of(std::span(numbers).first(2)));
  CHECK(of(std::span<const double>(numbers)) == Digest().add(numbers).value());
  CHECK(of(std::span<const std::int32_t>(small)) == of(std::span<const std::int64_t>(large)));
}
