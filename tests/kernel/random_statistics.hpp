// Statistics for tests of random numbers, each scaled to standard deviations from what
// perfect randomness gives, so that one bound serves all of them.
#pragma once

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <vector>

// Chance of a wrong alarm per statistic: 7e-6. The draws are fixed, so a test that passes
// once passes always; the bound says how surprising a failure would have been.
inline constexpr double surprise = 4.5;

inline double centred(std::uint64_t word) {
  return static_cast<double>(static_cast<std::int64_t>(word >> 11)) * 0x1p-53 - 0.5;
}

// Correlation of uniform pairs about their known mean and variance, times sqrt(N).
// |correlation| < 4.5 / sqrt(N) is |pair_deviation| < 4.5.
class PairDeviation {
 public:
  void add(std::uint64_t first, std::uint64_t second) {
    sum_ += 12.0 * centred(first) * centred(second);
    ++count_;
  }
  double value() const { return sum_ / std::sqrt(static_cast<double>(count_)); }

 private:
  double sum_ = 0.0;
  std::uint64_t count_ = 0;
};

// Pearson's chi-square of equally likely cells, as (X - df) / sqrt(2 df). Too even is as
// suspicious as too uneven.
inline double chi_square_deviation(const std::vector<std::uint64_t>& counts) {
  double total = 0.0;
  for (const std::uint64_t count : counts) {
    total += static_cast<double>(count);
  }
  const double expected = total / static_cast<double>(counts.size());
  double chi_square = 0.0;
  for (const std::uint64_t count : counts) {
    const double gap = static_cast<double>(count) - expected;
    chi_square += gap * gap / expected;
  }
  const double freedom = static_cast<double>(counts.size() - 1);
  return (chi_square - freedom) / std::sqrt(2.0 * freedom);
}

// Numbers equal to the one before in sorted order.
template <class Number>
std::uint64_t repeats(std::vector<Number> numbers) {
  std::sort(numbers.begin(), numbers.end());
  std::uint64_t count = 0;
  for (std::size_t i = 1; i < numbers.size(); ++i) {
    count += numbers[i] == numbers[i - 1] ? 1U : 0U;
  }
  return count;
}

// N words on 2^32 days: about N^2 / 2^33 share a birthday, nearly Poisson.
inline double collision_deviation(const std::vector<std::uint32_t>& days) {
  const double size = static_cast<double>(days.size());
  const double expected = size * size * 0x1p-33;
  return (static_cast<double>(repeats(days)) - expected) / std::sqrt(expected);
}

// Marsaglia & Tsang (2002), "Some difficult-to-pass tests of randomness", Journal of
// Statistical Software 7(3): N birthdays in a year of 2^32 days; the number of equal
// spacings is nearly Poisson with mean N^3 / 2^34.
inline std::uint64_t equal_spacings(std::vector<std::uint32_t> days) {
  std::sort(days.begin(), days.end());
  std::vector<std::uint32_t> spacings;
  for (std::size_t i = 1; i < days.size(); ++i) {
    spacings.push_back(days[i] - days[i - 1]);
  }
  return repeats(spacings);
}

// sqrt(N) times the Kolmogorov-Smirnov distance from the standard normal law.
inline double normal_distance(std::vector<double> sample) {
  std::sort(sample.begin(), sample.end());
  const double size = static_cast<double>(sample.size());
  double distance = 0.0;
  for (std::size_t i = 0; i < sample.size(); ++i) {
    const double law = 0.5 * std::erfc(-sample[i] / std::sqrt(2.0));
    const double below = static_cast<double>(i) / size;
    distance = std::max({distance, law - below, below + 1.0 / size - law});
  }
  return distance * std::sqrt(size);
}
