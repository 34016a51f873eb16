// The equilibrium engine on preferential attachment networks (m = 3, alpha = 1, beta = 2, sigma = 0.1): time, sweeps
// and memory by size, and the dense form beside it where that is feasible. Not a test: prints a table.
//     bench_engine [largest size] [threads]
#include "numerics/strict.hpp"

#include <sys/resource.h>

#include <chrono>
#include <cstdio>
#include <cstdlib>

#include "../kernel/small_studies.hpp"
#include "equilibrium/large.hpp"

using namespace folkmote;

namespace {

double seconds_since(std::chrono::steady_clock::time_point start) {
  return std::chrono::duration<double>(std::chrono::steady_clock::now() - start).count();
}

/// Processor time of all threads so far: unlike the clock on the wall, it does not count what others run.
double processor_seconds() {
  rusage usage{};
  getrusage(RUSAGE_SELF, &usage);
  return static_cast<double>(usage.ru_utime.tv_sec + usage.ru_stime.tv_sec) +
         1e-6 * static_cast<double>(usage.ru_utime.tv_usec + usage.ru_stime.tv_usec);
}

double peak_gigabytes() {
  rusage usage{};
  getrusage(RUSAGE_SELF, &usage);
  return static_cast<double>(usage.ru_maxrss) / 1048576.0;
}

/// A community without tables: building labels for 10^6 members is not what is measured.
Study bare_study(int size, bool radio) {
  drawn::Numbers numbers(7);
  auto roster = std::make_shared<Roster>();
  Community community;
  community.size = size;
  community.values.weight.assign(size, 1.0);
  community.values.cost_shift.assign(size, 0.0);
  for (auto* column : {&community.values.signal_precision, &community.values.stake_sd, &community.values.benefit,
                       &community.values.cost, &community.values.turnout, &community.values.expected_share}) {
    column->assign(size, std::numeric_limits<double>::quiet_NaN());
  }
  std::vector<std::vector<int>> hears(size);
  for (const auto& [i, j] : studies::preferential(size, 3, numbers)) {
    hears[i].push_back(j);
    hears[j].push_back(i);
  }
  community.links.start.push_back(0);
  roster->row_of.emplace_back();
  for (int i = 0; i < size; ++i) {
    std::sort(hears[i].begin(), hears[i].end());
    community.links.speaker.insert(community.links.speaker.end(), hears[i].begin(), hears[i].end());
    community.links.start.push_back(static_cast<std::int64_t>(community.links.speaker.size()));
    roster->row_of[0].push_back(i);
  }
  community.links.relay_precision.assign(community.links.speaker.size(), std::numeric_limits<double>::infinity());
  roster->community_of_row.assign(size, 0);
  if (radio) {
    Broadcast to_all{2.0, {}};
    for (int i = 0; i < size; ++i) to_all.audience.push_back(i);
    community.broadcasts.push_back(std::move(to_all));
  }
  Study study;
  study.roster = roster;
  study.communities.push_back(std::move(community));
  return study;
}

void measure(int size, int threads, bool radio) {
  const Study study = bare_study(size, radio);
  const Beliefs beliefs = studies::beliefs(0.4, 1.0, 2.0, 0.1);
  auto start = std::chrono::steady_clock::now();
  const double before = processor_seconds();
  const Knowledge knowledge = make_knowledge(study, beliefs, 0);
  std::optional<CurveGame> made = curve_game(knowledge, make_stakes(study, Payoff{}, 0), {threads, {}});
  CurveGame& game = made.value();
  const double prepared = seconds_since(start);
  const Enclosure found = enclose_large(game, SolveRule{}, {threads, {}});
  const double total = seconds_since(start);
  std::printf("%9d %8.2f %8.2f %8.2f %7lld %6zu %7.0f %7d %8.2f  %s\n", size, prepared, total,
              processor_seconds() - before, static_cast<long long>(found.iterations), game.curve().nodes(),
              game.curve().layers(), game.curve().direct_members(), peak_gigabytes(), verdict_text(found.verdict));
  if (size > 2000 || radio) return;
  start = std::chrono::steady_clock::now();
  const SharedInformation shared(knowledge);
  BestReply dense(knowledge, shared, make_stakes(study, Payoff{}, 0));
  const Enclosure same = enclose(dense, SolveRule{}, StopFlag{});
  std::printf("%9d dense form %8.2f s, %lld sweeps and leaps\n", size, seconds_since(start),
              static_cast<long long>(same.iterations));
}

}  // namespace

int main(int argc, char** argv) {
  std::setvbuf(stdout, nullptr, _IOLBF, 0);
  const int largest = argc > 1 ? std::atoi(argv[1]) : 100000;
  const int threads = argc > 2 ? std::atoi(argv[2]) : 2;
  std::printf(
      "  members  prepare    total      cpu  sweeps  nodes  layers  direct  peak GB  verdict    (seconds, %d "
      "threads)\n",
      threads);
  for (int size : {1000, 2000, 10000, 100000, 1000000}) {
    if (size <= largest) measure(size, threads, false);
  }
  std::printf("with a broadcast heard by everybody (tau = 2)\n");
  for (int size : {2000, 10000, 100000}) {
    if (size <= largest) measure(size, threads, true);
  }
}
