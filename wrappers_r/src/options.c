/* Options of a run, with the callback that shows progress and notices a pending interrupt. The kernel calls it
 * about ten times a second on R's own thread. Nothing may jump out of it, so the check runs inside
 * R_ToplevelExec and only its outcome is passed on. R's own function for progress runs outside of that, since its
 * conditions are for the handlers of whoever called; a jump out of it is caught and cancels the run. */
#include <string.h>

#include "routines.h"

/* Rewritten when the percentage or the second changes, so that a console is not flooded. */
static void show_progress(fm_options* state) {
  const int percent = state->total > 0 ? (int)(100.0 * (double)state->done / (double)state->total) : 0;
  const int seconds = (int)difftime(time(NULL), state->started);
  if (seconds < 1 || (percent == state->percent && seconds == state->seconds)) return;
  state->percent = percent;
  state->seconds = seconds;
  state->shown = 1;
  char bar[] = "....................";
  memset(bar, '=', (size_t)percent / 5);
  REprintf("\rfolkmote [%s] %3d %% after %d s", bar, percent, seconds);
}

static void look(void* user) {
  fm_options* state = user;
  R_CheckUserInterrupt();
  if (state->show) show_progress(state);
}

static SEXP call_tick(void* user) {
  fm_options* state = user;
  SEXP done = PROTECT(Rf_ScalarReal((double)state->done)), total = PROTECT(Rf_ScalarReal((double)state->total));
  SEXP call = PROTECT(Rf_lang3(state->tick, done, total));
  Rf_eval(call, R_GlobalEnv);
  UNPROTECT(3);
  return R_NilValue;
}

static void come_home(void* user, Rboolean jumped) {
  if (jumped) longjmp(((fm_options*)user)->home, 1);
}

/* 1 when the function jumped: its caller is above frames of the kernel, which must return first. */
static int tick(fm_options* state) {
  SEXP token = PROTECT(R_MakeUnwindCont());
  if (setjmp(state->home) != 0) {
    UNPROTECT(1);
    return 1;
  }
  R_UnwindProtect(call_tick, state, come_home, state, token);
  UNPROTECT(1);
  return 0;
}

static int poll(int64_t done, int64_t total, void* user) {
  fm_options* state = user;
  state->done = done;
  state->total = total;
  if (R_ToplevelExec(look, state) == FALSE) return 1;
  return state->tick != R_NilValue && tick(state);
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
  state->tick = R_NilValue;
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

/* `show` is 1 to write progress to the console; `tick` is NULL or a function of done and total. Interrupts are noticed
 * either way. */
SEXP fm_options_progress(SEXP options, SEXP show, SEXP tick) {
  char message[FOLKMOTE_MESSAGE_BYTES] = "";
  fm_options* state = state_of(options);
  state->show = fm_whole(show, "show");
  R_SetExternalPtrProtected(options, tick);
  state->tick = tick;
  state->started = time(NULL);
  const int status = folkmote_options_progress(state->options, poll, state, message);
  return fm_reply(status, message, R_NilValue);
}

/* Wipe the progress line, if one was written. */
SEXP fm_options_finish(SEXP options) {
  fm_options* state = state_of(options);
  if (state->shown) REprintf("\r%60s\r", "");
  state->shown = 0;
  return R_NilValue;
}

const folkmote_options* fm_options_get(SEXP handle) { return handle == R_NilValue ? NULL : state_of(handle)->options; }
