#include "guard.hpp"
#include "handles.hpp"

using folkmote::guard;
using folkmote::needed;

namespace {

const folkmote::Column& column_at(const folkmote_table* table, int64_t column) {
  const auto& columns = needed(table, "table")->table.columns();
  if (column < 0 || column >= static_cast<int64_t>(columns.size())) {
    throw folkmote::BadArgument("column " + std::to_string(column) + " does not exist; the table has " +
                                std::to_string(columns.size()) + ".");
  }
  return columns[static_cast<std::size_t>(column)];
}

template <class T>
const std::vector<T>& values_at(const folkmote_table* table, int64_t column, const char* type) {
  const folkmote::Column& found = column_at(table, column);
  const auto* values = std::get_if<std::vector<T>>(&found.values);
  if (values == nullptr)
    throw folkmote::BadArgument("column '" + found.name + "' is not " + type + "; ask for its own type.");
  return *values;
}

/// An empty table needs no array.
template <class Pointer>
Pointer needed_values(const folkmote_table* table, Pointer values) {
  return needed(table, "table")->table.rows() == 0 ? values : needed(values, "values");
}

template <class T>
void add_numbers(folkmote_table* table, const char* name, const T* values) {
  needed_values(table, values);
  const std::size_t rows = table->table.rows();
  table->table.add(needed(name, "name"), rows == 0 ? std::vector<T>{} : std::vector<T>(values, values + rows));
}

template <class T>
void copy_numbers(const folkmote_table* table, int64_t column, T* values, const char* type) {
  const std::vector<T>& source = values_at<T>(table, column, type);
  needed_values(table, values);
  std::copy(source.begin(), source.end(), values);
}

}  // namespace

folkmote_status folkmote_table_create(int64_t rows, folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    if (rows < 0) throw folkmote::BadArgument("rows is " + std::to_string(rows) + "; it must be at least 0.");
    *table = new folkmote_table(folkmote::Table(static_cast<std::size_t>(rows)));
  });
}

void folkmote_table_destroy(folkmote_table* table) { delete table; }

folkmote_status folkmote_table_add_text(folkmote_table* table, const char* name, const char* const* values,
                                        char* message) {
  return guard(message, [&] {
    needed_values(table, values);
    std::vector<folkmote::Text> texts(table->table.rows());
    for (std::size_t r = 0; r < texts.size(); ++r) {
      if (values[r] != nullptr) texts[r] = values[r];
    }
    table->table.add(needed(name, "name"), std::move(texts));
  });
}

folkmote_status folkmote_table_add_integer(folkmote_table* table, const char* name, const int64_t* values,
                                           char* message) {
  return guard(message, [&] { add_numbers<std::int64_t>(table, name, values); });
}

folkmote_status folkmote_table_add_real(folkmote_table* table, const char* name, const double* values, char* message) {
  return guard(message, [&] { add_numbers<double>(table, name, values); });
}

int64_t folkmote_table_rows(const folkmote_table* table) {
  return table == nullptr ? 0 : static_cast<int64_t>(table->table.rows());
}

int64_t folkmote_table_columns(const folkmote_table* table) {
  return table == nullptr ? 0 : static_cast<int64_t>(table->table.columns().size());
}

const char* folkmote_table_column_name(const folkmote_table* table, int64_t column) {
  if (column < 0 || column >= folkmote_table_columns(table)) return nullptr;
  return table->table.columns()[static_cast<std::size_t>(column)].name.c_str();
}

int folkmote_table_column_type(const folkmote_table* table, int64_t column) {
  if (column < 0 || column >= folkmote_table_columns(table)) return 0;
  return static_cast<int>(table->table.columns()[static_cast<std::size_t>(column)].values.index()) + 1;
}

folkmote_status folkmote_table_get_text(const folkmote_table* table, int64_t column, const char** values,
                                        char* message) {
  return guard(message, [&] {
    const auto& texts = values_at<folkmote::Text>(table, column, "text");
    needed_values(table, values);
    for (std::size_t r = 0; r < texts.size(); ++r) values[r] = texts[r] ? texts[r]->c_str() : nullptr;
  });
}

folkmote_status folkmote_table_get_integer(const folkmote_table* table, int64_t column, int64_t* values,
                                           char* message) {
  return guard(message, [&] { copy_numbers<std::int64_t>(table, column, values, "integer"); });
}

folkmote_status folkmote_table_get_real(const folkmote_table* table, int64_t column, double* values, char* message) {
  return guard(message, [&] { copy_numbers<double>(table, column, values, "real"); });
}

uint64_t folkmote_table_digest(const folkmote_table* table) { return table == nullptr ? 0 : table->table.digest(); }
