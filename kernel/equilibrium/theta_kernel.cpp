#include "equilibrium/theta_kernel.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "numerics/elementary.hpp"
#include "numerics/normal.hpp"

namespace folkmote {

namespace {

constexpr double reach = 8.7;      // the density is below 2e-17 beyond
constexpr double fraction = 0.75;  // of the standard deviation of a product, for the step
constexpr int stretch = 32;        // nodes from one fresh density to the next

/// visit(k, argument, phi(argument)) for `count` equally spaced arguments. phi moves by phi(a + d) = phi(a) r with
/// r = exp(-d a - d^2/2), and r by exp(-d^2): two products a node, begun anew before their roundings add up.
template <class Visit>
void along(double start, double step, std::size_t count, const Visit& visit) {
  const double change = exponential(-step * step);
  for (std::size_t first = 0; first < count; first += stretch) {
    const double argument = start + step * static_cast<double>(first);
    double density = normal_density(argument);
    double ratio = exponential(-step * (argument + 0.5 * step));
    const std::size_t last = std::min(count, first + stretch);
    for (std::size_t k = first; k < last; ++k) {
      visit(k, start + step * static_cast<double>(k), density);
      density *= ratio;
      ratio *= change;
    }
  }
}

}  // namespace

ThetaKernel::ThetaKernel(const Members& members) : members_(members) {
  double least_doubt = std::numeric_limits<double>::infinity(), least_width = least_doubt;
  double low = least_doubt, high = -least_doubt;
  for (std::size_t i = 0; i < members.centre.size(); ++i) {
    const double doubt = members.doubt[i], sd = std::sqrt(doubt), pull = members.pull[i];
    least_doubt = std::min(least_doubt, doubt);
    if (pull > 0.0) least_width = std::min(least_width, members.spread[i] / (pull * pull));
    low = std::min(low, members.centre[i] - reach * sd);
    high = std::max(high, members.centre[i] + reach * sd);
  }
  // v = 1 / (1/doubt + 1/width); an infinite width leaves the doubt.
  const double variance = 1.0 / (1.0 / least_doubt + 1.0 / least_width);
  step_ = fraction * std::sqrt(variance);
  first_ = low;
  nodes_ = static_cast<std::size_t>(std::floor((high - low) / step_)) + 2;
}

/// The nodes at which an argument that moves by `step` from node to node is within reach.
ThetaKernel::Window ThetaKernel::window(double start, double step) const {
  if (step == 0.0) return {0, std::fabs(start) < reach ? nodes_ : 0, start, step};
  double from = (-reach - start) / step, to = (reach - start) / step;
  if (from > to) std::swap(from, to);
  from = std::max(0.0, std::floor(from) + 1.0);
  to = std::min(static_cast<double>(nodes_ - 1), std::floor(to));
  if (!(from <= to)) return {0, 0, start, step};
  return {static_cast<std::size_t>(from), static_cast<std::size_t>(to - from) + 1, start + step * from, step};
}

ThetaKernel::Window ThetaKernel::of_view(int i) const {
  const double sd = std::sqrt(members_.doubt[i]);
  return window((first_ - members_.centre[i]) / sd, step_ / sd);
}

ThetaKernel::Window ThetaKernel::of_chance(int j) const {
  const double sd = std::sqrt(members_.spread[j]);
  return window((members_.margin[j] - members_.pull[j] * first_) / sd, -members_.pull[j] * step_ / sd);
}

std::vector<double> ThetaKernel::chances(std::span<const double> weight) const {
  std::vector<double> sum(nodes_, 0.0), z, until(nodes_ + 1, 0.0);
  for (std::size_t j = 0; j < weight.size(); ++j) {
    const Window w = of_chance(static_cast<int>(j));
    z.clear();
    for (std::size_t k = 0; k < w.count; ++k) z.push_back(w.start + w.step * static_cast<double>(k));
    normal_cdf(z, z);
    for (std::size_t k = 0; k < w.count; ++k) sum[w.first + k] += weight[j] * z[k];
    // The chance falls along the grid: 1 before the window, 0 behind it.
    if (w.count > 0)
      until[w.first] += weight[j];
    else if (members_.margin[j] - members_.pull[j] * first_ > 0.0)
      until[nodes_] += weight[j];
  }
  double certain = 0.0;
  for (std::size_t k = nodes_; k-- > 0;) {
    certain += until[k + 1];
    sum[k] += certain;
  }
  return sum;
}

std::vector<double> ThetaKernel::densities(std::span<const double> weight) const {
  std::vector<double> sum(nodes_, 0.0);
  for (std::size_t j = 0; j < weight.size(); ++j) {
    const Window w = of_chance(static_cast<int>(j));
    const double scaled = weight[j] / std::sqrt(members_.spread[j]);
    double* const at = sum.data() + w.first;
    along(w.start, w.step, w.count, [&](std::size_t k, double, double density) { at[k] += scaled * density; });
  }
  return sum;
}

std::vector<double> ThetaKernel::directions(std::span<const double> weight, double margin, std::span<const double> pull,
                                            std::span<const double> spread) const {
  std::vector<double> sum(nodes_, 0.0);
  for (std::size_t j = 0; j < weight.size(); ++j) {
    const Window w = of_chance(static_cast<int>(j));
    const double sd = std::sqrt(members_.spread[j]), scaled = weight[j] / sd, by_spread = -0.5 * spread[j] / sd;
    along(w.start, w.step, w.count, [&](std::size_t k, double argument, double density) {
      const std::size_t at = w.first + k;
      sum[at] += scaled * density * (margin - pull[j] * node(at) + by_spread * argument);
    });
  }
  return sum;
}

ThetaKernel::Expected ThetaKernel::expected(int i, std::span<const double> function) const {
  const Window w = of_view(i);
  double value = 0.0, first = 0.0, second = 0.0;
  const double* const at = function.data() + w.first;
  along(w.start, w.step, w.count, [&](std::size_t k, double argument, double density) {
    const double term = density * at[k];
    value += term;
    first += term * argument;
    second += term * (argument * argument - 1.0);
  });
  const double sd = std::sqrt(members_.doubt[i]), scale = step_ / sd;
  return {scale * value, scale * first / sd, 0.5 * scale * second / members_.doubt[i]};
}

double ThetaKernel::value(int i, std::span<const double> function) const {
  const Window w = of_view(i);
  double value = 0.0;
  const double* const at = function.data() + w.first;
  along(w.start, w.step, w.count, [&](std::size_t k, double, double density) { value += density * at[k]; });
  return step_ / std::sqrt(members_.doubt[i]) * value;
}

std::vector<double> ThetaKernel::views(std::span<const double> weight) const {
  std::vector<double> sum(nodes_, 0.0);
  for (std::size_t i = 0; i < weight.size(); ++i) {
    const Window w = of_view(static_cast<int>(i));
    const double scaled = weight[i] * step_ / std::sqrt(members_.doubt[i]);
    double* const at = sum.data() + w.first;
    along(w.start, w.step, w.count, [&](std::size_t k, double, double density) { at[k] += scaled * density; });
  }
  return sum;
}

ThetaKernel::Collected ThetaKernel::collected(int j, std::span<const double> view) const {
  const Window w = of_chance(j);
  double margin = 0.0, pull = 0.0, spread = 0.0;
  along(w.start, w.step, w.count, [&](std::size_t k, double argument, double density) {
    const double term = density * view[w.first + k];
    margin += term;
    pull -= term * node(w.first + k);
    spread -= term * argument;
  });
  const double sd = std::sqrt(members_.spread[j]);
  return {margin / sd, pull / sd, 0.5 * spread / members_.spread[j]};
}

double ThetaKernel::density(int j, std::span<const double> view) const {
  const Window w = of_chance(j);
  double sum = 0.0;
  const double* const at = view.data() + w.first;
  along(w.start, w.step, w.count, [&](std::size_t k, double, double density) { sum += density * at[k]; });
  return sum / std::sqrt(members_.spread[j]);
}

}  // namespace folkmote
