#include "routines.h"

static const folkmote_equilibrium* solved(SEXP handle) { return fm_handle_get(handle, &fm_kind_equilibrium); }

SEXP fm_equilibrium_create(SEXP study, SEXP beliefs, SEXP payoff, SEXP options){
    FM_MAKES(equilibrium,
             folkmote_equilibrium_create(fm_handle_get(study, &fm_kind_study), fm_handle_get(beliefs, &fm_kind_beliefs),
                                         fm_handle_get(payoff, &fm_kind_payoff), fm_options_get(options), &made,
                                         message))}

SEXP fm_equilibrium_table(SEXP equilibrium, SEXP level){
    FM_MAKES(table, folkmote_equilibrium_table(solved(equilibrium), fm_whole(level, "level"), &made, message))}

SEXP fm_equilibrium_digest(SEXP equilibrium) {
  return fm_digest(folkmote_equilibrium_digest(solved(equilibrium)));
}

SEXP fm_turnout(SEXP equilibrium, SEXP given, SEXP at_least, SEXP options) {
  int64_t given_count, at_least_count;
  const double* thetas = fm_reals_or_null(given, "given", &given_count);
  const double* shares = fm_reals_or_null(at_least, "at_least", &at_least_count);
  FM_MAKES(table, folkmote_turnout(solved(equilibrium), given_count, thetas, at_least_count, shares,
                                   fm_options_get(options), &made, message))
}

SEXP fm_simulate(SEXP equilibrium, SEXP first, SEXP draws, SEXP seed, SEXP given, SEXP level, SEXP options) {
  int64_t given_count;
  const double* theta = fm_reals_or_null(given, "given", &given_count);
  if (theta != NULL && given_count != 1) Rf_error("folkmote glue: 'given' must be NULL or one double");
  FM_MAKES(table, folkmote_simulate(solved(equilibrium), (int64_t)fm_number(first, "first"),
                                    (int64_t)fm_number(draws, "draws"), (uint64_t)fm_number(seed, "seed"), theta,
                                    fm_whole(level, "level"), fm_options_get(options), &made, message))
}

SEXP fm_simulate_within(SEXP equilibrium, SEXP first, SEXP draws, SEXP seed, SEXP low, SEXP high, SEXP level,
                        SEXP options) {
  FM_MAKES(table, folkmote_simulate_within(solved(equilibrium), (int64_t)fm_number(first, "first"),
                                           (int64_t)fm_number(draws, "draws"), (uint64_t)fm_number(seed, "seed"),
                                           fm_number(low, "low"), fm_number(high, "high"), fm_whole(level, "level"),
                                           fm_options_get(options), &made, message))
}
