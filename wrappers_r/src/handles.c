/* External pointers to the kernel's objects. The pointer exists, with its finaliser, before the native object
 * does, so that nothing can leak in between; its tag says which kind of object it may hold. */
#include "glue.h"

#define FM_FINALISER(kind)                               \
  static void finalise_##kind(SEXP handle) {             \
    folkmote_##kind* object = R_ExternalPtrAddr(handle); \
    R_ClearExternalPtr(handle);                          \
    folkmote_##kind##_destroy(object);                   \
  }                                                      \
  const fm_kind fm_kind_##kind = {"folkmote_" #kind, finalise_##kind};

FM_FINALISER(table)
FM_FINALISER(study)
FM_FINALISER(beliefs)
FM_FINALISER(payoff)
FM_FINALISER(equilibrium)
FM_FINALISER(scenario)
const fm_kind fm_kind_options = {"folkmote_options", fm_options_finalise};

SEXP fm_handle_new(const fm_kind* kind) {
  SEXP handle = PROTECT(R_MakeExternalPtr(NULL, Rf_install(kind->name), R_NilValue));
  R_RegisterCFinalizerEx(handle, kind->finalise, TRUE);
  UNPROTECT(1);
  return handle;
}

void* fm_handle_get(SEXP handle, const fm_kind* kind) {
  if (TYPEOF(handle) != EXTPTRSXP || R_ExternalPtrTag(handle) != Rf_install(kind->name)) {
    Rf_error("folkmote glue: a handle of kind %s was expected", kind->name);
  }
  void* object = R_ExternalPtrAddr(handle);
  if (object == NULL) Rf_error("folkmote glue: this handle of kind %s is no longer alive", kind->name);
  return object;
}

void* fm_handle_or_null(SEXP handle, const fm_kind* kind) {
  return handle == R_NilValue ? NULL : fm_handle_get(handle, kind);
}

SEXP fm_handle_alive(SEXP handle) {
  return Rf_ScalarLogical(TYPEOF(handle) == EXTPTRSXP && R_ExternalPtrAddr(handle) != NULL);
}

/* Free the object now instead of at the next collection. */
SEXP fm_handle_release(SEXP handle) {
  static const fm_kind* const kinds[] = {&fm_kind_table,   &fm_kind_study,       &fm_kind_beliefs, &fm_kind_payoff,
                                         &fm_kind_options, &fm_kind_equilibrium, &fm_kind_scenario};
  for (size_t k = 0; k < sizeof kinds / sizeof kinds[0]; ++k) {
    if (TYPEOF(handle) == EXTPTRSXP && R_ExternalPtrTag(handle) == Rf_install(kinds[k]->name)) {
      kinds[k]->finalise(handle);
    }
  }
  return R_NilValue;
}
