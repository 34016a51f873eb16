#include "shards/run.hpp"

#include "random/digest.hpp"
#include "random/streams.hpp"

namespace folkmote {

namespace {

std::uint64_t inputs_of(const ChunkRun& run) {
  Digest digest;
  digest.add(run.solution.digest()).add(run.scenario == nullptr ? std::uint64_t{0} : run.scenario->digest());
  digest.add(run.range.condition.low).add(run.range.condition.high).add(run.by_member ? 1 : 0);
  return digest.add(run.scenario == nullptr || run.estimator.common_draws ? 1 : 0).value();
}

ChunkHeader header_of(const std::string& version, const ChunkRun& run) {
  ChunkHeader header;
  header.version = version;
  header.stream_version = stream_version;
  header.inputs = inputs_of(run);
  header.seed = run.range.seed;
  header.first = run.range.first;
  header.count = run.range.count;
  header.groups = static_cast<std::int64_t>(run.solution.study->communities.size());
  header.order = run.by_member ? RowOrder::by_replication : RowOrder::by_community;
  return header;
}

Table played(const ChunkRun& run, const Execution& execution) {
  if (run.scenario != nullptr) return paired_table(run.solution, *run.scenario, run.range, run.estimator, execution);
  return run.by_member ? action_table(run.solution, run.range, execution)
                       : play_table(run.solution, run.range, execution);
}

}  // namespace

bool run_chunk(const std::string& path, const std::string& version, const ChunkRun& run, const Execution& execution) {
  const ChunkHeader header = header_of(version, run);
  if (holds_chunk(path, header)) return false;
  write_chunk(path, header, played(run, execution));
  return true;
}

}  // namespace folkmote
