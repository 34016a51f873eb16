#pragma once
// The bytes of a chunk file: a first line, header and table as little-endian words, and the digest of all before it.
#include "numerics/strict.hpp"

#include <string>

#include "shards/chunk.hpp"

namespace folkmote {

struct Chunk {
  ChunkHeader header;
  Table table{0};
};

std::string chunk_bytes(const ChunkHeader& header, const Table& table);

/// Throws BadFile naming `path` where the bytes are no whole chunk.
Chunk parse_chunk(const std::string& path, const std::string& bytes);

}  // namespace folkmote
