// Speed of the normal and bivariate normal functions, as ratios within one run. Not a test: prints a table.
//     bench_normal [values] [rounds]
#include "numerics/strict.hpp"

#include <algorithm>
#include <chrono>
#include <cmath>
#include <cstdio>
#include <cstdlib>
#include <random>
#include <vector>

#include "numerics/binormal.hpp"
#include "numerics/elementary.hpp"
#include "numerics/normal.hpp"
#include "numerics/sums.hpp"

namespace {

volatile double sink;

// Median time per value over the rounds, in nanoseconds.
template <class Work>
double per_value(std::size_t n, int rounds, const Work& work) {
  std::vector<double> times;
  for (int round = 0; round < rounds; ++round) {
    const auto start = std::chrono::steady_clock::now();
    work();
    const std::chrono::duration<double, std::nano> taken = std::chrono::steady_clock::now() - start;
    times.push_back(taken.count() / static_cast<double>(n));
  }
  std::sort(times.begin(), times.end());
  return times[times.size() / 2];
}

void line(const char* name, double time, double reference) {
  std::printf("%-44s %9.2f ns  %6.2f x\n", name, time, reference / time);
}

}  // namespace

int main(int argc, char** argv) {
  const std::size_t n = argc > 1 ? static_cast<std::size_t>(std::atol(argv[1])) : 1000000;
  const int rounds = argc > 2 ? std::atoi(argv[2]) : 15;
  std::mt19937_64 generator(1);
  std::normal_distribution<double> normal(0.0, 2.0);
  std::uniform_real_distribution<double> uniform(0.0, 1.0);
  std::vector<double> x(n), p(n), u(n), out(n);
  for (double& v : x) v = normal(generator);
  for (double& v : u) v = uniform(generator);
  folkmote::normal_cdf(x, p);

  std::printf("%zu values N(0, 2^2), median of %d rounds; x = times faster than the first line of the block\n", n,
              rounds);
  const double erfc = per_value(n, rounds, [&] {
    for (std::size_t i = 0; i < n; ++i) out[i] = 0.5 * std::erfc(-x[i] * 0.70710678118654752);
  });
  line("0.5 erfc(-x/sqrt 2), C library", erfc, erfc);
  line("normal_cdf, array", per_value(n, rounds, [&] { folkmote::normal_cdf(x, out); }), erfc);
  line("normal_cdf, one by one",
       per_value(n, rounds,
                 [&] {
                   for (std::size_t i = 0; i < n; ++i) out[i] = folkmote::normal_cdf(x[i]);
                 }),
       erfc);
  line("normal_quantile of uniforms, array", per_value(n, rounds, [&] { folkmote::normal_quantile(u, out); }), erfc);
  line("normal_quantile of uniforms, one by one",
       per_value(n, rounds,
                 [&] {
                   for (std::size_t i = 0; i < n; ++i) out[i] = folkmote::normal_quantile(u[i]);
                 }),
       erfc);
  line("log_normal_cdf",
       per_value(n, rounds,
                 [&] {
                   for (std::size_t i = 0; i < n; ++i) out[i] = folkmote::log_normal_cdf(x[i]);
                 }),
       erfc);

  const double libm_exp = per_value(n, rounds, [&] {
    for (std::size_t i = 0; i < n; ++i) out[i] = std::exp(x[i]);
  });
  line("exp, C library", libm_exp, libm_exp);
  line("exponential",
       per_value(n, rounds,
                 [&] {
                   for (std::size_t i = 0; i < n; ++i) out[i] = folkmote::exponential(x[i]);
                 }),
       libm_exp);
  line("logarithm (of p)",
       per_value(n, rounds,
                 [&] {
                   for (std::size_t i = 0; i < n; ++i) out[i] = folkmote::logarithm(p[i]);
                 }),
       libm_exp);

  const double plain = per_value(n, rounds, [&] {
    double s = 0;
    for (double v : x) s += v;
    sink = s;
  });
  line("sum, plain loop", plain, plain);
  line("ordered_sum", per_value(n, rounds, [&] { sink = folkmote::ordered_sum(x); }), plain);
  line("ordered_dot", per_value(n, rounds, [&] { sink = folkmote::ordered_dot(x, p); }), plain);

  const std::size_t m = n / 20;
  for (const double rho : {-0.9, -0.5, 0.05, 0.1, 0.3, 0.5, 0.75, 0.9, 0.95, 0.99}) {
    const double time = per_value(m, 3, [&] {
      double s = 0;
      for (std::size_t i = 0; i + 1 < m; ++i) s += folkmote::binormal_cdf(x[i] / 2, x[i + 1] / 2, rho);
      sink = s;
    });
    std::printf("binormal_cdf at N(0,1) limits, rho = %-9.2f %9.1f ns\n", rho, time);
  }
  return 0;
}
