#pragma once
// The derivatives of the share game of a large community, at a cost of grid nodes and overlapping pairs (MODEL.md,
// section 4), never of n^2. The dense form is its oracle.
#include "numerics/strict.hpp"

#include <cstdint>
#include <optional>
#include <vector>

#include "equilibrium/gain_rows.hpp"
#include "equilibrium/game_slopes.hpp"
#include "equilibrium/theta_kernel.hpp"
#include "information/overlap.hpp"

namespace folkmote {

/// Whether the pairs that share information can be held: a broadcast counts with the square of its audience.
bool wide_slopes_serve(const Knowledge& knowledge);

class WideSlopes : public GameSlopes, private Tangent {
 public:
  /// The first three must outlive this object.
  WideSlopes(const Knowledge& knowledge, const InformationSlopes& slopes, const Stakes& stakes, const StopFlag* stop);

  Tangent& tangent() override { return *this; }
  GameGradient gradient(std::span<const double> cutoffs, std::span<const double> multipliers) override;
  std::vector<double> raised(std::span<const double> cutoffs, const GameShift& shift) override;

 private:
  bool set(std::span<const double> cutoffs) override;
  std::vector<double> passed(std::span<const double> v) const override;
  std::vector<double> passed_back(std::span<const double> v) const override;

  /// A pair that the grid does not count, or counts as independent: the exact law with one weight, the law of
  /// independent members with another, which takes back what the grid has counted. The member itself is taken back too.
  struct Pair {
    int member;
    double exact_weight, exact_covariance, exact_chance;
    PairSlopes exact;
    double apart_weight, apart_covariance, apart_chance;
    PairSlopes apart;
  };
  template <class Visit>
  void each_pair(int i, std::span<const double> cutoffs, const Visit& visit) const;
  Pair make_pair(int i, int j, const ConditionalLaw* law, bool heard, std::span<const double> cutoffs) const;
  ConditionalLaw apart(int i, int j) const;
  bool certain() const;
  void take_row(int i, std::span<const double> cutoffs);
  void add_curve(std::span<const double> cutoffs, std::span<const double> multipliers, GameGradient& gradient) const;
  std::vector<double> raised_curve(std::span<const double> cutoffs, const GameShift& shift) const;

  const Knowledge& knowledge_;
  const InformationSlopes& slopes_;
  const Stakes& stakes_;
  ThetaLaws laws_;
  Overlap overlap_;
  std::vector<std::vector<int>> silent_;  // partners that only share a signal of precision 0
  std::vector<double> reach_;             // (1 - mix) / (Omega - omega_i)
  std::vector<double> contacts_;          // mix / (sum of omega over the members heard)

  // At the cutoffs set.
  std::vector<double> centre_, margin_;
  std::optional<ThetaKernel> kernel_;
  std::vector<ThetaKernel::Expected> expected_;
  std::vector<double> share_;  // S_i
  std::vector<std::int64_t> start_;
  std::vector<std::uint32_t> partner_;
  std::vector<double> beside_;  // dF_i/dkappa_j beside what the grid gives
};

}  // namespace folkmote
