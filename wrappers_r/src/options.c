/* Options of a run, with the callback that shows progress and notices a pending interrupt. The kernel calls it
 * about ten times a second on R's own thread. Nothing may jump out of it, so the check runs inside
 * R_ToplevelExec and only its outcome is passed on. */
#include "routines.h"

/* Rewritten when the percentage or the second changes, so that a console is not flooded. */
static void show_progress(fm_options* state) {
  const int percent = state->total > 0 ? (int)(100.0 * (double)state->done / (double)state->total) : 0;
  const int seconds = (int)difftime(time(NULL), state->started);
  if (seconds < 1 || (percent == state->percent && seconds == state->seconds)) return;
  state->percent = percent;
  state->seconds = seconds;
  state->shown = 1;
  REprintf("\rfolkmote: %3d %% after %d s", percent, seconds);
}

static void look(void* user) {
  fm_options* state = user;
  R_CheckUserInterrupt();
  if (state->show) show_progress(state);
}

static int poll(int64_t done, int64_t total, void* user) {
  fm_options* state = user;
  state->done = done;
  state->total = total;
  return R_ToplevelExec(look, state) == FALSE;
}

void fm_options_finalise(SEXP handle) {
  fm_options* state = R_ExternalPtrAddr(handle);
  if (state == NULL) return;
  R_ClearExternalPtr(handle);
  folkmote_options_destroy(state->options);
  R_Free(state);
}

SEXP fm_options_create(void) {
  char message[FOLKMOTE_MESSAGE_BYTES] = "";
  SEXP handle = PROTECT(fm_handle_new(&fm_kind_options));
  fm_options* state = R_Calloc(1, fm_options);
  R_SetExternalPtrAddr(handle, state);
  const int status = folkmote_options_create(&state->options, message);
  SEXP reply = fm_reply(status, message, handle);
  UNPROTECT(1);
  return reply;
}

static fm_options* state_of(SEXP handle) { return fm_handle_get(handle, &fm_kind_options); }

SEXP fm_options_set(SEXP options, SEXP option, SEXP value) {
  char message[FOLKMOTE_MESSAGE_BYTES] = "";
  const int status =
      folkmote_options_set(state_of(options)->options, fm_whole(option, "option"), fm_number(value, "value"), message);
  return fm_reply(status, message, R_NilValue);
}

/* `show` is 1 to write progress to the console. Interrupts are noticed either way. */
SEXP fm_options_progress(SEXP options, SEXP show) {
  char message[FOLKMOTE_MESSAGE_BYTES] = "";
  fm_options* state = state_of(options);
  state->show = fm_whole(show, "show");
  state->started = time(NULL);
  const int status = folkmote_options_progress(state->options, poll, state, message);
  return fm_reply(status, message, R_NilValue);
}

/* Wipe the progress line, if one was written. */
SEXP fm_options_finish(SEXP options) {
  fm_options* state = state_of(options);
  if (state->shown) REprintf("\r%40s\r", "");
  state->shown = 0;
  return R_NilValue;
}

const folkmote_options* fm_options_get(SEXP handle) { return handle == R_NilValue ? NULL : state_of(handle)->options; }
