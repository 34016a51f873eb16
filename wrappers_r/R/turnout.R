# turnout() and simulate(): what an equilibrium says about how many act.

turnout <- function(eq, given = NULL, at_least = NULL, threads = NULL) {
  of_class(eq, "eq", "folkmote_equilibrium", "equilibrium()")
  if (!is.null(given)) given <- some_numbers(given, "given", "NULL or finite numbers (values of the obstacle)")
  if (!is.null(at_least)) {
    at_least <- some_numbers(at_least, "at_least", "NULL or numbers from 0 to 1 (shares of turnout)", 0, 1)
  }
  handle <- equilibrium_handle(eq, threads)
  table <- with_options(function(options) raw_turnout(handle, given, at_least, options), threads = threads)
  result_of(eq, from_table(table, eq$study$members), "turnout")
}

simulate.folkmote_equilibrium <- function(object, nsim = 1, seed = NULL, given = NULL, level = "community",
                                          threads = NULL, ...) {
  no_more_arguments(...)
  nsim <- one_whole(nsim, "nsim", 1, 1e9)
  given <- resolve_given(given)
  level <- one_choice(level, "level", names(level_code))
  seed <- resolve_seed(seed)
  handle <- equilibrium_handle(object, threads)
  table <- with_options(
    function(options) raw_simulate_within(handle, 0, nsim, seed, given[1L], given[2L], level_code[[level]], options),
    threads = threads
  )
  result <- result_of(object, from_table(table, object$study$members), "simulation", seed = seed,
    settings = c(plays = nsim, given_settings(given)))
  attr(result, "level") <- level
  attr(result, "seed") <- seed
  result
}

# What is known of the obstacle, as a range: nothing, its value, or c(low, high) with ends that may be infinite.
resolve_given <- function(given) {
  if (is.null(given)) return(c(-Inf, Inf))
  ok <- is.numeric(given) && !is.object(given) && length(given) %in% 1:2 && !anyNA(given)
  if (ok) given <- rep_len(as.double(given), 2L)
  if (!ok || given[1L] > given[2L] || (given[1L] == given[2L] && !is.finite(given[1L]))) {
    stop_argument("given", "NULL, one finite number (the obstacle), or a range c(low, high) of it", given)
  }
  given
}

given_settings <- function(given) {
  if (all(is.infinite(given))) return(NULL)
  if (given[1L] == given[2L]) c(given = given[1L]) else c("given from" = given[1L], "given to" = given[2L])
}

# A table that came from an equilibrium, with its verdicts and its record.
result_of <- function(eq, frame, kind, seed = NULL, inputs = NULL, settings = NULL) {
  record <- provenance_record(
    kind, inputs = c(study = raw_study_digest(study_handle(eq$study)),
      equilibrium = raw_equilibrium_digest(equilibrium_handle(eq)), inputs), output = frame, seed = seed,
    settings = c(tolerance = eq$tolerance, sweeps = eq$sweeps, settings)
  )
  new_result(frame, kind, record, verdicts = verdicts_of(eq))
}

print.folkmote_turnout <- function(x, rows = 12, ...) {
  verdicts <- attr(x, "verdicts")
  cat("Expected turnout of ", verdict_counts(verdicts$verdict), "\n", sep = "")
  at <- match_community(x, verdicts)
  show_communities(plain_frame(x), verdicts$members[at], rows, verdicts$verdict[at])
  say_unfinished(verdicts)
  invisible(x)
}

# Few plays print as they are, many as their order statistics.
print.folkmote_simulation <- function(x, rows = 12, ...) {
  verdicts <- attr(x, "verdicts")
  cat("Simulated plays (seed ", plain_number(attr(x, "provenance")$seed), ") of ", verdict_counts(verdicts$verdict),
      "\n", sep = "")
  summed <- nrow(x) > rows && identical(attr(x, "level"), "community")
  if (summed) cat("Order statistics of the plays; as.data.frame() gives every play\n")
  shown <- if (summed) summary(x) else x
  at <- match_community(shown, verdicts)
  show_communities(plain_frame(shown), verdicts$members[at], rows, verdicts$verdict[at])
  say_unfinished(verdicts)
  invisible(x)
}

# Order statistics only: every number is one of the plays.
summary.folkmote_simulation <- function(object, ...) {
  if (identical(attr(object, "level"), "member")) {
    stop_argument("object", "plays by community; a summary of single members is not offered", "level = \"member\"")
  }
  frame <- plain_frame(object)
  verdicts <- attr(object, "verdicts")
  groups <- split(seq_len(nrow(frame)), match_community(object, verdicts))
  at <- function(column, share) {
    vapply(groups, function(rows) stats::quantile(frame[[column]][rows], share, type = 1L, names = FALSE), 0)
  }
  table <- data.frame(
    community = verdicts$community, plays = lengths(groups, use.names = FALSE),
    spread_low = at("turnout_least", 0.05), spread_high = at("turnout_greatest", 0.95),
    median_least = at("turnout_least", 0.5), median_greatest = at("turnout_greatest", 0.5), row.names = NULL
  )
  new_result(table, "simulation_summary", attr(object, "provenance"), verdicts = verdicts)
}

summary.folkmote_turnout <- function(object, ...) object
