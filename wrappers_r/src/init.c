#include <R_ext/Rdynload.h>
#include <R_ext/Visibility.h>

#include "routines.h"

#define ROUTINE(name, arguments) \
  { #name, (DL_FUNC)&fm_##name, arguments }

static const R_CallMethodDef routines[] = {ROUTINE(handle_alive, 1),
                                           ROUTINE(handle_release, 1),
                                           ROUTINE(version, 0),
                                           ROUTINE(stream_version, 0),
                                           ROUTINE(live_handles, 0),
                                           ROUTINE(header_constants, 0),
                                           ROUTINE(message_bytes, 0),
                                           ROUTINE(status_name, 1),
                                           ROUTINE(status_text, 1),
                                           ROUTINE(table_create, 1),
                                           ROUTINE(table_add_text, 3),
                                           ROUTINE(table_add_integer, 3),
                                           ROUTINE(table_add_real, 3),
                                           ROUTINE(table_rows, 1),
                                           ROUTINE(table_columns, 1),
                                           ROUTINE(table_column_name, 2),
                                           ROUTINE(table_column_type, 2),
                                           ROUTINE(table_get_text, 2),
                                           ROUTINE(table_get_integer, 2),
                                           ROUTINE(table_get_real, 2),
                                           ROUTINE(table_digest, 1),
                                           ROUTINE(options_create, 0),
                                           ROUTINE(options_set, 3),
                                           ROUTINE(options_progress, 3),
                                           ROUTINE(options_finish, 1),
                                           ROUTINE(study_create, 6),
                                           ROUTINE(study_summary, 1),
                                           ROUTINE(study_digest, 1),
                                           ROUTINE(beliefs_create, 0),
                                           ROUTINE(beliefs_set, 3),
                                           ROUTINE(payoff_create, 1),
                                           ROUTINE(payoff_set, 3),
                                           ROUTINE(parameter_bounds, 1),
                                           ROUTINE(equilibrium_create, 4),
                                           ROUTINE(equilibrium_table, 2),
                                           ROUTINE(equilibrium_digest, 1),
                                           ROUTINE(turnout, 4),
                                           ROUTINE(simulate, 7),
                                           ROUTINE(simulate_within, 8),
                                           ROUTINE(sensitivity, 4),
                                           ROUTINE(link_sensitivity, 2),
                                           ROUTINE(scenario_create, 1),
                                           ROUTINE(scenario_add_links, 3),
                                           ROUTINE(scenario_cut_links, 3),
                                           ROUTINE(scenario_thin_links, 3),
                                           ROUTINE(scenario_rewire_links, 3),
                                           ROUTINE(scenario_broadcast, 3),
                                           ROUTINE(scenario_gathering, 2),
                                           ROUTINE(scenario_shift_cost, 3),
                                           ROUTINE(scenario_shift_benefit, 3),
                                           ROUTINE(scenario_set_beliefs, 3),
                                           ROUTINE(scenario_forward_reports, 2),
                                           ROUTINE(scenario_study, 1),
                                           ROUTINE(scenario_digest, 1),
                                           ROUTINE(counterfactual, 5),
                                           ROUTINE(counterfactual_within, 7),
                                           ROUTINE(counterfactual_plays, 8),
                                           ROUTINE(chunk_run, 10),
                                           ROUTINE(chunk_merge, 3),
                                           ROUTINE(chunk_table, 1),
                                           {NULL, NULL, 0}};

void attribute_visible R_init_folkmote(DllInfo* library);

void attribute_visible R_init_folkmote(DllInfo* library) {
  R_registerRoutines(library, NULL, routines, NULL, NULL);
  R_useDynamicSymbols(library, FALSE);
  R_forceSymbols(library, TRUE);
}
