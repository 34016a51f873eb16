// A 64-bit digest of inputs, for provenance records and golden files.
//
// FNV-1a with 64 bits: Fowler, Noll & Vo (1991). It finds accidental
// differences; it is no protection against someone who looks for a collision.
//
// Canonical form, the same on every machine and from every caller language. Each item is
// one tag byte and then 8-byte little-endian words:
//   'd'  a number: its IEEE 754 bits. -0 counts as +0, and every NaN as 0x7ff8000000000000.
//   'i'  a whole number of at least 0; 'n' a negative one: two's complement. The width and
//        signedness of the caller's integer type do not matter.
//   's'  a string: its length in bytes, then the bytes as they are.
//   'v'  numbers: how many, then the bits of each as under 'd', without tags.
//   'w'  whole numbers: how many, then each as an item of its own.
// Lengths come first and tags differ, so ("ab", "c") and ("a", "bc") are different inputs.
#pragma once

#include "numerics/strict.hpp"

#include <bit>
#include <concepts>
#include <cstdint>
#include <limits>
#include <span>
#include <string_view>

namespace folkmote {

static_assert(std::numeric_limits<double>::is_iec559);

class Digest {
 public:
  Digest& add(double value) {
    byte('d');
    return word(canonical_bits(value));
  }

  template <std::integral Integer>
  Digest& add(Integer value) {
    if constexpr (std::signed_integral<Integer>) {
      byte(value < 0 ? 'n' : 'i');
      return word(static_cast<std::uint64_t>(static_cast<std::int64_t>(value)));
    } else {
      byte('i');
      return word(static_cast<std::uint64_t>(value));
    }
  }

  Digest& add(std::string_view text) {
    byte('s');
    word(text.size());
    return raw(text);
  }

  // A literal is text; without this it could be taken for a truth value.
  Digest& add(const char* text) { return add(std::string_view(text)); }

  Digest& add(std::span<const double> values) {
    byte('v');
    word(values.size());
    for (const double value : values) {
      word(canonical_bits(value));
    }
    return *this;
  }

  template <std::integral Integer>
  Digest& add(std::span<const Integer> values) {
    byte('w');
    word(values.size());
    for (const Integer value : values) {
      add(value);
    }
    return *this;
  }

  // Bytes without tag or length: plain FNV-1a, for check values and file contents.
  Digest& raw(std::string_view bytes) {
    for (const char character : bytes) {
      byte(character);
    }
    return *this;
  }

  std::uint64_t value() const noexcept { return value_; }

 private:
  static std::uint64_t canonical_bits(double value) noexcept {
    if (value == 0.0) {
      return 0;
    }
    return value == value ? std::bit_cast<std::uint64_t>(value) : 0x7ff8000000000000U;
  }

  void byte(char character) noexcept { value_ = (value_ ^ static_cast<unsigned char>(character)) * 0x100000001b3U; }

  Digest& word(std::uint64_t bits) noexcept {
    for (int shift = 0; shift < 64; shift += 8) {
      value_ = (value_ ^ ((bits >> shift) & 0xffU)) * 0x100000001b3U;
    }
    return *this;
  }

  std::uint64_t value_ = 0xcbf29ce484222325U;
};

}  // namespace folkmote
