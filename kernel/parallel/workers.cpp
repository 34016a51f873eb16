#include "parallel/workers.hpp"

#include <algorithm>
#include <chrono>
#include <condition_variable>
#include <exception>
#include <mutex>
#include <system_error>
#include <thread>
#include <vector>

#include "community/fault.hpp"

namespace folkmote {

namespace {

constexpr auto poll_interval = std::chrono::milliseconds(50);

/// What the workers and the waiting caller share.
class Crew {
 public:
  Crew(std::int64_t count, const std::function<void(std::int64_t, const StopFlag&)>& task)
      : count_(count), task_(task) {}

  /// One worker: takes the next task until none is left.
  void work() {
    for (std::int64_t next = next_.fetch_add(1); next < count_ && !stop_.raised(); next = next_.fetch_add(1)) {
      try {
        task_(next, stop_);
      } catch (...) {
        fail(next, std::current_exception());
      }
      done_.fetch_add(1);
    }
    const std::lock_guard<std::mutex> lock(mutex_);
    ++finished_;
    changed_.notify_all();
  }

  /// Polls the caller's progress until `workers` workers have come home.
  void wait(int workers, const Progress& progress) {
    bool cancelled = false;
    std::unique_lock<std::mutex> lock(mutex_);
    while (!changed_.wait_for(lock, poll_interval, [&] { return finished_ == workers; })) {
      lock.unlock();
      if (progress && !cancelled && progress(done_.load(), count_)) {
        cancelled = true;
        stop_.raise();
      }
      lock.lock();
    }
    lock.unlock();
    if (error_) std::rethrow_exception(error_);
    if (!cancelled && progress) cancelled = progress(done_.load(), count_);
    if (cancelled) throw Cancelled();
  }

 private:
  /// Of several failures, the one of the lowest task is kept: the same sentence for any number of threads,
  /// as long as it is reached.
  void fail(std::int64_t task, std::exception_ptr error) {
    const std::lock_guard<std::mutex> lock(mutex_);
    if (!error_ || task < failed_task_) {
      error_ = std::move(error);
      failed_task_ = task;
    }
    stop_.raise();
  }

  const std::int64_t count_;
  const std::function<void(std::int64_t, const StopFlag&)>& task_;
  StopFlag stop_;
  std::atomic<std::int64_t> next_{0};
  std::atomic<std::int64_t> done_{0};
  std::mutex mutex_;
  std::condition_variable changed_;
  int finished_ = 0;
  std::exception_ptr error_;
  std::int64_t failed_task_ = 0;
};

}  // namespace

void run_tasks(std::int64_t count, const Execution& execution,
               const std::function<void(std::int64_t, const StopFlag&)>& task) {
  if (count <= 0) return;
  const int wanted = static_cast<int>(std::min<std::int64_t>(std::max(execution.threads, 1), count));
  Crew crew(count, task);
  std::vector<std::jthread> threads;
  threads.reserve(static_cast<std::size_t>(wanted));
  try {
    for (int t = 0; t < wanted; ++t) threads.emplace_back([&crew] { crew.work(); });
  } catch (const std::system_error&) {
    // The system gave fewer threads than asked for: the run goes on with those it has, or on this one.
    if (threads.empty()) crew.work();
  }
  crew.wait(threads.empty() ? 1 : static_cast<int>(threads.size()), execution.progress);
}

}  // namespace folkmote
