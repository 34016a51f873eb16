// Tables whose cells are whole numbers of 64 bits, which a reader of doubles would round.
#pragma once

#include <cstdint>
#include <cstdlib>
#include <fstream>
#include <map>
#include <stdexcept>
#include <string>
#include <vector>

inline std::string random_table_path(const std::string& name) {
  return std::string(FOLKMOTE_REFERENCE_DIR) + "/" + name;
}

struct RandomRow {
  std::map<std::string, std::string> cells;

  const std::string& text(const std::string& column) const { return cells.at(column); }

  // Decimal, or hexadecimal after 0x.
  std::uint64_t integer(const std::string& column) const {
    std::size_t used = 0;
    const std::uint64_t value = std::stoull(text(column), &used, 0);
    if (used != text(column).size()) {
      throw std::runtime_error("not a whole number: " + text(column));
    }
    return value;
  }

  // strtod reads hexadecimal floating point exactly.
  double real(const std::string& column) const { return std::strtod(text(column).c_str(), nullptr); }
};

// Cells may be quoted, and then hold commas.
inline std::vector<std::string> random_row_cells(const std::string& line) {
  std::vector<std::string> cells(1);
  bool quoted = false;
  for (const char character : line) {
    if (character == '"') {
      quoted = !quoted;
    } else if (character == ',' && !quoted) {
      cells.emplace_back();
    } else if (character != '\r') {
      cells.back() += character;
    }
  }
  return cells;
}

inline std::vector<RandomRow> random_table(const std::string& name) {
  std::ifstream file(random_table_path(name));
  std::string line;
  if (!std::getline(file, line)) {
    throw std::runtime_error("cannot read " + random_table_path(name));
  }
  const auto header = random_row_cells(line);
  std::vector<RandomRow> rows;
  while (std::getline(file, line)) {
    const auto cells = random_row_cells(line);
    RandomRow row;
    for (std::size_t column = 0; column < header.size(); ++column) {
      row.cells[header[column]] = cells.at(column);
    }
    rows.push_back(row);
  }
  return rows;
}
