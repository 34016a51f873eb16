// The equilibrium engine on preferential attachment networks (m = 3, alpha = 1, beta = 2, sigma = 0.1): time, sweeps
// and memory by size, and the dense form beside it where that is feasible. Not a test: prints a table.
//     bench_engine [largest size] [threads]
#include "numerics/strict.hpp"

#include <cmath>
#include <cstdio>
#include <cstdlib>

#include "bench_study.hpp"
#include "numerics/normal.hpp"

using namespace folkmote;

namespace {

/// Nanoseconds of one normal CDF over an array: what an evaluation could cost at best.
double nanoseconds_of_phi() {
  constexpr int values = 4096, rounds = 2000;
  std::vector<double> z(values), out(values);
  for (int k = 0; k < values; ++k) z[k] = -4.0 + 8.0 * k / values;
  const bench::Clock clock;
  for (int round = 0; round < rounds; ++round) normal_cdf(z, out);
  return clock.seconds() * 1e9 / rounds / values;
}

struct Row {
  double seconds = 0.0, gigabytes = 0.0;
};

Row measure(int size, int threads, bool radio, double phi) {
  const Study study = bench::bare_study(size, radio);
  const Beliefs beliefs = studies::beliefs(0.4, 1.0, 2.0, 0.1);
  const double before = bench::processor_seconds();
  const bench::Clock clock;
  const Knowledge knowledge = make_knowledge(study, beliefs, 0);
  CurveGame game = curve_game(knowledge, make_stakes(study, Payoff{}, 0), {threads, {}}).value();
  const double prepared = clock.seconds();
  const Enclosure found = enclose_large(game, SolveRule{}, {threads, {}});
  const double total = clock.seconds(), busy = bench::processor_seconds() - before;
  const double needed = static_cast<double>(found.iterations) * game.evaluations() * phi * 1e-9;
  std::printf("%9d %8.2f %8.2f %8.2f %7lld %6zu %7.0f %7d %8.2f %10.2f  %s\n", size, prepared, total, busy,
              static_cast<long long>(found.iterations), game.curve().nodes(), game.curve().layers(),
              game.curve().direct_members(), bench::peak_gigabytes(), busy / needed, verdict_text(found.verdict));
  return {total, bench::peak_gigabytes()};
}

/// Many small communities side by side: how much of both cores they use.
void measure_batch(int communities, int members) {
  const Study one = bench::bare_study(members, false);
  Study study = one;
  auto roster = std::make_shared<Roster>(*one.roster);
  roster->row_of.clear();
  roster->community_of_row.clear();
  study.communities.clear();
  for (int c = 0; c < communities; ++c) {
    study.communities.push_back(one.communities[0]);
    roster->row_of.emplace_back();
    for (int i = 0; i < members; ++i) {
      roster->row_of[c].push_back(static_cast<std::int64_t>(roster->community_of_row.size()));
      roster->community_of_row.push_back(c);
    }
  }
  study.roster = roster;
  const double before = bench::processor_seconds();
  const bench::Clock clock;
  const Solution solution =
      solve(std::make_shared<const Study>(study), studies::beliefs(0.4, 1.0, 2.0, 0.1), Payoff{}, SolveRule{}, {2, {}});
  const double total = clock.seconds(), busy = bench::processor_seconds() - before;
  std::printf("batch of %d communities of %d: %.2f s, %.0f %% of two threads\n", communities, members, total,
              50.0 * busy / total);
}

}  // namespace

int main(int argc, char** argv) {
  std::setvbuf(stdout, nullptr, _IOLBF, 0);
  const int largest = argc > 1 ? std::atoi(argv[1]) : 100000;
  const int threads = argc > 2 ? std::atoi(argv[2]) : 2;
  const double phi = nanoseconds_of_phi();
  std::printf(
      "Phi over an array: %.2f ns; seconds on %d threads; cpu / needed: processor time to sweeps x evaluations x Phi\n",
      phi, threads);
  std::printf("  members  prepare    total      cpu  sweeps  nodes  layers  direct  peak GB cpu/needed  verdict\n");
  Row last{};
  for (int size : {1000, 2000, 10000, 100000, 1000000}) {
    if (size > largest) continue;
    const Row row = measure(size, threads, false, phi);
    if (size > 10000) {
      std::printf("          growth since the size before: time n^%.2f, memory n^%.2f\n",
                  std::log10(row.seconds / last.seconds), std::log10(row.gigabytes / last.gigabytes));
    }
    last = row;
  }
  std::printf("with a broadcast heard by everybody (tau = 2)\n");
  for (int size : {2000, 10000, 100000}) {
    if (size <= largest) measure(size, threads, true, phi);
  }
  measure_batch(5000, 100);
}
