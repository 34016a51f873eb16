#pragma once
// The derivatives of a game whose pairs are all held: every payoff that gives its gains' rows (gain_rows.hpp).
#include "numerics/strict.hpp"

#include "equilibrium/gain_rows.hpp"
#include "equilibrium/game_slopes.hpp"

namespace folkmote {

/// P as a matrix.
class DenseTangent : public Tangent {
 public:
  DenseTangent(GainRows& game, const StopFlag* stop) : Tangent(stop), game_(game) {}
  bool set(std::span<const double> cutoffs) override;

 protected:
  std::vector<double> passed(std::span<const double> v) const override;
  std::vector<double> passed_back(std::span<const double> v) const override;

 private:
  std::span<const double> row(std::size_t i) const { return {matrix_.data() + i * diagonal_.size(), diagonal_.size()}; }

  GainRows& game_;
  std::vector<double> matrix_;
};

class DenseSlopes : public GameSlopes {
 public:
  /// All must outlive this object.
  DenseSlopes(const Knowledge& knowledge, const SharedInformation& shared, const InformationSlopes& slopes,
              GainRows& game, const StopFlag* stop)
      : knowledge_(knowledge), shared_(shared), slopes_(slopes), game_(game), tangent_(game, stop) {}

  Tangent& tangent() override { return tangent_; }
  GameGradient gradient(std::span<const double> cutoffs, std::span<const double> multipliers) override;
  std::vector<double> raised(std::span<const double> cutoffs, const GameShift& shift) override;

 private:
  void add_pairs(std::span<const double> by_covariance, GameGradient& gradient) const;

  const Knowledge& knowledge_;
  const SharedInformation& shared_;
  const InformationSlopes& slopes_;
  GainRows& game_;
  DenseTangent tangent_;
};

}  // namespace folkmote
