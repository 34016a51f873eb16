// Workers: every task once, progress on the calling thread only, cancel and failure end the run cleanly.
#include <catch2/catch.hpp>
#include <chrono>
#include <thread>
#include <vector>

#include "community/fault.hpp"
#include "parallel/workers.hpp"

using namespace folkmote;

TEST_CASE("every task runs once, for any number of threads", "[workers]") {
  for (int threads : {0, 1, 2, 7}) {
    std::vector<int> runs(1000, 0);
    run_tasks(1000, {threads, {}}, [&](std::int64_t task, const StopFlag&) { ++runs[task]; });
    for (int count : runs) REQUIRE(count == 1);
  }
  run_tasks(0, {2, {}}, [](std::int64_t, const StopFlag&) { FAIL("there is nothing to run"); });
}

TEST_CASE("progress is polled on the calling thread and ends at the total", "[workers]") {
  const auto caller = std::this_thread::get_id();
  std::int64_t last = -1, total = 0;
  bool elsewhere = false;
  const Progress progress = [&](std::int64_t done, std::int64_t all) {
    elsewhere = elsewhere || std::this_thread::get_id() != caller;
    CHECK(done >= last);
    last = done;
    total = all;
    return false;
  };
  run_tasks(6, {2, progress},
            [](std::int64_t, const StopFlag&) { std::this_thread::sleep_for(std::chrono::milliseconds(60)); });
  CHECK(!elsewhere);
  CHECK(last == 6);
  CHECK(total == 6);
}

TEST_CASE("a cancelled run stops its tasks and says so", "[workers]") {
  bool seen = false;
  const auto task = [&](std::int64_t, const StopFlag& stop) {
    while (!stop.raised()) std::this_thread::sleep_for(std::chrono::milliseconds(1));
    seen = true;
  };
  CHECK_THROWS_AS(run_tasks(1, {1, [](std::int64_t, std::int64_t) { return true; }}, task), Cancelled);
  CHECK(seen);
}

TEST_CASE("a task that fails ends the run with its own error", "[workers]") {
  const auto task = [](std::int64_t task, const StopFlag&) {
    if (task == 3) throw BadArgument("three");
  };
  CHECK_THROWS_WITH(run_tasks(100, {2, {}}, task), "three");
  // And the next run is unharmed.
  std::atomic<int> runs{0};
  run_tasks(10, {2, {}}, [&](std::int64_t, const StopFlag&) { ++runs; });
  CHECK(runs == 10);
}
