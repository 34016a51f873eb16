#pragma once
// Sums over all pairs of a large community whose members meet through theta only, as two passes over a grid of theta.
#include "numerics/strict.hpp"

#include <cstdint>
#include <span>
#include <vector>

namespace folkmote {

/// For members i who see theta - mu as N(centre_i, doubt_i), and members j who act with chance
///   Phi(zeta_j(x)), zeta_j(x) = (margin_j - pull_j x) / sqrt(spread_j), x = theta - mu,
/// integrals over x by the trapezoid rule, which for products of Gaussian factors errs by about
/// exp(-2 pi^2 v / h^2), v the smallest variance of a product and h the step (Goodwin 1949): 1e-14 here.
class ThetaKernel {
 public:
  struct Members {
    std::span<const double> centre, doubt;         // of i
    std::span<const double> margin, pull, spread;  // of j
  };
  /// `members` must outlive this object.
  explicit ThetaKernel(const Members& members);

  std::size_t nodes() const { return nodes_; }

  /// sum_j weight_j f_j on the grid, f_j the chance, its derivative in the margin (`density`), or in all of margin,
  /// pull and spread along given directions.
  std::vector<double> chances(std::span<const double> weight) const;
  std::vector<double> densities(std::span<const double> weight) const;
  std::vector<double> directions(std::span<const double> weight, double margin, std::span<const double> pull,
                                 std::span<const double> spread) const;

  /// What i expects of a function on the grid, and the derivatives of that in centre and doubt.
  struct Expected {
    double value, by_centre, by_doubt;
  };
  Expected expected(int i, std::span<const double> function) const;
  double value(int i, std::span<const double> function) const;

  /// Transposed: sum_i weight_i (the weights with which i sums over the grid).
  std::vector<double> views(std::span<const double> weight) const;
  /// sum over the grid of view times the derivatives of j's chance in margin, pull and spread.
  struct Collected {
    double by_margin, by_pull, by_spread;
  };
  Collected collected(int j, std::span<const double> view) const;
  double density(int j, std::span<const double> view) const;

 private:
  /// Nodes first .. first + count - 1, at which a member's argument is start + step * k.
  struct Window {
    std::size_t first = 0, count = 0;
    double start = 0.0, step = 0.0;
  };
  Window window(double argument_at_first_node, double argument_step) const;
  Window of_view(int i) const;
  Window of_chance(int j) const;
  double node(std::size_t k) const { return first_ + step_ * static_cast<double>(k); }

  Members members_;
  double step_ = 0.0;
  double first_ = 0.0;
  std::size_t nodes_ = 0;
};

}  // namespace folkmote
