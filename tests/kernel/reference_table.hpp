// Reads the small csv tables of tests/reference: one header line, comma separated, fields may be quoted.
#pragma once

#include <cstdlib>
#include <fstream>
#include <stdexcept>
#include <string>
#include <utility>
#include <vector>

#ifndef FOLKMOTE_REFERENCE_DIR
#error "the build must define FOLKMOTE_REFERENCE_DIR as the path of tests/reference"
#endif

namespace reference {

inline std::string path_of(const std::string& file) { return std::string(FOLKMOTE_REFERENCE_DIR) + "/" + file; }

// One line into fields. A quoted field may hold commas, and "" stands for one quote.
inline std::vector<std::string> fields_of(const std::string& line) {
  std::vector<std::string> fields(1);
  bool quoted = false;
  for (std::size_t i = 0; i < line.size(); ++i) {
    const char c = line[i];
    if (c == '"' && quoted && i + 1 < line.size() && line[i + 1] == '"')
      fields.back() += line[++i];
    else if (c == '"')
      quoted = !quoted;
    else if (c == ',' && !quoted)
      fields.emplace_back();
    else if (c != '\r')
      fields.back() += c;
  }
  return fields;
}

// A decimal or hexadecimal number, the whole of the field; throws on anything else. Underflow to a subnormal
// number or to zero is fine.
inline double number_of(const std::string& field) {
  char* end = nullptr;
  const double value = std::strtod(field.c_str(), &end);
  if (field.empty() || *end != '\0') throw std::runtime_error("not a number: '" + field + "'");
  return value;
}

class Table {
 public:
  explicit Table(const std::string& file) : file_(file) {
    std::ifstream in(path_of(file));
    if (!in) throw std::runtime_error("cannot read " + path_of(file));
    std::string line;
    std::getline(in, line);
    header_ = fields_of(line);
    while (std::getline(in, line)) {
      if (line.empty()) continue;
      rows_.push_back(fields_of(line));
      if (rows_.back().size() != header_.size())
        throw std::runtime_error(file + ": a row of the wrong length: " + line);
    }
    if (rows_.empty()) throw std::runtime_error(file + " holds no rows");
  }

  std::size_t size() const { return rows_.size(); }

  const std::string& text(std::size_t row, const std::string& column) const { return rows_.at(row)[index(column)]; }
  double number(std::size_t row, const std::string& column) const { return number_of(text(row, column)); }

  std::vector<std::string> texts(const std::string& column) const {
    std::vector<std::string> all;
    for (const auto& row : rows_) all.push_back(row[index(column)]);
    return all;
  }
  std::vector<double> numbers(const std::string& column) const {
    std::vector<double> all;
    for (const auto& row : rows_) all.push_back(number_of(row[index(column)]));
    return all;
  }
  bool has(const std::string& column) const {
    for (const auto& name : header_)
      if (name == column) return true;
    return false;
  }

 private:
  std::size_t index(const std::string& column) const {
    for (std::size_t j = 0; j < header_.size(); ++j)
      if (header_[j] == column) return j;
    throw std::runtime_error(file_ + " has no column " + column);
  }
  std::string file_;
  std::vector<std::string> header_;
  std::vector<std::vector<std::string>> rows_;
};

}  // namespace reference
