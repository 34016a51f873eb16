#include "equilibrium/independent_bound.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numeric>
#include <tuple>

namespace folkmote {

namespace {

constexpr std::size_t most_classes = 2000;

/// (1 - pull trust) / sqrt(spread + pull^2 doubt), with the rounding of the difference put on top.
double ratio(double pull, double spread, double trust, double doubt) {
  const double one_less_rho = (1.0 - pull) + pull * (1.0 - trust) + 0x1p-51;
  const double variance = spread + pull * pull * doubt;
  return variance > 0.0 ? one_less_rho / std::sqrt(variance) : std::numeric_limits<double>::infinity();
}

}  // namespace

IndependentBound::IndependentBound(const ThetaLaws& laws, std::span<const double> weight)
    : laws_(laws), class_of_(weight.size()) {
  classify(weight);
  for (const Class& of_i : classes_) {
    double sum = 0.0, inverse = 0.0;
    for (const Class& of_j : classes_) {
      sum += of_j.weight * ratio(of_j.pull, of_j.spread, of_i.trust, of_i.doubt);
      inverse += of_j.weight / (of_j.spread + of_j.pull * of_j.pull * of_i.doubt);
    }
    sums_.push_back(sum);
    inverse_variances_.push_back(inverse);
  }
}

double IndependentBound::term(int i, double pull, double spread) const {
  return ratio(pull, spread, laws_.trust[i], laws_.doubt[i]);
}

void IndependentBound::classify(std::span<const double> weight) {
  std::vector<int> order(weight.size());
  std::iota(order.begin(), order.end(), 0);
  const auto key = [&](int i) { return std::tuple(laws_.pull[i], laws_.spread[i], laws_.trust[i], laws_.doubt[i]); };
  std::sort(order.begin(), order.end(), [&](int a, int b) { return std::tuple(key(a), a) < std::tuple(key(b), b); });
  std::size_t different = 0;
  for (std::size_t k = 0; k < order.size(); ++k) different += k == 0 || key(order[k]) != key(order[k - 1]);
  const std::size_t together = (different + most_classes - 1) / std::max<std::size_t>(most_classes, 1);
  std::size_t seen = 0;
  for (std::size_t k = 0; k < order.size(); ++k) {
    const int i = order[k];
    const bool fresh = k == 0 || key(i) != key(order[k - 1]);
    if (fresh && seen++ % std::max<std::size_t>(together, 1) == 0) {
      classes_.push_back({laws_.pull[i], laws_.spread[i], laws_.trust[i], laws_.doubt[i], 0.0});
    }
    Class& now = classes_.back();
    now.pull = std::min(now.pull, laws_.pull[i]);
    now.spread = std::min(now.spread, laws_.spread[i]);
    now.trust = std::min(now.trust, laws_.trust[i]);
    now.doubt = std::min(now.doubt, laws_.doubt[i]);
    now.weight += weight[i];
    class_of_[i] = static_cast<int>(classes_.size()) - 1;
  }
}

}  // namespace folkmote
