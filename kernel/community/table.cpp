#include "community/table.hpp"

#include "community/fault.hpp"
#include "random/digest.hpp"

namespace folkmote {

void Table::add(std::string name, Values values) {
  if (name.empty()) throw BadArgument("a table column needs a name that is not empty.");
  if (find(name) != nullptr) throw BadArgument("the table already has a column '" + name + "'.");
  const std::size_t length = std::visit([](const auto& v) { return v.size(); }, values);
  if (length != rows_) {
    throw BadArgument("column '" + name + "' has " + std::to_string(length) + " values for a table of " +
                      std::to_string(rows_) + " rows.");
  }
  columns_.push_back({std::move(name), std::move(values)});
}

const Column* Table::find(std::string_view name) const {
  for (const Column& column : columns_) {
    if (column.name == name) return &column;
  }
  return nullptr;
}

namespace {

struct AddValues {
  Digest& digest;
  void operator()(const std::vector<Text>& values) const {
    for (const Text& value : values) {
      digest.add(std::int64_t{value.has_value()});
      if (value) digest.add(std::string_view(*value));
    }
  }
  void operator()(const std::vector<std::int64_t>& values) const {
    for (std::int64_t value : values) digest.add(value);
  }
  void operator()(const std::vector<double>& values) const {
    for (double value : values) digest.add(value);
  }
};

}  // namespace

std::uint64_t Table::digest() const {
  Digest digest;
  digest.add(static_cast<std::int64_t>(rows_));
  for (const Column& column : columns_) {
    digest.add(std::string_view(column.name));
    digest.add(static_cast<std::int64_t>(column.values.index() + 1));
    std::visit(AddValues{digest}, column.values);
  }
  return digest.value();
}

}  // namespace folkmote
