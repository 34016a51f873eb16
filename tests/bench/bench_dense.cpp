// A full solve, both ends to 1e-10, by the turnout curve and by plain dense iteration as one would write it in C++ with
// the C library's erfc; bench_dense.R and bench_dense.jl run the same iteration on the same network. Prints one line of
// seconds each.
//     bench_dense members file      writes the network to `file` as lines "listener speaker", from 1
#include "numerics/strict.hpp"

#include <algorithm>
#include <cmath>
#include <cstdio>
#include <cstdlib>
#include <vector>

#include "bench_study.hpp"

using namespace folkmote;

namespace {

constexpr double mu = 0.4, alpha = 1.0, beta = 2.0, sigma = 0.1;

/// rho and s of every pair, by row, from the formulas of the model.
struct Dense {
  explicit Dense(const Links& links) : n(static_cast<int>(links.start.size()) - 1), rho(n * n), sd(n * n) {
    std::vector<char> holds(n * n, 0);
    std::vector<double> held(n), p(n), e(n);
    for (int i = 0; i < n; ++i) {
      holds[i * n + i] = 1;
      for (auto k = links.start[i]; k < links.start[i + 1]; ++k) holds[i * n + links.speaker[k]] = 1;
      held[i] = beta * static_cast<double>(links.start[i + 1] - links.start[i] + 1);
      p[i] = alpha + held[i];
      e[i] = held[i] / (alpha * p[i]) + sigma * sigma;
    }
    for (int i = 0; i < n; ++i) {
      for (int j = 0; j < n; ++j) {
        int both = 0;
        for (int k = 0; k < n; ++k) both += holds[i * n + k] & holds[j * n + k];
        const double covariance = (held[i] * held[j] / alpha + beta * both) / (p[i] * p[j]);
        rho[i * n + j] = covariance / e[i];
        sd[i * n + j] = std::sqrt(e[j] - covariance * covariance / e[i]);
      }
    }
  }

  std::vector<double> solve(double start) const {
    std::vector<double> cutoffs(n, start), next(n);
    for (double moved = 1.0; moved > 1e-11;) {
      moved = 0.0;
      for (int i = 0; i < n; ++i) {
        double share = 0.0;
        for (int j = 0; j < n; ++j) {
          if (j == i) continue;
          const double z = (cutoffs[j] - mu - rho[i * n + j] * (cutoffs[i] - mu)) / sd[i * n + j];
          share += 0.5 * std::erfc(-z * 0.70710678118654752);
        }
        next[i] = 0.5 * (cutoffs[i] + share / (n - 1));  // damped: undamped it does not converge here
        moved = std::max(moved, std::fabs(next[i] - cutoffs[i]));
      }
      cutoffs = next;
    }
    return cutoffs;
  }

  int n;
  std::vector<double> rho, sd;
};

double furthest(const std::vector<double>& a, const std::vector<double>& b) {
  double most = 0.0;
  for (std::size_t i = 0; i < a.size(); ++i) most = std::max(most, std::fabs(a[i] - b[i]));
  return most;
}

}  // namespace

int main(int argc, char** argv) {
  const int size = argc > 1 ? std::atoi(argv[1]) : 2000;
  const Study study = bench::bare_study(size, false);
  const Links& links = study.communities[0].links;
  if (argc > 2) {
    std::FILE* file = std::fopen(argv[2], "w");
    if (file == nullptr) return 1;
    for (int i = 0; i < size; ++i) {
      for (auto k = links.start[i]; k < links.start[i + 1]; ++k)
        std::fprintf(file, "%d %d\n", i + 1, links.speaker[k] + 1);
    }
    std::fclose(file);
  }
  const Beliefs beliefs = studies::beliefs(mu, alpha, beta, sigma);
  bench::Clock clock;
  const Knowledge knowledge = make_knowledge(study, beliefs, 0);
  CurveGame game = curve_game(knowledge, make_stakes(study, Payoff{}, 0), {1, {}}).value();
  const Enclosure found = enclose_large(game, SolveRule{}, {1, {}});
  std::printf("folkmote %.4f\n", clock.seconds());
  clock = {};
  const Dense dense(links);
  std::vector<double> least = dense.solve(0.0), greatest = dense.solve(1.0);
  std::printf("C++ %.4f\n", clock.seconds());
  std::printf("largest difference of a cutoff %.1e\n",
              std::max(furthest(least, found.least), furthest(greatest, found.greatest)));
}
