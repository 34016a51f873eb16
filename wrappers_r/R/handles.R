# Objects are plain lists; the kernel's object behind one is a cache that is filled when it is needed and filled
# again when it is dead, as it is after readRDS() or in another process.

new_cache <- function() new.env(parent = emptyenv(), size = 1L)

live_handle <- function(x, build, cache = x$cache) {
  handle <- cache$handle
  if (is.null(handle) || !raw_handle_alive(handle)) {
    handle <- build(x)
    assign("handle", handle, envir = cache)
  }
  handle
}

# The study itself; of a scenario, the edited one.
study_handle <- function(study) {
  if (!inherits(study, "folkmote_scenario")) return(live_handle(study, build_study))
  live_handle(study, function(x) raw_scenario_study(scenario_handle(x)), study$edited)
}
equilibrium_handle <- function(eq, threads = NULL) live_handle(eq, function(x) build_equilibrium(x, threads))
scenario_handle <- function(scenario) live_handle(scenario, build_scenario)

# Options of one run: caps, threads, progress and interrupts. The caller ends it with raw_options_finish().
run_options <- function(threads = NULL, tolerance = NULL, sweeps = NULL, devices = NULL) {
  options <- raw_options_create()
  raw_options_set(options, option_code[["threads"]], resolve_threads(threads))
  if (!is.null(tolerance)) raw_options_set(options, option_code[["tolerance"]], tolerance)
  if (!is.null(sweeps)) raw_options_set(options, option_code[["sweeps"]], sweeps)
  for (device in names(devices)) raw_options_set(options, option_code[[device]], devices[[device]])
  raw_options_progress(options, interactive() && !isFALSE(getOption("folkmote.progress")))
  options
}

# Run `work(options)` and leave no progress line and no options behind, however it ends.
with_options <- function(work, ...) {
  options <- run_options(...)
  on.exit({
    raw_options_finish(options)
    raw_handle_release(options)
  })
  work(options)
}
