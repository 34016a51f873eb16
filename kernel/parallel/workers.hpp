#pragma once
// Workers on threads, with progress and cancel polled on the calling thread only.
#include "numerics/strict.hpp"

#include <atomic>
#include <cstdint>
#include <functional>

namespace folkmote {

/// `done` of `total`; true asks to stop. Called on the thread that called run_tasks, never on a worker.
using Progress = std::function<bool(std::int64_t done, std::int64_t total)>;

/// Read by long tasks between steps: true once the caller has asked to stop or a task has failed.
class StopFlag {
 public:
  bool raised() const { return raised_.load(std::memory_order_relaxed); }
  void raise() { raised_.store(true, std::memory_order_relaxed); }

 private:
  std::atomic<bool> raised_{false};
};

/// How a run may use the machine; never changes a result.
struct Execution {
  int threads = 1;
  Progress progress;  // may be empty
};

/// Runs task(0) .. task(count - 1), each once, in any order on up to `threads` workers. A task writes only to its own
/// outputs, so that results do not depend on the number of threads. Throws Cancelled when the caller stopped it, else
/// what the first failing task threw.
void run_tasks(std::int64_t count, const Execution& execution,
               const std::function<void(std::int64_t task, const StopFlag& stop)>& task);

}  // namespace folkmote
