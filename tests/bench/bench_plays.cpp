// Plays of one community by blocks, beside their limit: so many normal draws and so many entries of neighbour sums,
// each at the cost that it has alone in this run. Then the time to one standard error of a difference, by plain draws
// and by the estimators. bench_plays.R and bench_plays.jl make plays of the same law on the same network.
//     bench_plays members plays file      writes the network to `file` as lines "listener speaker", from 1
#include "numerics/strict.hpp"

#include <cstdio>
#include <cstdlib>

#include "bench_study.hpp"
#include "counterfactual/paired.hpp"
#include "random/streams.hpp"

using namespace folkmote;

namespace {

double sink = 0.0;  // printed, so that no loop can be left out

/// Seconds for one standard normal, in blocks of a community's size.
double normal_cost(int size) {
  std::vector<double> out(size);
  constexpr int rounds = 20000;
  Stream stream(StreamKey{1, Purpose::test, 0, 0});
  const bench::Clock clock;
  for (int r = 0; r < rounds; ++r) {
    stream.fill_normal(out);
    sink += out[r % size];
  }
  return clock.seconds() / rounds / size;
}

/// Seconds for one entry of a neighbour sum: the pattern alone, one play, sums in members' order.
double entry_cost(const Links& links) {
  const std::size_t size = links.start.size() - 1;
  std::vector<double> x(size, 1.0), sum(size);
  constexpr int rounds = 5000;
  const bench::Clock clock;
  for (int r = 0; r < rounds; ++r) {
    x[r % size] += 1e-9;
    for (std::size_t i = 0; i < size; ++i) {
      double s = 0.0;
      for (auto k = links.start[i]; k < links.start[i + 1]; ++k) s += x[links.speaker[k]];
      sum[i] = s;
    }
    sink += sum[r % size];
  }
  return clock.seconds() / rounds / static_cast<double>(links.speaker.size());
}

struct Estimate {
  double error, seconds;
};

/// The standard error of the mean difference after `draws` plays, and the time they took.
Estimate estimate(const Solution& before, const Solution& after, const Estimator& estimator, std::int64_t draws) {
  const bench::Clock clock;
  const PairedRun run{before, after, {}, estimator, 7};
  const PairedCommunity played(run, 0, StopFlag());
  PairedPlayer player(run, played);
  double sum = 0.0, squares = 0.0;
  for (std::int64_t r = 0; r < draws; r += lanes) {
    player.play(r);
    for (double d : player.estimate(0)) {
      sum += d;
      squares += d * d;
    }
  }
  const double n = static_cast<double>(draws), mean = sum / n;
  return {std::sqrt((squares / n - mean * mean) / n), clock.seconds()};
}

}  // namespace

int main(int argc, char** argv) {
  const int size = argc > 1 ? std::atoi(argv[1]) : 1000;
  const std::int64_t plays = argc > 2 ? std::atoll(argv[2]) : 10000;
  const auto study = std::make_shared<const Study>(bench::bare_study(size, false));
  const Links& links = study->communities[0].links;
  if (argc > 3) {
    std::FILE* file = std::fopen(argv[3], "w");
    if (file == nullptr) return 1;
    for (int i = 0; i < size; ++i) {
      for (auto k = links.start[i]; k < links.start[i + 1]; ++k) {
        std::fprintf(file, "%d %d\n", i + 1, links.speaker[k] + 1);
      }
    }
    std::fclose(file);
  }
  const Solution before = solve(study, studies::beliefs(0.45, 1.0, 2.0, 0.3), {}, {}, {});
  const bench::Clock clock;
  const Knowledge knowledge = make_knowledge(*study, before.beliefs, 0);
  BlockPlayer player(knowledge, {});
  PlayDraws draws(size, 0, true);
  double acted = 0.0;
  for (std::int64_t r = 0; r < plays; r += lanes) {
    draws.fill({7, 0, static_cast<std::uint64_t>(r)});
    player.play(draws);
    for (double share : player.turnout(before.enclosures[0].least, study->communities[0].values.weight, size)) {
      acted += share;
    }
  }
  const double seconds = clock.seconds();
  std::printf("folkmote %.4f\n", seconds);
  const double normals = 2.0 * size * static_cast<double>(plays) * normal_cost(size);
  const double entries = static_cast<double>(links.speaker.size()) * static_cast<double>(plays) * entry_cost(links);
  std::printf(
      "limit: normals %.3f s + neighbour sums %.3f s = %.3f s; plays take %.2f times that (mean turnout %.4f)\n",
      normals, entries, normals + entries, seconds / (normals + entries), acted / static_cast<double>(plays));

  auto cheaper = std::make_shared<Study>(*study);
  for (double& shift : cheaper->communities[0].values.cost_shift) shift -= 0.1;
  const Solution after = solve(cheaper, before.beliefs, {}, {}, {});
  const Estimate plain = estimate(before, after, {false, false, false}, plays);
  const auto line = [&](const char* name, const Estimator& estimator) {
    const Estimate found = estimate(before, after, estimator, plays);
    const double same_error = found.seconds * (found.error / plain.error) * (found.error / plain.error);
    std::printf("%-48s error %.2e, %.3f s; to the error of plain draws %.0f times faster\n", name, found.error,
                found.seconds, plain.seconds / same_error);
  };
  std::printf("%-48s error %.2e, %.3f s\n", "plain draws", plain.error, plain.seconds);
  line("common draws", {true, false, false});
  line("common draws, over stakes", {true, true, false});
  line("common draws, over stakes, control", {true, true, true});
  if (sink == 0.5) std::printf("\n");
}
