#pragma once
// Reading columns of the study tables, and saying what is wrong with them.
#include "numerics/strict.hpp"

#include <cstdint>
#include <string>
#include <vector>

#include "community/table.hpp"

namespace folkmote {

/// Collects the rows that break one rule and raises one sentence for all of them:
/// "links: column 'speaker', rows 4, 9 and 12 (3 rows): names nobody in members; ..."
class RowFaults {
 public:
  RowFaults(std::string table, std::string column, std::string rule)
      : table_(std::move(table)), column_(std::move(column)), rule_(std::move(rule)) {}

  void add(std::size_t row) {
    if (rows_.size() < shown) rows_.push_back(row);
    ++count_;
  }
  void raise_if_any() const;

 private:
  static constexpr std::size_t shown = 5;
  std::string table_, column_, rule_;
  std::vector<std::size_t> rows_;
  std::size_t count_ = 0;
};

/// What a numeric column may hold.
struct NumberRule {
  double low;
  double high;
  bool low_open = false;
  bool missing_allowed = false;
  bool infinite_allowed = false;
  bool binary = false;
};

/// A table with the name that messages use for it.
struct NamedTable {
  const Table& table;
  const char* name;
};

/// The column, or BadData when the table lacks it.
const Column& required(const NamedTable& source, const char* column);

/// Ids as text labels: 7, 7.0 and "7" are the same. Missing and fractional ids are refused.
std::vector<std::string> read_labels(const NamedTable& source, const char* column);

/// Numbers under a rule; an absent column gives `absent` in every row. Missing values come out as NaN.
std::vector<double> read_numbers(const NamedTable& source, const char* column, const NumberRule& rule, double absent);

/// The entries of a column at the given rows, of the same type.
Values take_rows(const Values& values, const std::vector<std::int64_t>& rows);

/// How a value reads in a message or a label.
std::string plain_number(double value);

}  // namespace folkmote
