#include "routines.h"

SEXP fm_version(void) { return Rf_mkString(folkmote_version()); }
SEXP fm_stream_version(void) { return Rf_ScalarInteger(folkmote_stream_version()); }
SEXP fm_live_handles(void) { return Rf_ScalarReal((double)folkmote_live_handles()); }

/* What this layer was compiled against: c(version, stream version, room for messages). */
SEXP fm_header_constants(void) {
  SEXP constants = PROTECT(Rf_allocVector(VECSXP, 3));
  SET_VECTOR_ELT(constants, 0, Rf_mkString(FOLKMOTE_VERSION));
  SET_VECTOR_ELT(constants, 1, Rf_ScalarInteger(FOLKMOTE_STREAM_VERSION));
  SET_VECTOR_ELT(constants, 2, Rf_ScalarInteger(FOLKMOTE_MESSAGE_BYTES));
  UNPROTECT(1);
  return constants;
}

SEXP fm_message_bytes(void) { return Rf_ScalarInteger((int)folkmote_message_bytes()); }

SEXP fm_status_name(SEXP status) { return Rf_mkString(folkmote_status_name(fm_whole(status, "status"))); }
SEXP fm_status_text(SEXP status) { return Rf_mkString(folkmote_status_text(fm_whole(status, "status"))); }
