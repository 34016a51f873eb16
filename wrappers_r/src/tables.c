#include <limits.h>

#include "routines.h"

static folkmote_table* table_of(SEXP handle) { return fm_handle_get(handle, &fm_kind_table); }

SEXP fm_table_create(SEXP rows) {
  FM_MAKES(table, folkmote_table_create((int64_t)fm_number(rows, "rows"), &made, message))
}

static void same_length(SEXP table, SEXP values) {
  if ((int64_t)XLENGTH(values) != folkmote_table_rows(table_of(table))) {
    Rf_error("folkmote glue: a column needs one value per row");
  }
}

SEXP fm_table_add_text(SEXP table, SEXP name, SEXP values) {
  if (!Rf_isString(values)) Rf_error("folkmote glue: text expected");
  same_length(table, values);
  char message[FOLKMOTE_MESSAGE_BYTES] = "";
  const R_xlen_t rows = XLENGTH(values);
  const char** text = (const char**)R_alloc((size_t)rows + 1, sizeof *text);
  for (R_xlen_t r = 0; r < rows; ++r) {
    SEXP entry = STRING_ELT(values, r);
    text[r] = entry == NA_STRING ? NULL : Rf_translateCharUTF8(entry);
  }
  const int status = folkmote_table_add_text(table_of(table), fm_text(name, "name"), text, message);
  return fm_reply(status, message, R_NilValue);
}

/* Integer and logical columns. */
SEXP fm_table_add_integer(SEXP table, SEXP name, SEXP values) {
  if (!Rf_isInteger(values) && !Rf_isLogical(values)) Rf_error("folkmote glue: integer or logical expected");
  same_length(table, values);
  char message[FOLKMOTE_MESSAGE_BYTES] = "";
  const R_xlen_t rows = XLENGTH(values);
  const int* given = Rf_isLogical(values) ? LOGICAL(values) : INTEGER(values);
  int64_t* wide = (int64_t*)R_alloc((size_t)rows + 1, sizeof *wide);
  for (R_xlen_t r = 0; r < rows; ++r) wide[r] = given[r] == NA_INTEGER ? INT64_MIN : given[r];
  const int status = folkmote_table_add_integer(table_of(table), fm_text(name, "name"), wide, message);
  return fm_reply(status, message, R_NilValue);
}

SEXP fm_table_add_real(SEXP table, SEXP name, SEXP values) {
  if (!Rf_isReal(values)) Rf_error("folkmote glue: double expected");
  same_length(table, values);
  FM_DOES(folkmote_table_add_real(table_of(table), fm_text(name, "name"), REAL(values), message))
}

SEXP fm_table_rows(SEXP table) { return Rf_ScalarReal((double)folkmote_table_rows(table_of(table))); }
SEXP fm_table_columns(SEXP table) { return Rf_ScalarInteger((int)folkmote_table_columns(table_of(table))); }

SEXP fm_table_column_name(SEXP table, SEXP column) {
  const char* name = folkmote_table_column_name(table_of(table), fm_whole(column, "column"));
  return Rf_ScalarString(name == NULL ? NA_STRING : Rf_mkCharCE(name, CE_UTF8));
}

SEXP fm_table_column_type(SEXP table, SEXP column) {
  return Rf_ScalarInteger(folkmote_table_column_type(table_of(table), fm_whole(column, "column")));
}

SEXP fm_table_get_text(SEXP table, SEXP column) {
  char message[FOLKMOTE_MESSAGE_BYTES] = "";
  const R_xlen_t rows = (R_xlen_t)folkmote_table_rows(table_of(table));
  const char** text = (const char**)R_alloc((size_t)rows + 1, sizeof *text);
  const int status = folkmote_table_get_text(table_of(table), fm_whole(column, "column"), text, message);
  SEXP values = PROTECT(Rf_allocVector(STRSXP, rows));
  for (R_xlen_t r = 0; status == FOLKMOTE_OK && r < rows; ++r) {
    SET_STRING_ELT(values, r, text[r] == NULL ? NA_STRING : Rf_mkCharCE(text[r], CE_UTF8));
  }
  SEXP reply = fm_reply(status, message, values);
  UNPROTECT(1);
  return reply;
}

/* An integer vector, or a double one when a value does not fit R's 32 bits. */
SEXP fm_table_get_integer(SEXP table, SEXP column) {
  char message[FOLKMOTE_MESSAGE_BYTES] = "";
  const R_xlen_t rows = (R_xlen_t)folkmote_table_rows(table_of(table));
  int64_t* wide = (int64_t*)R_alloc((size_t)rows + 1, sizeof *wide);
  const int status = folkmote_table_get_integer(table_of(table), fm_whole(column, "column"), wide, message);
  if (status != FOLKMOTE_OK) return fm_reply(status, message, R_NilValue);
  int fits = 1;
  for (R_xlen_t r = 0; r < rows; ++r) {
    if (wide[r] != INT64_MIN && (wide[r] > INT_MAX || wide[r] <= INT_MIN)) fits = 0;
  }
  SEXP values = PROTECT(Rf_allocVector(fits ? INTSXP : REALSXP, rows));
  for (R_xlen_t r = 0; r < rows; ++r) {
    const int missing = wide[r] == INT64_MIN;
    if (fits)
      INTEGER(values)[r] = missing ? NA_INTEGER : (int)wide[r];
    else
      REAL(values)[r] = missing ? NA_REAL : (double)wide[r];
  }
  SEXP reply = fm_reply(status, message, values);
  UNPROTECT(1);
  return reply;
}

SEXP fm_table_get_real(SEXP table, SEXP column) {
  char message[FOLKMOTE_MESSAGE_BYTES] = "";
  SEXP values = PROTECT(Rf_allocVector(REALSXP, (R_xlen_t)folkmote_table_rows(table_of(table))));
  const int status = folkmote_table_get_real(table_of(table), fm_whole(column, "column"), REAL(values), message);
  SEXP reply = fm_reply(status, message, values);
  UNPROTECT(1);
  return reply;
}

SEXP fm_table_digest(SEXP table) { return fm_digest(folkmote_table_digest(fm_handle_or_null(table, &fm_kind_table))); }
