#include "numerics/strict.hpp"

#include <bit>
#include <cstring>

#include "community/fault.hpp"
#include "random/digest.hpp"
#include "shards/chunk_file.hpp"

namespace folkmote {

namespace {

constexpr std::string_view first_line = "folkmote chunk 1\n";
constexpr std::uint64_t missing_text = ~std::uint64_t{0};

class Writer {
 public:
  std::string bytes{first_line};

  void word(std::uint64_t value) {
    for (int shift = 0; shift < 64; shift += 8) bytes.push_back(static_cast<char>((value >> shift) & 0xffU));
  }
  void text(const std::string& value) {
    word(value.size());
    bytes += value;
  }
  void value(const Text& value) { value_or_missing(value); }
  void value(std::int64_t value) { word(static_cast<std::uint64_t>(value)); }
  void value(double value) { word(std::bit_cast<std::uint64_t>(value)); }

 private:
  void value_or_missing(const Text& value) { value ? text(*value) : word(missing_text); }
};

class Reader {
 public:
  Reader(const std::string& path, const std::string& bytes) : path_(path), bytes_(bytes) {
    if (bytes.compare(0, first_line.size(), first_line) != 0) fail("is no chunk file of this format");
    at_ = first_line.size();
  }

  [[noreturn]] void fail(const std::string& what) const {
    throw BadFile("the file '" + path_ + "' " + what + "; make it again, or take it away.");
  }

  std::uint64_t word() {
    if (bytes_.size() - at_ < 8) fail("ends too early");
    std::uint64_t value = 0;
    for (int k = 0; k < 8; ++k) {
      value |= static_cast<std::uint64_t>(static_cast<unsigned char>(bytes_[at_ + k])) << (8 * k);
    }
    at_ += 8;
    return value;
  }
  std::string text(std::uint64_t length) {
    if (bytes_.size() - at_ < length) fail("ends too early");
    at_ += length;
    return bytes_.substr(at_ - length, length);
  }
  std::string text() { return text(word()); }
  /// A number of things of at least eight bytes each: no more than there are bytes.
  std::uint64_t count() {
    const std::uint64_t value = word();
    if (value > bytes_.size() / 8) fail("is damaged");
    return value;
  }

  void value(Text& out) {
    const std::uint64_t length = word();
    if (length != missing_text) out = text(length);
  }
  void value(std::int64_t& out) { out = static_cast<std::int64_t>(word()); }
  void value(double& out) { out = std::bit_cast<double>(word()); }

  std::size_t at() const { return at_; }

 private:
  const std::string& path_;
  const std::string& bytes_;
  std::size_t at_ = 0;
};

std::uint64_t digest_of(std::string_view bytes) { return Digest().raw(bytes).value(); }

template <class T>
std::vector<T> read_values(Reader& in, std::size_t rows) {
  std::vector<T> values(rows);
  for (T& value : values) in.value(value);
  return values;
}

Values read_column(Reader& in, std::size_t rows) {
  switch (in.word()) {
    case 0:
      return read_values<Text>(in, rows);
    case 1:
      return read_values<std::int64_t>(in, rows);
    case 2:
      return read_values<double>(in, rows);
    default:
      in.fail("is damaged");
  }
}

ChunkHeader read_header(Reader& in) {
  ChunkHeader header;
  header.version = in.text();
  header.stream_version = static_cast<std::int64_t>(in.word());
  header.inputs = in.word();
  header.seed = in.word();
  header.first = static_cast<std::int64_t>(in.word());
  header.count = static_cast<std::int64_t>(in.word());
  header.groups = static_cast<std::int64_t>(in.word());
  const std::uint64_t order = in.word();
  if (order != 1 && order != 2) in.fail("is damaged");
  header.order = static_cast<RowOrder>(order);
  return header;
}

}  // namespace

std::string chunk_bytes(const ChunkHeader& header, const Table& table) {
  Writer out;
  out.text(header.version);
  for (const std::uint64_t word :
       {static_cast<std::uint64_t>(header.stream_version), header.inputs, header.seed,
        static_cast<std::uint64_t>(header.first), static_cast<std::uint64_t>(header.count),
        static_cast<std::uint64_t>(header.groups), static_cast<std::uint64_t>(header.order),
        static_cast<std::uint64_t>(table.rows()), static_cast<std::uint64_t>(table.columns().size())}) {
    out.word(word);
  }
  for (const Column& column : table.columns()) {
    out.text(column.name);
    out.word(column.values.index());
    std::visit(
        [&](const auto& values) {
          for (const auto& value : values) out.value(value);
        },
        column.values);
  }
  out.word(digest_of(out.bytes));
  return std::move(out.bytes);
}

Chunk parse_chunk(const std::string& path, const std::string& bytes) {
  Reader in(path, bytes);
  Chunk chunk;
  chunk.header = read_header(in);
  const std::uint64_t rows = in.count(), columns = in.count();
  chunk.table = Table(rows);
  for (std::uint64_t c = 0; c < columns; ++c) {
    std::string name = in.text();
    chunk.table.add(std::move(name), read_column(in, rows));
  }
  const std::size_t end = in.at();
  if (in.word() != digest_of(std::string_view(bytes).substr(0, end)) || in.at() != bytes.size()) in.fail("is damaged");
  return chunk;
}

}  // namespace folkmote
