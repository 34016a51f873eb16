// Both rules come from the three-term recurrence of the orthonormal polynomials,
//   b_k p_k = x p_(k-1) - b_(k-1) p_(k-2),
// whose Jacobi matrix has the zeros of p_n as eigenvalues (Golub and Welsch 1969, Math. Comp. 23:221-230). The
// zeros are isolated by counting sign changes (Sturm; Wilkinson 1965, The Algebraic Eigenvalue Problem, 5.38), then
// polished by Newton's method; the weights are mass / (p_0^2 + ... + p_(n-1)^2) (Szego 1939, section 3.4). Only
// + - * / and sqrt are used.
#include "numerics/strict.hpp"

#include "numerics/quadrature.hpp"

#include <cmath>

#include "numerics/bits.hpp"

namespace folkmote {
namespace {

struct Family {
  std::vector<double> b;  // b[k-1] = b_k
  double mass;            // integral of the weight function
  double reach;           // all zeros lie within [-reach, reach]
};

// Number of eigenvalues of the Jacobi matrix below x.
std::size_t count_below(const Family& family, std::size_t n, double x) {
  std::size_t count = 0;
  double pivot = 1;
  for (std::size_t k = 0; k < n; ++k) {
    const double b = k == 0 ? 0.0 : family.b[k - 1];
    pivot = -x - b * b / pivot;
    if (pivot == 0) pivot = 1e-300;
    if (pivot < 0) ++count;
  }
  return count;
}

struct Evaluation {
  double step;     // p_n / p_n'
  double squares;  // p_0^2 + ... + p_(n-1)^2 with p_0 = 1
};

Evaluation evaluate(const Family& family, std::size_t n, double x) {
  double before = 0, now = 1, slope_before = 0, slope = 0, squares = 0;
  for (std::size_t k = 1; k <= n; ++k) {
    squares += now * now;
    const double b = family.b[k - 1], b_before = k == 1 ? 0.0 : family.b[k - 2];
    const double next = (x * now - b_before * before) / b;
    const double slope_next = (x * slope + now - b_before * slope_before) / b;
    before = now, now = next;
    slope_before = slope, slope = slope_next;
  }
  return {now / slope, squares};
}

// The zero number `index` (from 0, ascending), which lies above 0.
double zero(const Family& family, std::size_t n, std::size_t index) {
  double low = 0, high = family.reach;
  for (int pass = 0; pass < 26; ++pass) {
    const double x = 0.5 * (low + high);
    (count_below(family, n, x) > index ? high : low) = x;
  }
  double x = 0.5 * (low + high);
  for (int pass = 0; pass < 4; ++pass) x -= evaluate(family, n, x).step;
  return x;
}

QuadratureRule rule(const Family& family, std::size_t n) {
  QuadratureRule result{std::vector<double>(n), std::vector<double>(n)};
  for (std::size_t i = n / 2; i < n; ++i) {
    const bool middle = n % 2 == 1 && i == n / 2;
    const double x = middle ? 0.0 : zero(family, n, i);
    const double weight = family.mass / evaluate(family, n, x).squares;
    result.nodes[i] = x;
    result.weights[i] = weight;
    result.nodes[n - 1 - i] = middle ? x : -x;
    result.weights[n - 1 - i] = weight;
  }
  return result;
}

}  // namespace

QuadratureRule gauss_legendre(std::size_t n) {
  Family family{std::vector<double>(n), 2.0, 1.0};
  for (std::size_t k = 1; k <= n; ++k) {
    const double j = static_cast<double>(k);
    family.b[k - 1] = j / std::sqrt((2 * j - 1) * (2 * j + 1));
  }
  return rule(family, n);
}

QuadratureRule gauss_hermite(std::size_t n) {
  Family family{std::vector<double>(n), 1.0, 2.0 * std::sqrt(static_cast<double>(n) + 1.0)};
  for (std::size_t k = 1; k <= n; ++k) family.b[k - 1] = std::sqrt(static_cast<double>(k));
  return rule(family, n);
}

}  // namespace folkmote
