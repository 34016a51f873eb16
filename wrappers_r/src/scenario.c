#include "routines.h"

static folkmote_scenario* edited(SEXP handle) { return fm_handle_get(handle, &fm_kind_scenario); }
static const folkmote_table* table_or_null(SEXP handle) { return fm_handle_or_null(handle, &fm_kind_table); }

SEXP fm_scenario_create(SEXP study){
    FM_MAKES(scenario, folkmote_scenario_create(fm_handle_get(study, &fm_kind_study), &made, message))}

SEXP fm_scenario_add_links(SEXP scenario, SEXP links, SEXP mutual){
    FM_DOES(folkmote_scenario_add_links(edited(scenario), table_or_null(links), fm_whole(mutual, "mutual"), message))}

SEXP fm_scenario_cut_links(SEXP scenario, SEXP links, SEXP mutual){
    FM_DOES(folkmote_scenario_cut_links(edited(scenario), table_or_null(links), fm_whole(mutual, "mutual"), message))}

SEXP fm_scenario_thin_links(SEXP scenario, SEXP share, SEXP seed){
    FM_DOES(folkmote_scenario_thin_links(edited(scenario), fm_number(share, "share"), (uint64_t)fm_number(seed, "seed"),
                                         message))}

SEXP fm_scenario_rewire_links(SEXP scenario, SEXP share, SEXP seed){
    FM_DOES(folkmote_scenario_rewire_links(edited(scenario), fm_number(share, "share"),
                                           (uint64_t)fm_number(seed, "seed"), message))}

SEXP fm_scenario_broadcast(SEXP scenario, SEXP audience, SEXP precision){
    FM_DOES(folkmote_scenario_broadcast(edited(scenario), table_or_null(audience), fm_number(precision, "precision"),
                                        message))}

SEXP fm_scenario_gathering(SEXP scenario, SEXP audience){
    FM_DOES(folkmote_scenario_gathering(edited(scenario), table_or_null(audience), message))}

SEXP fm_scenario_shift_cost(SEXP scenario, SEXP audience, SEXP by){
    FM_DOES(folkmote_scenario_shift_cost(edited(scenario), table_or_null(audience), fm_number(by, "by"), message))}

SEXP fm_scenario_shift_benefit(SEXP scenario, SEXP audience, SEXP by){
    FM_DOES(folkmote_scenario_shift_benefit(edited(scenario), table_or_null(audience), fm_number(by, "by"), message))}

SEXP fm_scenario_set_beliefs(SEXP scenario, SEXP parameter, SEXP values) {
  int64_t count;
  const double* numbers = fm_reals_or_null(values, "values", &count);
  FM_DOES(folkmote_scenario_set_beliefs(edited(scenario), fm_whole(parameter, "parameter"), count, numbers, message))
}

SEXP fm_scenario_forward_reports(SEXP scenario, SEXP hops){
    FM_DOES(folkmote_scenario_forward_reports(edited(scenario), fm_whole(hops, "hops"), message))}

SEXP fm_scenario_study(SEXP scenario){FM_MAKES(study, folkmote_scenario_study(edited(scenario), &made, message))}

SEXP fm_scenario_digest(SEXP scenario) {
  return fm_digest(folkmote_scenario_digest(edited(scenario)));
}

SEXP fm_counterfactual(SEXP equilibrium, SEXP scenario, SEXP draws, SEXP seed, SEXP options){
    FM_MAKES(table, folkmote_counterfactual(fm_handle_get(equilibrium, &fm_kind_equilibrium), edited(scenario),
                                            (int64_t)fm_number(draws, "draws"), (uint64_t)fm_number(seed, "seed"),
                                            fm_options_get(options), &made, message))}

SEXP fm_counterfactual_within(SEXP equilibrium, SEXP scenario, SEXP draws, SEXP seed, SEXP low, SEXP high,
                              SEXP options){
    FM_MAKES(table, folkmote_counterfactual_within(fm_handle_get(equilibrium, &fm_kind_equilibrium), edited(scenario),
                                                   (int64_t)fm_number(draws, "draws"),
                                                   (uint64_t)fm_number(seed, "seed"), fm_number(low, "low"),
                                                   fm_number(high, "high"), fm_options_get(options), &made, message))}

SEXP fm_counterfactual_plays(SEXP equilibrium, SEXP scenario, SEXP first, SEXP draws, SEXP seed, SEXP low, SEXP high,
                             SEXP options) {
  FM_MAKES(table, folkmote_counterfactual_plays(fm_handle_get(equilibrium, &fm_kind_equilibrium), edited(scenario),
                                                (int64_t)fm_number(first, "first"), (int64_t)fm_number(draws, "draws"),
                                                (uint64_t)fm_number(seed, "seed"), fm_number(low, "low"),
                                                fm_number(high, "high"), fm_options_get(options), &made, message))
}
