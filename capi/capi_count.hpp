#pragma once
// Counts live handles, for leak tests in every language.
#include "numerics/strict.hpp"

#include <atomic>
#include <cstdint>

namespace folkmote {

std::atomic<std::int64_t>& live_handles() noexcept;

struct CountedHandle {
  CountedHandle() noexcept { live_handles().fetch_add(1); }
  ~CountedHandle() { live_handles().fetch_sub(1); }
  CountedHandle(const CountedHandle&) = delete;
  CountedHandle& operator=(const CountedHandle&) = delete;
};

}  // namespace folkmote
