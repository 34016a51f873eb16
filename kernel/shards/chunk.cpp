#include "shards/chunk.hpp"

#include <algorithm>
#include <cerrno>
#include <cstdio>
#include <cstring>
#include <memory>
#include <type_traits>

#if defined(_WIN32)
#include <process.h>
#else
#include <unistd.h>
#endif

#include "community/fault.hpp"
#include "shards/chunk_file.hpp"

namespace folkmote {

namespace {

struct Close {
  void operator()(std::FILE* file) const { std::fclose(file); }
};
using File = std::unique_ptr<std::FILE, Close>;

[[noreturn]] void fail(const std::string& path, const char* what) {
  throw BadFile("the file '" + path + "' cannot be " + what + " (" + std::strerror(errno) + ").");
}

/// Nothing when there is no such file.
std::optional<std::string> read_bytes(const std::string& path) {
  const File file(std::fopen(path.c_str(), "rb"));
  if (!file) {
    if (errno == ENOENT) return std::nullopt;
    fail(path, "read");
  }
  std::string bytes;
  char buffer[65536];
  for (std::size_t got; (got = std::fread(buffer, 1, sizeof buffer, file.get())) > 0;) bytes.append(buffer, got);
  if (std::ferror(file.get()) != 0) fail(path, "read");
  return bytes;
}

/// A file beside the place that nobody else is writing, and its name.
File open_unfinished(const std::string& path, std::string& name) {
#if defined(_WIN32)
  const int process = _getpid();
#else
  const int process = static_cast<int>(getpid());
#endif
  for (int k = 0;; ++k) {
    name = path + "." + std::to_string(process) + "-" + std::to_string(k) + ".unfinished";
    File file(std::fopen(name.c_str(), "wbx"));
    if (file) return file;
    if (errno != EEXIST) fail(name, "written");
  }
}

/// On the disk before it gets its name: a power cut leaves the whole file or none.
bool write_through(std::FILE* file, const std::string& bytes) {
  if (std::fwrite(bytes.data(), 1, bytes.size(), file) != bytes.size() || std::fflush(file) != 0) return false;
#if defined(_WIN32)
  return true;
#else
  return fsync(fileno(file)) == 0;
#endif
}

Chunk read_chunk(const std::string& path) {
  const std::optional<std::string> bytes = read_bytes(path);
  if (!bytes) fail(path, "read");
  return parse_chunk(path, *bytes);
}

bool same_source(const ChunkHeader& a, const ChunkHeader& b) {
  return a.version == b.version && a.stream_version == b.stream_version && a.inputs == b.inputs && a.seed == b.seed &&
         a.groups == b.groups && a.order == b.order;
}

std::string range_text(std::int64_t first, std::int64_t end) {
  return std::to_string(first) + " to " + std::to_string(end - 1);
}

struct Named {
  std::string path;
  Chunk chunk;
};

/// Refuses what does not make the range exactly; `chunks` are in the order of their first replication.
void check_cover(const std::vector<Named>& chunks, std::int64_t first, std::int64_t count) {
  std::int64_t next = first;
  for (const auto& [path, chunk] : chunks) {
    const ChunkHeader& header = chunk.header;
    if (!same_source(header, chunks.front().chunk.header)) {
      throw BadFile("the files '" + chunks.front().path + "' and '" + path +
                    "' differ in version, stream version, inputs or seed; merge chunks of one run only.");
    }
    if (header.first < next) {
      throw BadFile("the file '" + path + "' holds draws that are not wanted or stand in another file too, from " +
                    std::to_string(header.first) + " (counted from 0); give each draw once.");
    }
    if (header.first > next) break;
    next = header.first + header.count;
  }
  if (next < first + count) {
    std::int64_t found = first + count;
    for (const auto& named : chunks) {
      if (named.chunk.header.first > next) found = std::min(found, named.chunk.header.first);
    }
    throw BadFile("draws " + range_text(next, found) + " (counted from 0) are in none of the files; make that chunk.");
  }
  if (next > first + count) {
    throw BadFile("the files hold draws up to " + std::to_string(next - 1) + " (counted from 0), " +
                  std::to_string(first + count - 1) + " was to be the last; give the range that they hold.");
  }
}

template <class T>
std::vector<T> merge_values(const std::vector<Named>& chunks, std::size_t column, std::size_t rows) {
  const ChunkHeader& header = chunks.front().chunk.header;
  const std::int64_t groups = header.order == RowOrder::by_community ? header.groups : 1;
  std::vector<T> merged;
  merged.reserve(rows);
  for (std::int64_t g = 0; g < groups; ++g) {
    for (const auto& named : chunks) {
      const auto& values = std::get<std::vector<T>>(named.chunk.table.columns()[column].values);
      const auto each = static_cast<std::ptrdiff_t>(values.size()) / groups;
      merged.insert(merged.end(), values.begin() + g * each, values.begin() + (g + 1) * each);
    }
  }
  return merged;
}

void check_columns(const std::vector<Named>& chunks) {
  const auto& wanted = chunks.front().chunk.table.columns();
  for (const auto& [path, chunk] : chunks) {
    const auto& found = chunk.table.columns();
    const bool same = std::equal(wanted.begin(), wanted.end(), found.begin(), found.end(), [](auto& a, auto& b) {
      return a.name == b.name && a.values.index() == b.values.index();
    });
    const std::int64_t groups = chunk.header.order == RowOrder::by_community ? chunk.header.groups : chunk.header.count;
    if (!same || groups <= 0 || chunk.table.rows() % static_cast<std::size_t>(groups) != 0) {
      throw BadFile("the file '" + path + "' has other columns or rows than its run; make it again.");
    }
  }
}

}  // namespace

void write_chunk(const std::string& path, const ChunkHeader& header, const Table& table) {
  const std::string bytes = chunk_bytes(header, table);
  std::string unfinished;
  File file = open_unfinished(path, unfinished);
  const bool written = write_through(file.get(), bytes);
  const bool closed = std::fclose(file.release()) == 0;
  if (!written || !closed || std::rename(unfinished.c_str(), path.c_str()) != 0) {
    const int error = errno;
    std::remove(unfinished.c_str());
    errno = error;
    fail(path, "written");
  }
}

bool holds_chunk(const std::string& path, const ChunkHeader& header) {
  const std::optional<std::string> bytes = read_bytes(path);
  if (!bytes) return false;
  const Chunk chunk = parse_chunk(path, *bytes);
  if (!same_source(chunk.header, header) || chunk.header.first != header.first || chunk.header.count != header.count) {
    throw BadFile("the file '" + path +
                  "' is a chunk of other inputs, draws, seed or version; give another name, or take it away.");
  }
  return true;
}

Table merge_chunks(const std::vector<std::string>& paths, std::int64_t first, std::int64_t count) {
  if (paths.empty()) throw BadArgument("there is no chunk file; give at least one.");
  std::vector<Named> chunks;
  for (const std::string& path : paths) chunks.push_back({path, read_chunk(path)});
  std::stable_sort(chunks.begin(), chunks.end(),
                   [](const Named& a, const Named& b) { return a.chunk.header.first < b.chunk.header.first; });
  check_cover(chunks, first, count);
  check_columns(chunks);
  std::size_t rows = 0;
  for (const auto& named : chunks) rows += named.chunk.table.rows();
  Table merged(rows);
  const auto& columns = chunks.front().chunk.table.columns();
  for (std::size_t c = 0; c < columns.size(); ++c) {
    merged.add(columns[c].name, std::visit(
                                    [&](const auto& values) -> Values {
                                      using T = typename std::decay_t<decltype(values)>::value_type;
                                      return merge_values<T>(chunks, c, rows);
                                    },
                                    columns[c].values));
  }
  return merged;
}

Table describe_chunks(const std::vector<std::string>& paths) {
  std::vector<Text> file, version, inputs, seed;
  std::vector<std::int64_t> stream_version, first, draws, rows;
  const auto hexadecimal = [](std::uint64_t value) {
    char text[17];
    std::snprintf(text, sizeof text, "%016llx", static_cast<unsigned long long>(value));
    return std::string(text);
  };
  for (const std::string& path : paths) {
    const Chunk chunk = read_chunk(path);
    file.push_back(path);
    version.push_back(chunk.header.version);
    stream_version.push_back(chunk.header.stream_version);
    inputs.push_back(hexadecimal(chunk.header.inputs));
    seed.push_back(std::to_string(chunk.header.seed));
    first.push_back(chunk.header.first);
    draws.push_back(chunk.header.count);
    rows.push_back(static_cast<std::int64_t>(chunk.table.rows()));
  }
  Table table(paths.size());
  table.add("file", std::move(file));
  table.add("version", std::move(version));
  table.add("stream_version", std::move(stream_version));
  table.add("inputs", std::move(inputs));
  table.add("seed", std::move(seed));
  table.add("first_draw", std::move(first));
  table.add("draws", std::move(draws));
  table.add("rows", std::move(rows));
  return table;
}

}  // namespace folkmote
