#pragma once
// Plays in pieces, on disk: any split of the replications over threads, processes and machines merges to the table of
// the single run. A chunk file says what it was made from; it is written beside its place and then renamed, so that a
// file of that name is whole or absent.
#include "numerics/strict.hpp"

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "community/table.hpp"

namespace folkmote {

/// How the rows of two chunks make the rows of one run.
enum class RowOrder {
  by_community = 1,    // community by community, equally many rows of each
  by_replication = 2,  // one replication after the other
};

struct ChunkHeader {
  std::string version;  // of the library
  std::int64_t stream_version = 0;
  std::uint64_t inputs = 0;  // digest of what was played
  std::uint64_t seed = 0;
  std::int64_t first = 0;  // replications first .. first + count - 1
  std::int64_t count = 0;
  std::int64_t groups = 1;  // communities
  RowOrder order = RowOrder::by_community;
};

/// Writes header, table and its digest.
void write_chunk(const std::string& path, const ChunkHeader& header, const Table& table);

/// Whether the file is there. Throws BadFile when it is no whole chunk, or one made from anything but exactly this.
bool holds_chunk(const std::string& path, const ChunkHeader& header);

/// The table of replications first .. first + count - 1 from their chunks, in any order. Throws BadFile where versions,
/// inputs, seeds or columns differ, replications are missing or stand twice, or a file is damaged.
Table merge_chunks(const std::vector<std::string>& paths, std::int64_t first, std::int64_t count);

/// One row per file: file, version, stream_version, inputs, seed, first_draw, draws, rows.
Table describe_chunks(const std::vector<std::string>& paths);

}  // namespace folkmote
