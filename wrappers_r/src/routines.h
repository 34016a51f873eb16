/* The routines that R may call; registered in init.c. */
#ifndef FOLKMOTE_ROUTINES_H
#define FOLKMOTE_ROUTINES_H

#include "glue.h"

SEXP fm_version(void);
SEXP fm_stream_version(void);
SEXP fm_live_handles(void);
SEXP fm_header_constants(void);
SEXP fm_message_bytes(void);
SEXP fm_status_name(SEXP status);
SEXP fm_status_text(SEXP status);

SEXP fm_table_create(SEXP rows);
SEXP fm_table_add_text(SEXP table, SEXP name, SEXP values);
SEXP fm_table_add_integer(SEXP table, SEXP name, SEXP values);
SEXP fm_table_add_real(SEXP table, SEXP name, SEXP values);
SEXP fm_table_rows(SEXP table);
SEXP fm_table_columns(SEXP table);
SEXP fm_table_column_name(SEXP table, SEXP column);
SEXP fm_table_column_type(SEXP table, SEXP column);
SEXP fm_table_get_text(SEXP table, SEXP column);
SEXP fm_table_get_integer(SEXP table, SEXP column);
SEXP fm_table_get_real(SEXP table, SEXP column);
SEXP fm_table_digest(SEXP table);

SEXP fm_options_create(void);
SEXP fm_options_set(SEXP options, SEXP option, SEXP value);
SEXP fm_options_progress(SEXP options, SEXP show, SEXP tick);
SEXP fm_options_finish(SEXP options);

SEXP fm_study_create(SEXP members, SEXP links, SEXP broadcasts, SEXP gatherings, SEXP communities, SEXP mutual);
SEXP fm_study_summary(SEXP study);
SEXP fm_study_digest(SEXP study);

SEXP fm_beliefs_create(void);
SEXP fm_beliefs_set(SEXP beliefs, SEXP parameter, SEXP values);
SEXP fm_payoff_create(SEXP kind);
SEXP fm_payoff_set(SEXP payoff, SEXP parameter, SEXP values);
SEXP fm_parameter_bounds(SEXP parameter);

SEXP fm_equilibrium_create(SEXP study, SEXP beliefs, SEXP payoff, SEXP options);
SEXP fm_equilibrium_table(SEXP equilibrium, SEXP level);
SEXP fm_equilibrium_digest(SEXP equilibrium);
SEXP fm_turnout(SEXP equilibrium, SEXP given, SEXP at_least, SEXP options);
SEXP fm_simulate(SEXP equilibrium, SEXP first, SEXP draws, SEXP seed, SEXP given, SEXP level, SEXP options);
SEXP fm_simulate_within(SEXP equilibrium, SEXP first, SEXP draws, SEXP seed, SEXP low, SEXP high, SEXP level,
                        SEXP options);

SEXP fm_sensitivity(SEXP equilibrium, SEXP parameters, SEXP level, SEXP options);
SEXP fm_link_sensitivity(SEXP equilibrium, SEXP options);

SEXP fm_scenario_create(SEXP study);
SEXP fm_scenario_add_links(SEXP scenario, SEXP links, SEXP mutual);
SEXP fm_scenario_cut_links(SEXP scenario, SEXP links, SEXP mutual);
SEXP fm_scenario_thin_links(SEXP scenario, SEXP share, SEXP seed);
SEXP fm_scenario_rewire_links(SEXP scenario, SEXP share, SEXP seed);
SEXP fm_scenario_broadcast(SEXP scenario, SEXP audience, SEXP precision);
SEXP fm_scenario_gathering(SEXP scenario, SEXP audience);
SEXP fm_scenario_shift_cost(SEXP scenario, SEXP audience, SEXP by);
SEXP fm_scenario_shift_benefit(SEXP scenario, SEXP audience, SEXP by);
SEXP fm_scenario_set_beliefs(SEXP scenario, SEXP parameter, SEXP values);
SEXP fm_scenario_forward_reports(SEXP scenario, SEXP hops);
SEXP fm_scenario_study(SEXP scenario);
SEXP fm_scenario_digest(SEXP scenario);
SEXP fm_counterfactual(SEXP equilibrium, SEXP scenario, SEXP draws, SEXP seed, SEXP options);
SEXP fm_counterfactual_within(SEXP equilibrium, SEXP scenario, SEXP draws, SEXP seed, SEXP low, SEXP high,
                              SEXP options);
SEXP fm_counterfactual_plays(SEXP equilibrium, SEXP scenario, SEXP first, SEXP draws, SEXP seed, SEXP low, SEXP high,
                             SEXP options);

SEXP fm_chunk_run(SEXP equilibrium, SEXP scenario, SEXP first, SEXP draws, SEXP seed, SEXP low, SEXP high, SEXP level,
                  SEXP options, SEXP file);
SEXP fm_chunk_merge(SEXP files, SEXP first, SEXP draws);
SEXP fm_chunk_table(SEXP files);

#endif
