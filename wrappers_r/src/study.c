#include "routines.h"

static const folkmote_table* table_or_null(SEXP handle) { return fm_handle_or_null(handle, &fm_kind_table); }

SEXP fm_study_create(SEXP members, SEXP links, SEXP broadcasts, SEXP gatherings, SEXP communities, SEXP mutual){
    FM_MAKES(study, folkmote_study_create(table_or_null(members), table_or_null(links), table_or_null(broadcasts),
                                          table_or_null(gatherings), table_or_null(communities),
                                          fm_whole(mutual, "mutual"), &made, message))}

SEXP fm_study_digest(SEXP study) {
  return fm_digest(folkmote_study_digest(fm_handle_get(study, &fm_kind_study)));
}

SEXP fm_study_summary(SEXP study) {
  FM_MAKES(table, folkmote_study_summary(fm_handle_get(study, &fm_kind_study), &made, message))
}
