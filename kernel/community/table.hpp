#pragma once
// A table of named columns: the form of every input and every result.
#include "numerics/strict.hpp"

#include <cstdint>
#include <deque>
#include <limits>
#include <optional>
#include <string>
#include <string_view>
#include <variant>
#include <vector>

namespace folkmote {

using Text = std::optional<std::string>;  // missing: nullopt
inline constexpr std::int64_t missing_integer = std::numeric_limits<std::int64_t>::min();

using Values = std::variant<std::vector<Text>, std::vector<std::int64_t>, std::vector<double>>;

struct Column {
  std::string name;
  Values values;
};

class Table {
 public:
  explicit Table(std::size_t rows) : rows_(rows) {}

  std::size_t rows() const { return rows_; }
  const std::deque<Column>& columns() const { return columns_; }

  /// Throws BadArgument when the name is empty or taken, or the length is not rows().
  void add(std::string name, Values values);

  /// The column of that name, or nullptr.
  const Column* find(std::string_view name) const;

  /// Digest of names, types and values (random/digest.hpp).
  std::uint64_t digest() const;

 private:
  std::size_t rows_;
  std::deque<Column> columns_;  // columns never move: callers hold their names
};

}  // namespace folkmote
