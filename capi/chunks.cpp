#include "numerics/strict.hpp"

#include <string>
#include <vector>

#include "guard.hpp"
#include "handles.hpp"
#include "plays.hpp"
#include "shards/run.hpp"

using folkmote::guard;
using folkmote::needed;

namespace {

std::vector<std::string> read_paths(int64_t count, const char* const* paths) {
  if (count < 1) throw folkmote::BadArgument("count is " + std::to_string(count) + "; give at least one file.");
  needed(paths, "paths");
  std::vector<std::string> read;
  for (int64_t k = 0; k < count; ++k) read.emplace_back(needed(paths[k], "a path"));
  return read;
}

}  // namespace

folkmote_status folkmote_chunk_run(const folkmote_equilibrium* equilibrium, const folkmote_scenario* scenario,
                                   int64_t first_draw, int64_t draws, uint64_t seed, double low, double high, int level,
                                   const folkmote_options* options, const char* path, int* computed, char* message) {
  return guard(message, [&] {
    const folkmote::Solution& solution = needed(equilibrium, "equilibrium")->solution;
    folkmote::check_plays(solution, first_draw, draws, level);
    if (scenario != nullptr && level != FOLKMOTE_BY_COMMUNITY) {
      throw folkmote::BadArgument("level is by member; plays of a scenario go by community.");
    }
    const folkmote::ChunkRun run{solution,
                                 scenario == nullptr ? nullptr : &scenario->scenario,
                                 {first_draw, draws, seed, folkmote::read_condition(low, high)},
                                 level == FOLKMOTE_BY_MEMBER,
                                 folkmote::estimator_of(options)};
    const bool made = folkmote::run_chunk(needed(path, "path"), FOLKMOTE_VERSION, run, folkmote::execution_of(options));
    if (computed != nullptr) *computed = made ? 1 : 0;
  });
}

folkmote_status folkmote_chunk_merge(int64_t count, const char* const* paths, int64_t first_draw, int64_t draws,
                                     folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    folkmote::check_draws(first_draw, draws, 1);
    *table = new folkmote_table(folkmote::merge_chunks(read_paths(count, paths), first_draw, draws));
  });
}

folkmote_status folkmote_chunk_table(int64_t count, const char* const* paths, folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    *table = new folkmote_table(folkmote::describe_chunks(read_paths(count, paths)));
  });
}
