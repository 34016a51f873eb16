/* The raw layer: one .Call routine per function of folkmote.h, nothing more. Every routine that can fail
 * returns list(status, message, value); R/conditions.R turns a status into a condition. */
#ifndef FOLKMOTE_GLUE_H
#define FOLKMOTE_GLUE_H

#define R_NO_REMAP
#include <R.h>
#include <Rinternals.h>
#include <setjmp.h>
#include <time.h>

#include "folkmote.h"

/* ---- replies (reply.c) ---- */
SEXP fm_reply(int status, const char* message, SEXP value);
SEXP fm_digest(uint64_t digest); /* 16 hexadecimal digits */

/* ---- arguments (reply.c); all stop with an R error when the type is wrong ---- */
double fm_number(SEXP value, const char* what);
int fm_whole(SEXP value, const char* what);
const double* fm_reals_or_null(SEXP values, const char* what, int64_t* count);
const char* fm_text(SEXP value, const char* what);

/* ---- handles (handles.c) ---- */
typedef struct fm_kind {
  const char* name;
  R_CFinalizer_t finalise;
} fm_kind;

extern const fm_kind fm_kind_table, fm_kind_study, fm_kind_beliefs, fm_kind_payoff, fm_kind_options,
    fm_kind_equilibrium, fm_kind_scenario;

SEXP fm_handle_new(const fm_kind* kind);
void* fm_handle_get(SEXP handle, const fm_kind* kind);
void* fm_handle_or_null(SEXP handle, const fm_kind* kind);
SEXP fm_handle_alive(SEXP handle);
SEXP fm_handle_release(SEXP handle);

/* Body of a routine that makes one native object: `call` stores it in `made`. Its arguments are converted, and
 * may fail, before the object exists; its owner exists before it. */
#define FM_MAKES(kind, call)                             \
  char message[FOLKMOTE_MESSAGE_BYTES] = "";             \
  folkmote_##kind* made = NULL;                          \
  SEXP handle = PROTECT(fm_handle_new(&fm_kind_##kind)); \
  const int status = (call);                             \
  R_SetExternalPtrAddr(handle, made);                    \
  SEXP reply = fm_reply(status, message, handle);        \
  UNPROTECT(1);                                          \
  return reply;

/* Body of a routine that changes an object and makes none. */
#define FM_DOES(call)                        \
  char message[FOLKMOTE_MESSAGE_BYTES] = ""; \
  const int status = (call);                 \
  return fm_reply(status, message, R_NilValue);

/* ---- options carry the state of their progress callback (options.c) ---- */
typedef struct fm_options {
  folkmote_options* options;
  int show;             /* write progress to the console */
  int shown;            /* a progress line stands there now */
  int percent, seconds; /* as last written */
  time_t started;
  int64_t done, total;
  SEXP tick;    /* function(done, total) of R, or NULL; kept alive by the handle */
  jmp_buf home; /* where a jump out of `tick` is caught */
} fm_options;

void fm_options_finalise(SEXP handle);
const folkmote_options* fm_options_get(SEXP handle);

#endif
