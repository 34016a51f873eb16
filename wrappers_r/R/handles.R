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
run_options <- function(threads = NULL, tolerance = NULL, sweeps = NULL, devices = NULL, tick = NULL) {
  options <- raw_options_create()
  raw_options_set(options, option_code[["threads"]], resolve_threads(threads))
  if (!is.null(tolerance)) raw_options_set(options, option_code[["tolerance"]], tolerance)
  if (!is.null(sweeps)) raw_options_set(options, option_code[["sweeps"]], sweeps)
  for (device in names(devices)) raw_options_set(options, option_code[[device]], devices[[device]])
  raw_options_progress(options, is.null(tick) && interactive() && !isFALSE(getOption("folkmote.progress")), tick)
  options
}

# Progress as conditions for the handlers of the package progressr, where the caller has loaded
# it; else NULL, and the kernel's line in the console. Nothing is signalled by a run that ends at once.
progress_steps <- function() {
  if (isFALSE(getOption("folkmote.progress")) || !wants_progressr()) return(NULL)
  step <- NULL
  at <- 0
  frame <- parent.frame()
  tick <- function(done, total) {
    if (is.null(step)) step <<- progressr::progressor(steps = 1000, envir = frame, on_exit = FALSE)
    now <- if (total > 0) floor(1000 * done / total) else 0
    if (now > at) {
      step(amount = now - at)
      at <<- now
    }
  }
  list(tick = tick, finish = function() if (!is.null(step)) step(type = "finish"))
}

# Who uses progressr has loaded it: nobody else pays for its conditions.
wants_progressr <- function() "progressr" %in% loadedNamespaces()

# Run `work(options)` and leave no progress line and no options behind, however it ends.
with_options <- function(work, ...) {
  steps <- progress_steps()
  options <- run_options(..., tick = steps$tick)
  on.exit({
    raw_options_finish(options)
    raw_handle_release(options)
    if (!is.null(steps)) steps$finish()
  })
  work(options)
}
