#pragma once
// Plays of a range of replications into a chunk file, unless it is there.
#include "numerics/strict.hpp"

#include <string>

#include "counterfactual/prospective.hpp"
#include "shards/chunk.hpp"

namespace folkmote {

struct ChunkRun {
  const Solution& solution;
  const Scenario* scenario;  // nullptr: plays of the solution
  PlayRange range;
  bool by_member;  // not with a scenario
  Estimator estimator;
};

/// Whether anything was computed: a whole chunk of the same inputs, draws and versions is left as it is.
bool run_chunk(const std::string& path, const std::string& version, const ChunkRun& run, const Execution& execution);

}  // namespace folkmote
