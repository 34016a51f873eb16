#include "numerics/strict.hpp"

#include "numerics/sums.hpp"

#include <cstddef>

#include "numerics/two.hpp"

namespace folkmote {
namespace {

template <class Term>  // Term(i) = entries i and i+1
double eight_lanes(std::size_t n, const Term& term) {
  Two l01 = {0, 0}, l23 = {0, 0}, l45 = {0, 0}, l67 = {0, 0};
  std::size_t i = 0;
  for (; i + 8 <= n; i += 8) {
    l01 += term.two(i);
    l23 += term.two(i + 2);
    l45 += term.two(i + 4);
    l67 += term.two(i + 6);
  }
  double lane[8] = {l01[0], l01[1], l23[0], l23[1], l45[0], l45[1], l67[0], l67[1]};
  for (std::size_t j = 0; i < n; ++i, ++j) lane[j] += term.one(i);
  return ((lane[0] + lane[4]) + (lane[2] + lane[6])) + ((lane[1] + lane[5]) + (lane[3] + lane[7]));
}

struct Entry {
  const double* x;
  double one(std::size_t i) const { return x[i]; }
  Two two(std::size_t i) const { return load_two(x + i); }
};

struct Product {
  const double* x;
  const double* y;
  double one(std::size_t i) const { return x[i] * y[i]; }
  Two two(std::size_t i) const { return load_two(x + i) * load_two(y + i); }
};

}  // namespace

double ordered_sum(std::span<const double> x) { return eight_lanes(x.size(), Entry{x.data()}); }

double ordered_dot(std::span<const double> x, std::span<const double> y) {
  return eight_lanes(x.size(), Product{x.data(), y.data()});
}

}  // namespace folkmote
