# The raw layer: one function per function of folkmote.h, in its order. Each hands its arguments to the routine
# of the same name; those that can fail go through checked().

raw_version <- function() .Call(C_version)
raw_stream_version <- function() .Call(C_stream_version)
raw_message_bytes <- function() .Call(C_message_bytes)
raw_header_constants <- function() .Call(C_header_constants)
raw_live_handles <- function() .Call(C_live_handles)
raw_status_name <- function(status) .Call(C_status_name, status)
raw_status_text <- function(status) .Call(C_status_text, status)

raw_handle_alive <- function(handle) .Call(C_handle_alive, handle)
raw_handle_release <- function(handle) .Call(C_handle_release, handle)

raw_table_create <- function(rows) checked(.Call(C_table_create, as.double(rows)))
raw_table_add_text <- function(table, name, values) checked(.Call(C_table_add_text, table, name, values))
raw_table_add_integer <- function(table, name, values) checked(.Call(C_table_add_integer, table, name, values))
raw_table_add_real <- function(table, name, values) checked(.Call(C_table_add_real, table, name, values))
raw_table_rows <- function(table) .Call(C_table_rows, table)
raw_table_columns <- function(table) .Call(C_table_columns, table)
raw_table_column_name <- function(table, column) .Call(C_table_column_name, table, column)
raw_table_column_type <- function(table, column) .Call(C_table_column_type, table, column)
raw_table_get_text <- function(table, column) checked(.Call(C_table_get_text, table, column))
raw_table_get_integer <- function(table, column) checked(.Call(C_table_get_integer, table, column))
raw_table_get_real <- function(table, column) checked(.Call(C_table_get_real, table, column))
raw_table_digest <- function(table) .Call(C_table_digest, table)

raw_study_create <- function(members, links, broadcasts, gatherings, communities, mutual) {
  checked(.Call(C_study_create, members, links, broadcasts, gatherings, communities, as.integer(mutual)))
}
raw_study_summary <- function(study) checked(.Call(C_study_summary, study))
raw_study_digest <- function(study) .Call(C_study_digest, study)

raw_parameter_bounds <- function(parameter) checked(.Call(C_parameter_bounds, parameter))
raw_beliefs_create <- function() checked(.Call(C_beliefs_create))
raw_beliefs_set <- function(beliefs, parameter, values) checked(.Call(C_beliefs_set, beliefs, parameter, values))
raw_payoff_create <- function(kind) checked(.Call(C_payoff_create, kind))
raw_payoff_set <- function(payoff, parameter, values) checked(.Call(C_payoff_set, payoff, parameter, values))

raw_options_create <- function() checked(.Call(C_options_create))
raw_options_set <- function(options, option, value) checked(.Call(C_options_set, options, option, as.double(value)))
raw_options_progress <- function(options, show, tick) {
  checked(.Call(C_options_progress, options, as.integer(show), tick))
}
raw_options_finish <- function(options) .Call(C_options_finish, options)

raw_equilibrium_create <- function(study, beliefs, payoff, options) {
  checked(.Call(C_equilibrium_create, study, beliefs, payoff, options))
}
raw_equilibrium_table <- function(equilibrium, level) checked(.Call(C_equilibrium_table, equilibrium, level))
raw_equilibrium_digest <- function(equilibrium) .Call(C_equilibrium_digest, equilibrium)
raw_turnout <- function(equilibrium, given, at_least, options) {
  checked(.Call(C_turnout, equilibrium, given, at_least, options))
}
raw_simulate <- function(equilibrium, first, draws, seed, given, level, options) {
  checked(.Call(C_simulate, equilibrium, as.double(first), as.double(draws), as.double(seed), given, level, options))
}
raw_simulate_within <- function(equilibrium, first, draws, seed, low, high, level, options) {
  checked(.Call(C_simulate_within, equilibrium, as.double(first), as.double(draws), as.double(seed), low, high, level,
                options))
}

raw_sensitivity <- function(equilibrium, parameters, level, options) {
  checked(.Call(C_sensitivity, equilibrium, parameters, level, options))
}
raw_link_sensitivity <- function(equilibrium, options) checked(.Call(C_link_sensitivity, equilibrium, options))

raw_scenario_create <- function(study) checked(.Call(C_scenario_create, study))
raw_scenario_add_links <- function(scenario, links, mutual) {
  checked(.Call(C_scenario_add_links, scenario, links, as.integer(mutual)))
}
raw_scenario_cut_links <- function(scenario, links, mutual) {
  checked(.Call(C_scenario_cut_links, scenario, links, as.integer(mutual)))
}
raw_scenario_thin_links <- function(scenario, share, seed) {
  checked(.Call(C_scenario_thin_links, scenario, as.double(share), as.double(seed)))
}
raw_scenario_broadcast <- function(scenario, audience, precision) {
  checked(.Call(C_scenario_broadcast, scenario, audience, as.double(precision)))
}
raw_scenario_gathering <- function(scenario, audience) checked(.Call(C_scenario_gathering, scenario, audience))
raw_scenario_rewire_links <- function(scenario, share, seed) {
  checked(.Call(C_scenario_rewire_links, scenario, as.double(share), as.double(seed)))
}

raw_scenario_shift_benefit <- function(scenario, audience, by) {
  checked(.Call(C_scenario_shift_benefit, scenario, audience, as.double(by)))
}

raw_scenario_shift_cost <- function(scenario, audience, by) {
  checked(.Call(C_scenario_shift_cost, scenario, audience, as.double(by)))
}
raw_scenario_set_beliefs <- function(scenario, parameter, values) {
  checked(.Call(C_scenario_set_beliefs, scenario, parameter, values))
}
raw_scenario_forward_reports <- function(scenario, hops) {
  checked(.Call(C_scenario_forward_reports, scenario, as.integer(hops)))
}
raw_scenario_study <- function(scenario) checked(.Call(C_scenario_study, scenario))
raw_scenario_digest <- function(scenario) .Call(C_scenario_digest, scenario)
raw_counterfactual <- function(equilibrium, scenario, draws, seed, options) {
  checked(.Call(C_counterfactual, equilibrium, scenario, as.double(draws), as.double(seed), options))
}
raw_counterfactual_within <- function(equilibrium, scenario, draws, seed, low, high, options) {
  checked(.Call(C_counterfactual_within, equilibrium, scenario, as.double(draws), as.double(seed), low, high, options))
}
raw_counterfactual_plays <- function(equilibrium, scenario, first, draws, seed, low, high, options) {
  checked(.Call(C_counterfactual_plays, equilibrium, scenario, as.double(first), as.double(draws), as.double(seed), low,
                high, options))
}

raw_chunk_run <- function(equilibrium, scenario, first, draws, seed, low, high, level, options, file) {
  checked(.Call(C_chunk_run, equilibrium, scenario, as.double(first), as.double(draws), as.double(seed), low, high,
                level, options, file))
}
raw_chunk_merge <- function(files, first, draws) {
  checked(.Call(C_chunk_merge, files, as.double(first), as.double(draws)))
}
raw_chunk_table <- function(files) checked(.Call(C_chunk_table, files))

# Numbers of the header's enumerations that R code refers to.
type_code <- c(text = 1L, integer = 2L, real = 3L)
parameter_code <- c(
  prior_mean = 1L, prior_precision = 2L, signal_precision = 3L, relay_precision = 4L, stake_sd = 5L,
  benefit = 16L, cost = 17L, reach = 18L
)
payoff_code <- c(share = 1L)
option_code <- c(tolerance = 32L, sweeps = 33L, threads = 34L, common = 40L, stakes = 41L, control = 42L)
level_code <- c(community = 1L, member = 2L)
status_code <- c(ok = 0L, cancelled = 4L)
