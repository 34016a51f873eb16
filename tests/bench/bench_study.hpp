// What the benches of the engine share: clocks, memory, and a large community without tables.
#pragma once

#include "numerics/strict.hpp"

#include <sys/resource.h>

#include <algorithm>
#include <chrono>
#include <limits>
#include <memory>
#include <vector>

#include "../kernel/small_studies.hpp"
#include "equilibrium/large.hpp"

namespace bench {

class Clock {
 public:
  double seconds() const { return std::chrono::duration<double>(std::chrono::steady_clock::now() - start_).count(); }

 private:
  std::chrono::steady_clock::time_point start_ = std::chrono::steady_clock::now();
};

/// Processor time of all threads so far: unlike the clock on the wall, it does not count what others run.
inline double processor_seconds() {
  rusage usage{};
  getrusage(RUSAGE_SELF, &usage);
  return static_cast<double>(usage.ru_utime.tv_sec + usage.ru_stime.tv_sec) +
         1e-6 * static_cast<double>(usage.ru_utime.tv_usec + usage.ru_stime.tv_usec);
}

inline double peak_gigabytes() {
  rusage usage{};
  getrusage(RUSAGE_SELF, &usage);
  return static_cast<double>(usage.ru_maxrss) / 1048576.0;
}

/// A community without tables: building labels for 10^6 members is not what is measured.
inline folkmote::Study bare_study(int size, bool radio) {
  drawn::Numbers numbers(7);
  auto roster = std::make_shared<folkmote::Roster>();
  folkmote::Community community;
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
    folkmote::Broadcast to_all{2.0, {}};
    for (int i = 0; i < size; ++i) to_all.audience.push_back(i);
    community.broadcasts.push_back(std::move(to_all));
  }
  folkmote::Study study;
  study.roster = roster;
  study.communities.push_back(std::move(community));
  return study;
}

}  // namespace bench
