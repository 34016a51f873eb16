#pragma once
// The turnout curve (MODEL.md, section 4): what a member expects of everybody, were nobody to share information with
// it.
#include "numerics/strict.hpp"

#include <span>
#include <vector>

#include "information/overlap.hpp"
#include "information/two_sum.hpp"
#include "parallel/workers.hpp"

namespace folkmote {

/// sum_j omega_j P(e_j <= kappa_j | e_i = t) over all j, i itself included, every pair taken as independent given
/// theta and the common report (see ThetaLaws):
///   X_i(t) = integral of A(theta, M) dN(theta | M, e_i = t) dN(M | e_i = t),
///   A(theta, M) = sum_j omega_j Phi( (kappa_j - mu - pull_j (theta - mu) - sway_j (M - mu)) / sqrt(spread_j) ).
/// Without a common report M = mu, and the curve has one layer.
class TurnoutCurve {
 public:
  /// Cost of a direct term relative to a node: larger puts more members on the grid.
  struct Layout {
    double direct_cost = 4.0;
  };

  /// Member i asks for t in [lowest_i, highest_i] only.
  TurnoutCurve(double prior_mean, ThetaLaws laws, std::vector<double> weight, std::span<const double> lowest,
               std::span<const double> highest, const Layout& layout);

  /// Takes the cutoffs and tabulates the curve. `steps_act`: whether a member who knows its index for certain acts when
  /// it lies exactly at its cutoff.
  void tabulate(std::span<const double> cutoffs, bool steps_act, const Execution& execution);

  struct Value {
    double share;  // X_i(t)
    double slope;  // dX_i/dt; 0 where it is summed over everybody
  };
  Value expect(int i, double t) const;

  /// Tabulates how the curve moves with the cutoffs along a direction v; false where that has no derivative, because
  /// some index is certain.
  bool tabulate_direction(std::span<const double> direction, const Execution& execution);
  /// Sum of omega_j phi(z_ij) (v_j - rho_ij v_i) / s_ij over all j: how X_i moves when cutoffs, and t with them, do.
  double along(int i, double t) const;
  /// Bound on the error of along().
  double error_along() const { return error_along_; }

  /// P(e_j <= kappa_j | e_i = t) as if the two shared no information but the common report: the argument of Phi.
  double independent_z(int i, int j, double t) const;

  const ThetaLaws& laws() const { return laws_; }
  double total() const { return total_; }
  /// Bound on the error of expect().share: aliasing, truncation and rounding.
  double error() const { return error_; }
  std::size_t nodes() const { return nodes_; }
  /// Values of M at which the curve is tabulated. Infinite where they would be too many: the curve is then of no use.
  double layers() const { return layers_; }
  /// Normal CDFs that one tabulation takes, for benches.
  double evaluations() const;
  /// Members whose expectation is summed over everybody instead.
  int direct_members() const { return direct_members_; }

 private:
  struct Grid {
    double smoothing = 0.0;  // u
    double step = 0.0;       // h
    double first = 0.0;
    double nodes = 0.0;
  };

  void lay_layers(std::span<const double> lowest, std::span<const double> highest);
  Grid grid_for(double least_doubt, std::span<const double> lowest, std::span<const double> highest) const;
  void lay_out(std::span<const double> lowest, std::span<const double> highest, const Layout& layout);
  void bound_error(std::span<const double> lowest, std::span<const double> highest);
  void tabulate_block(int block, std::span<double> table) const;
  /// Sums over all members, block by block: add(block, layer, its own table of the layer).
  template <class Add>
  void sum_blocks(std::vector<double>& table, const Execution& execution, const Add& add) const;
  void tabulate_layer(int block, std::size_t layer, std::span<double> table) const;
  void tabulate_direction_layer(int block, std::size_t layer, std::span<double> table) const;
  /// Nodes at which a member is in doubt: its chance is 1 below them and 0 above.
  struct Zone {
    std::size_t begin, count;
    double margin, width;
  };
  Zone zone_of(int j, double shift) const;
  void add_member(int j, double shift, std::span<double> chances, std::span<double> above, std::span<double> z) const;
  Value on_grid(const std::vector<double>& table, int i, std::size_t layer, double centre) const;
  Value over_layers(const std::vector<double>& table, int i, double t) const;
  Value from_table(const std::vector<double>& table, int i, double t) const;
  double directly_along(int i, double t) const;
  Value directly(int i, double t) const;
  double node(std::size_t k) const { return grid_.first + grid_.step * static_cast<double>(k); }
  /// M - mu of a layer.
  double shift(std::size_t layer) const { return first_shift_ + layer_step_ * static_cast<double>(layer); }
  int block_size() const;

  double prior_mean_;
  ThetaLaws laws_;
  std::vector<double> weight_;
  double total_;
  double least_width2_ = 0.0;  // min_j spread_j / pull_j^2
  double layers_ = 1.0;
  double layer_step_ = 0.0;
  double first_shift_ = 0.0;
  Grid grid_;
  double least_doubt_ = 0.0;  // of the members on the grid
  std::size_t nodes_ = 0;
  int direct_members_ = 0;
  double error_ = 0.0;
  bool steps_act_ = true;
  std::vector<double> cutoffs_;
  std::vector<double> table_;
  std::vector<double> direction_;
  std::vector<double> direction_table_;
  double error_along_ = 0.0;
};

template <class Add>
void TurnoutCurve::sum_blocks(std::vector<double>& table, const Execution& execution, const Add& add) const {
  const int count = (static_cast<int>(weight_.size()) + block_size() - 1) / block_size();
  const std::size_t entries = table.size();
  std::vector<double> tables(static_cast<std::size_t>(count) * entries, 0.0);
  run_tasks(count, execution, [&](std::int64_t block, const StopFlag& stop) {
    const std::span<double> own(tables.data() + static_cast<std::size_t>(block) * entries, entries);
    for (std::size_t layer = 0; layer * nodes_ < entries && !stop.raised(); ++layer) {
      add(static_cast<int>(block), layer, own.subspan(layer * nodes_, nodes_));
    }
  });
  for (std::size_t k = 0; k < entries; ++k) {
    TwoSum sum;
    for (int block = 0; block < count; ++block) sum.add(tables[static_cast<std::size_t>(block) * entries + k]);
    table[k] = sum.value();
  }
}

}  // namespace folkmote
