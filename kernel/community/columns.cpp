#include "community/columns.hpp"

#include <charconv>
#include <cmath>

#include "community/fault.hpp"

namespace folkmote {

namespace {

constexpr double largest_whole = 9007199254740992.0;  // 2^53

const char* type_name(const Values& values) {
  switch (values.index()) {
    case 0:
      return "text";
    case 1:
      return "integer";
    default:
      return "real";
  }
}

bool is_whole(double value) { return std::fabs(value) <= largest_whole && value == std::floor(value); }

/// Labels of one column; `missing` and `broken` collect the rows without a usable label.
struct ReadLabels {
  RowFaults& missing;
  RowFaults& broken;

  std::vector<std::string> operator()(const std::vector<Text>& values) const {
    std::vector<std::string> labels(values.size());
    for (std::size_t r = 0; r < values.size(); ++r) {
      if (values[r] && !values[r]->empty())
        labels[r] = *values[r];
      else
        missing.add(r);
    }
    return labels;
  }
  std::vector<std::string> operator()(const std::vector<std::int64_t>& values) const {
    std::vector<std::string> labels(values.size());
    for (std::size_t r = 0; r < values.size(); ++r) {
      if (values[r] != missing_integer)
        labels[r] = std::to_string(values[r]);
      else
        missing.add(r);
    }
    return labels;
  }
  std::vector<std::string> operator()(const std::vector<double>& values) const {
    std::vector<std::string> labels(values.size());
    for (std::size_t r = 0; r < values.size(); ++r) {
      if (std::isnan(values[r]))
        missing.add(r);
      else if (is_whole(values[r]))
        labels[r] = std::to_string(static_cast<std::int64_t>(values[r]));
      else
        broken.add(r);
    }
    return labels;
  }
};

std::vector<double> as_reals(const NamedTable& source, const Column& column) {
  if (const auto* reals = std::get_if<std::vector<double>>(&column.values)) return *reals;
  if (const auto* integers = std::get_if<std::vector<std::int64_t>>(&column.values)) {
    std::vector<double> values(integers->size());
    for (std::size_t r = 0; r < values.size(); ++r) {
      values[r] = (*integers)[r] == missing_integer ? std::nan("") : static_cast<double>((*integers)[r]);
    }
    return values;
  }
  throw BadData(std::string(source.name) + ": column '" + column.name + "' is of type " + type_name(column.values) +
                " in all " + std::to_string(source.table.rows()) + " rows (from row 1); it must be numeric.");
}

std::string range_text(const NumberRule& rule) {
  if (rule.binary) return "is neither 0 nor 1";
  const bool bounded = rule.high < std::numeric_limits<double>::infinity();
  if (bounded) return "lies outside " + plain_number(rule.low) + " to " + plain_number(rule.high);
  return rule.low_open ? "is not positive" : "is negative";
}

bool outside(const NumberRule& rule, double value) {
  if (rule.binary) return value != 0.0 && value != 1.0;
  return value < rule.low || value > rule.high || (rule.low_open && value == rule.low);
}

}  // namespace

void RowFaults::raise_if_any() const {
  if (count_ == 0) return;
  std::string sentence = table_ + ": column '" + column_ + "', " + (count_ == 1 ? "row " : "rows ");
  for (std::size_t k = 0; k < rows_.size(); ++k) {
    if (k > 0) sentence += (k + 1 == count_) ? " and " : ", ";
    sentence += std::to_string(rows_[k] + 1);
  }
  if (count_ > rows_.size()) sentence += ", ...";
  sentence += " (" + std::to_string(count_) + (count_ == 1 ? " row" : " rows") + "): " + rule_ + ".";
  throw BadData(sentence);
}

const Column& required(const NamedTable& source, const char* column) {
  const Column* found = source.table.find(column);
  if (found == nullptr) {
    throw BadData(std::string(source.name) + ": column '" + column + "' is missing (" +
                  std::to_string(source.table.rows()) + " rows); add it.");
  }
  return *found;
}

std::vector<std::string> read_labels(const NamedTable& source, const char* column) {
  RowFaults missing(source.name, column, "an id is missing or empty; give every row one");
  RowFaults broken(source.name, column, "an id is not a whole number up to 2^53; use whole numbers or text");
  std::vector<std::string> labels = std::visit(ReadLabels{missing, broken}, required(source, column).values);
  missing.raise_if_any();
  broken.raise_if_any();
  return labels;
}

std::vector<double> read_numbers(const NamedTable& source, const char* column, const NumberRule& rule, double absent) {
  const Column* found = source.table.find(column);
  if (found == nullptr) return std::vector<double>(source.table.rows(), absent);
  std::vector<double> values = as_reals(source, *found);
  RowFaults missing(source.name, column, "a value is missing; fill it in or leave the column out");
  RowFaults infinite(source.name, column, "a value is not finite; give a finite number");
  RowFaults ranged(source.name, column, "a value " + range_text(rule) + "; correct it");
  for (std::size_t r = 0; r < values.size(); ++r) {
    if (std::isnan(values[r])) {
      if (!rule.missing_allowed) missing.add(r);
    } else if (std::isinf(values[r]) && !(rule.infinite_allowed && values[r] > 0.0)) {
      infinite.add(r);
    } else if (outside(rule, values[r])) {
      ranged.add(r);
    }
  }
  missing.raise_if_any();
  infinite.raise_if_any();
  ranged.raise_if_any();
  return values;
}

Values take_rows(const Values& values, const std::vector<std::int64_t>& rows) {
  return std::visit(
      [&rows](const auto& all) -> Values {
        std::decay_t<decltype(all)> taken;
        taken.reserve(rows.size());
        for (std::int64_t row : rows) taken.push_back(all[static_cast<std::size_t>(row)]);
        return taken;
      },
      values);
}

std::string plain_number(double value) {
  char buffer[32];
  const auto end = std::to_chars(buffer, buffer + sizeof buffer, value).ptr;
  return std::string(buffer, end);
}

}  // namespace folkmote
