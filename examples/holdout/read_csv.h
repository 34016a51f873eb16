/*
 * Just enough of a reader for the tables in data/: comma separated, a header row, no quotes.
 * "NA" is a missing value and "Inf" an exact relay. Ids become text or whole numbers, all else real numbers.
 */
#ifndef HOLDOUT_READ_CSV_H
#define HOLDOUT_READ_CSV_H

#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "folkmote.h"

/* The whole file as one string with a final zero, or NULL. The caller frees it. */
static char* read_text(const char* path) {
  FILE* file = fopen(path, "rb");
  char* text = NULL;
  size_t size = 0, room = 0, got = 0;
  if (!file) return NULL;
  do {
    size += got;
    if (room - size < 2) {
      char* more = realloc(text, room = 2 * room + 65536);
      if (!more) {
        free(text);
        fclose(file);
        return NULL;
      }
      text = more;
    }
    got = fread(text + size, 1, room - size - 1, file);
  } while (got > 0);
  text[size] = '\0';
  if (ferror(file)) {
    free(text);
    text = NULL;
  }
  fclose(file);
  return text;
}

/* Cut `text` into cells in place. Returns how many there are; `columns` gets the number in the header row.
 * With `cells` NULL it only counts and leaves the text alone. */
static size_t cut_cells(char* text, char** cells, size_t* columns) {
  size_t count = 0;
  *columns = 0;
  for (char* at = text; *at;) {
    size_t length = strcspn(at, ",\n");
    char end = at[length];
    if (cells) {
      cells[count] = at;
      at[length] = '\0';
    }
    ++count;
    if (end == '\n' && *columns == 0) *columns = count;
    at += length + (end != '\0');
  }
  return count;
}

static double real_of(const char* cell) { return strcmp(cell, "NA") == 0 ? NAN : strtod(cell, NULL); }
static int64_t whole_of(const char* cell) { return strcmp(cell, "NA") == 0 ? INT64_MIN : strtoll(cell, NULL, 10); }

static int is_one_of(const char* name, const char* const* names) {
  for (; *names; ++names)
    if (strcmp(name, *names) == 0) return 1;
  return 0;
}

/* Add column `c` of the cells (the header row first) to the table; the kernel copies the values. */
static folkmote_status add_column(folkmote_table* table, char** cells, size_t rows, size_t columns, size_t c,
                                  char* message) {
  static const char* const texts[] = {"community", "broadcast", "gathering", NULL};
  static const char* const wholes[] = {"member", "listener", "speaker", NULL};
  const char* name = cells[c];
  folkmote_status status = FOLKMOTE_OUT_OF_MEMORY;
  union {
    const char** text;
    int64_t* whole;
    double* real;
    void* any;
  } values;
  values.any = calloc(rows ? rows : 1, 8);
  if (!values.any) return status;
  for (size_t r = 0; r < rows; ++r) {
    char* cell = cells[(r + 1) * columns + c];
    if (is_one_of(name, texts))
      values.text[r] = cell;
    else if (is_one_of(name, wholes))
      values.whole[r] = whole_of(cell);
    else
      values.real[r] = real_of(cell);
  }
  if (is_one_of(name, texts))
    status = folkmote_table_add_text(table, name, values.text, message);
  else if (is_one_of(name, wholes))
    status = folkmote_table_add_integer(table, name, values.whole, message);
  else
    status = folkmote_table_add_real(table, name, values.real, message);
  free(values.any);
  return status;
}

/* Read folder/name.csv. On failure *table is NULL and the message says why. */
static folkmote_status read_csv(const char* folder, const char* name, folkmote_table** table, char* message) {
  char path[4096];
  folkmote_status status = FOLKMOTE_BAD_DATA;
  char *text, **cells = NULL;
  size_t columns = 0, count = 0;
  *table = NULL;
  snprintf(path, sizeof path, "%s/%s.csv", folder, name);
  text = read_text(path);
  if (text) count = cut_cells(text, NULL, &columns);
  if (columns > 0 && count % columns == 0) cells = malloc(count * sizeof *cells);
  if (!cells) {
    snprintf(message, FOLKMOTE_MESSAGE_BYTES, "%.900s cannot be read, or its rows are of different lengths.", path);
  } else {
    cut_cells(text, cells, &columns);
    status = folkmote_table_create((int64_t)(count / columns - 1), table, message);
    for (size_t c = 0; c < columns && status == FOLKMOTE_OK; ++c)
      status = add_column(*table, cells, count / columns - 1, columns, c, message);
    if (status != FOLKMOTE_OK) {
      folkmote_table_destroy(*table);
      *table = NULL;
    }
  }
  free(cells);
  free(text);
  return status;
}

#endif
