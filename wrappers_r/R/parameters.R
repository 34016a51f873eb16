# beliefs() and share_payoff(): parameters, checked by the kernel as they are stored.

beliefs <- function(prior_mean, prior_precision, signal_precision = NULL, relay_precision = Inf, stake_sd = 0) {
  if (missing(prior_mean)) stop_argument("prior_mean", "one number, or one per community", NULL)
  if (missing(prior_precision)) stop_argument("prior_precision", "one positive number, or one per community", NULL)
  x <- list(
    prior_mean = parameter_values(prior_mean, "prior_mean"),
    prior_precision = parameter_values(prior_precision, "prior_precision"),
    signal_precision = if (!is.null(signal_precision)) parameter_values(signal_precision, "signal_precision"),
    relay_precision = parameter_values(relay_precision, "relay_precision"),
    stake_sd = parameter_values(stake_sd, "stake_sd")
  )
  x <- structure(x, class = "folkmote_beliefs")
  raw_handle_release(build_beliefs(x))
  x
}

share_payoff <- function(benefit = 1, cost = 0, reach = "community") {
  x <- structure(
    list(
      benefit = parameter_values(benefit, "benefit"),
      cost = parameter_values(cost, "cost"),
      reach = reach_mix(reach)
    ),
    class = c("folkmote_share_payoff", "folkmote_payoff")
  )
  raw_handle_release(build_payoff(x))
  x
}

reach_mix <- function(reach) {
  if (is.character(reach) && length(reach) == 1L && reach %in% c("community", "contacts")) {
    return(if (reach == "contacts") 1 else 0)
  }
  if (!is_number(reach) || reach < 0 || reach > 1) {
    stop_argument("reach", "\"community\", \"contacts\" or one number from 0 to 1", reach)
  }
  as.double(reach)
}

# Names are kept: a vector named by community is put in the study's order when it meets one.
parameter_values <- function(values, argument) {
  if (!is.numeric(values) || is.object(values) || length(values) == 0L || !is.null(dim(values))) {
    stop_argument(argument, "one number, or one per community or member", values)
  }
  stats::setNames(as.double(values), names(values))
}

in_study_order <- function(values, argument, study) {
  labels <- names(values)
  known <- label_text(study$summary$community)
  if (is.null(labels) || length(values) != length(known) || length(values) == 1L) return(as.double(values))
  position <- match(known, labels)
  if (anyNA(position)) {
    stop_data(
      "'", argument, "' is named, but not by community: ", named_list(known[is.na(position)]),
      " missing; name every community or take the names off."
    )
  }
  as.double(values[position])
}

# Without a study only the values themselves are checked; their number is checked when solving.
build_beliefs <- function(beliefs, study = NULL) {
  handle <- raw_beliefs_create()
  set_parameters(beliefs, study, function(code, values) raw_beliefs_set(handle, code, values))
  handle
}

build_payoff <- function(payoff, study = NULL) {
  handle <- raw_payoff_create(payoff_code[["share"]])
  set_parameters(payoff, study, function(code, values) raw_payoff_set(handle, code, values))
  handle
}

set_parameters <- function(parameters, study, set) {
  for (name in names(parameters)) {
    values <- parameters[[name]]
    if (is.null(values)) next
    set(parameter_code[[name]], if (is.null(study)) as.double(values) else in_study_order(values, name, study))
  }
}

as.data.frame.folkmote_beliefs <- function(x, row.names = NULL, optional = FALSE, ...) parameter_frame(x)
as.data.frame.folkmote_payoff <- function(x, row.names = NULL, optional = FALSE, ...) parameter_frame(x)

parameter_frame <- function(x) {
  x <- Filter(Negate(is.null), unclass(x))
  data.frame(
    parameter = names(x),
    values = lengths(x, use.names = FALSE),
    lowest = vapply(x, min, 0, USE.NAMES = FALSE),
    highest = vapply(x, max, 0, USE.NAMES = FALSE)
  )
}

print.folkmote_beliefs <- function(x, ...) print_parameters("Beliefs", x)
print.folkmote_payoff <- function(x, ...) print_parameters("Share payoff", x)

print_parameters <- function(title, x) {
  shown <- lapply(Filter(Negate(is.null), unclass(x)), parameter_text)
  if (!is.null(shown$reach)) {
    shown$reach <- switch(shown$reach, "0" = "community", "1" = "contacts", paste(shown$reach, "of contacts"))
  }
  cat(title, "\n", sep = "")
  cat(paste0("  ", format(gsub("_", " ", names(shown))), "  ", unlist(shown)), sep = "\n")
  invisible(x)
}

parameter_text <- function(values) {
  if (length(values) == 1L) return(format(values, digits = 6L))
  paste0(format(min(values), digits = 4L), " to ", format(max(values), digits = 4L), " (", length(values), " values)")
}
