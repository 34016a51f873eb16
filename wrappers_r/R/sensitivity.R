# sensitivity(): derivatives of an equilibrium in its parameters and in candidate links.

derivative_code <- c(
  parameter_code[c(
    "prior_mean", "prior_precision", "signal_precision", "relay_precision", "stake_sd", "benefit", "cost"
  )],
  broadcast_precision = 24L
)

sensitivity <- function(eq, with_respect_to = NULL, level = "community", threads = NULL) {
  of_class(eq, "eq", "folkmote_equilibrium", "equilibrium()")
  level <- one_choice(level, "level", names(level_code))
  links <- identical(with_respect_to, "links")
  if (links && level == "member") {
    stop_argument("level", "left out with with_respect_to = \"links\": its rows are pairs of members", level)
  }
  parameters <- if (links) NULL else derivative_numbers(with_respect_to)
  handle <- equilibrium_handle(eq, threads)
  table <- with_options(threads = threads, function(options) {
    if (links) raw_link_sensitivity(handle, options) else raw_sensitivity(handle, parameters, level_code[[level]], options)
  })
  result <- result_of(eq, from_table(table, eq$study$members), "sensitivity")
  attr(result, "level") <- if (links) "links" else level
  result
}

derivative_numbers <- function(names) {
  if (is.null(names)) return(unname(derivative_code))
  known <- is.character(names) && length(names) > 0L && !anyDuplicated(names) && all(names %in% names(derivative_code))
  if (!known) {
    wanted <- paste0("\"", names(derivative_code), "\"", collapse = ", ")
    stop_argument("with_respect_to", paste0("NULL (all), different names out of ", wanted, ", or \"links\" alone"), names)
  }
  unname(derivative_code[names])
}

print.folkmote_sensitivity <- function(x, rows = 12, ...) {
  verdicts <- attr(x, "verdicts")
  what <- if (identical(attr(x, "level"), "member")) "Derivatives, per unit of each parameter, of" else
    "Derivatives of expected turnout, per unit of each parameter, of"
  if (identical(attr(x, "level"), "links")) what <- "Derivatives of expected turnout in candidate links of"
  cat(what, " ", verdict_counts(verdicts$verdict), "\n", sep = "")
  at <- match_community(x, verdicts)
  show_communities(plain_frame(x), verdicts$members[at], rows, verdicts$verdict[at])
  if (!identical(attr(x, "level"), "community")) {
    cat("rows describe people: keep them private; they are no list of whom to press\n")
  }
  say_unfinished(verdicts)
  invisible(x)
}

summary.folkmote_sensitivity <- function(object, ...) object
