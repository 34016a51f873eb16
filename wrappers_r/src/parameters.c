#include "routines.h"

SEXP fm_beliefs_create(void){FM_MAKES(beliefs, folkmote_beliefs_create(&made, message))}

SEXP fm_beliefs_set(SEXP beliefs, SEXP parameter, SEXP values) {
  int64_t count;
  const double* numbers = fm_reals_or_null(values, "values", &count);
  FM_DOES(folkmote_beliefs_set(fm_handle_get(beliefs, &fm_kind_beliefs), fm_whole(parameter, "parameter"), count,
                               numbers, message))
}

SEXP fm_payoff_create(SEXP kind){FM_MAKES(payoff, folkmote_payoff_create(fm_whole(kind, "kind"), &made, message))}

SEXP fm_payoff_set(SEXP payoff, SEXP parameter, SEXP values) {
  int64_t count;
  const double* numbers = fm_reals_or_null(values, "values", &count);
  FM_DOES(folkmote_payoff_set(fm_handle_get(payoff, &fm_kind_payoff), fm_whole(parameter, "parameter"), count, numbers,
                              message))
}

/* Value: c(low, high, low_open, high_open). */
SEXP fm_parameter_bounds(SEXP parameter) {
  char message[FOLKMOTE_MESSAGE_BYTES] = "";
  double low = 0.0, high = 0.0;
  int low_open = 0, high_open = 0;
  const int status =
      folkmote_parameter_bounds(fm_whole(parameter, "parameter"), &low, &high, &low_open, &high_open, message);
  SEXP bounds = PROTECT(Rf_allocVector(REALSXP, 4));
  REAL(bounds)[0] = low;
  REAL(bounds)[1] = high;
  REAL(bounds)[2] = low_open;
  REAL(bounds)[3] = high_open;
  SEXP reply = fm_reply(status, message, bounds);
  UNPROTECT(1);
  return reply;
}
