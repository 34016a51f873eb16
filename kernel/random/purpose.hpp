// What a stream of random numbers is for. One purpose never shares numbers with
// another, so a computation that draws more of one thing leaves all others alone.
//
// The numbers enter the draws. They are pinned: never renumbered, never reused after
// a purpose is dropped. New ones go into the gap of their band.
#pragma once

#include "numerics/strict.hpp"

#include <cstdint>

namespace folkmote {

enum class Purpose : std::uint64_t {
  // 1-5: the world of a play
  obstacle = 1,
  signal = 2,
  relay = 3,
  broadcast = 4,
  stake = 5,
  // 6-19: random edits of a scenario
  thinning = 6,
  rewiring = 7,
  // 20-29: networks made before the fact
  generator = 20,
  placement = 21,
  // 30-39: link formation
  meeting = 30,
  meeting_order = 31,
  // 40-49: replay and audit
  replay = 40,
  replay_start = 41,
  audit = 45,
  // 50-59: estimation
  pair_sample = 50,
  likelihood_simulation = 51,
  start_values = 52,
  resampling = 53,
  // 60-69: planning of trials
  trial_population = 60,
  trial_assignment = 61,
  trial_outcome = 62,
  // Outside the model
  demonstration = 900,
  test = 999,
};

}  // namespace folkmote
