#include "routines.h"

static const folkmote_equilibrium* solved(SEXP handle) { return fm_handle_get(handle, &fm_kind_equilibrium); }

SEXP fm_sensitivity(SEXP equilibrium, SEXP parameters, SEXP level, SEXP options) {
  if (!Rf_isInteger(parameters)) Rf_error("folkmote glue: 'parameters' must be integer");
  FM_MAKES(table, folkmote_sensitivity(solved(equilibrium), (int64_t)XLENGTH(parameters), INTEGER(parameters),
                                       fm_whole(level, "level"), fm_options_get(options), &made, message))
}

SEXP fm_link_sensitivity(SEXP equilibrium, SEXP options) {
  FM_MAKES(table, folkmote_link_sensitivity(solved(equilibrium), fm_options_get(options), &made, message))
}
