#include "routines.h"

/* The files' names in UTF-8, in memory that R takes back. */
static const char** paths_of(SEXP files) {
  if (!Rf_isString(files)) Rf_error("folkmote glue: 'files' must be strings");
  const R_xlen_t count = XLENGTH(files);
  const char** paths = (const char**)R_alloc((size_t)count + 1, sizeof(char*));
  for (R_xlen_t k = 0; k < count; ++k) paths[k] = Rf_translateCharUTF8(STRING_ELT(files, k));
  return paths;
}

SEXP fm_chunk_run(SEXP equilibrium, SEXP scenario, SEXP first, SEXP draws, SEXP seed, SEXP low, SEXP high, SEXP level,
                  SEXP options, SEXP file) {
  char message[FOLKMOTE_MESSAGE_BYTES] = "";
  int computed = 0;
  const int status = folkmote_chunk_run(
      fm_handle_get(equilibrium, &fm_kind_equilibrium), fm_handle_or_null(scenario, &fm_kind_scenario),
      (int64_t)fm_number(first, "first"), (int64_t)fm_number(draws, "draws"), (uint64_t)fm_number(seed, "seed"),
      fm_number(low, "low"), fm_number(high, "high"), fm_whole(level, "level"), fm_options_get(options),
      fm_text(file, "file"), &computed, message);
  SEXP reply = fm_reply(status, message, PROTECT(Rf_ScalarLogical(computed)));
  UNPROTECT(1);
  return reply;
}

SEXP fm_chunk_merge(SEXP files, SEXP first, SEXP draws) {
  const char** paths = paths_of(files);
  FM_MAKES(table, folkmote_chunk_merge((int64_t)XLENGTH(files), paths, (int64_t)fm_number(first, "first"),
                                       (int64_t)fm_number(draws, "draws"), &made, message))
}

SEXP fm_chunk_table(SEXP files) {
  const char** paths = paths_of(files);
  FM_MAKES(table, folkmote_chunk_table((int64_t)XLENGTH(files), paths, &made, message))
}
