#include <inttypes.h>
#include <stdio.h>

#include "glue.h"

SEXP fm_reply(int status, const char* message, SEXP value) {
  const char* names[] = {"status", "message", "value", ""};
  PROTECT(value);
  SEXP reply = PROTECT(Rf_mkNamed(VECSXP, names));
  SET_VECTOR_ELT(reply, 0, Rf_ScalarInteger(status));
  SET_VECTOR_ELT(reply, 1, Rf_ScalarString(Rf_mkCharCE(message, CE_UTF8)));
  SET_VECTOR_ELT(reply, 2, status == FOLKMOTE_OK ? value : R_NilValue);
  UNPROTECT(2);
  return reply;
}

SEXP fm_digest(uint64_t digest) {
  char text[17];
  snprintf(text, sizeof text, "%016" PRIx64, digest);
  return Rf_mkString(text);
}

double fm_number(SEXP value, const char* what) {
  if (!Rf_isReal(value) || XLENGTH(value) != 1) Rf_error("folkmote glue: '%s' must be one double", what);
  return REAL(value)[0];
}

int fm_whole(SEXP value, const char* what) {
  if (!Rf_isInteger(value) || XLENGTH(value) != 1) Rf_error("folkmote glue: '%s' must be one integer", what);
  return INTEGER(value)[0];
}

const double* fm_reals_or_null(SEXP values, const char* what, int64_t* count) {
  *count = 0;
  if (values == R_NilValue) return NULL;
  if (!Rf_isReal(values)) Rf_error("folkmote glue: '%s' must be NULL or double", what);
  *count = (int64_t)XLENGTH(values);
  return REAL(values);
}

const char* fm_text(SEXP value, const char* what) {
  if (!Rf_isString(value) || XLENGTH(value) != 1) Rf_error("folkmote glue: '%s' must be one string", what);
  return Rf_translateCharUTF8(STRING_ELT(value, 0));
}
