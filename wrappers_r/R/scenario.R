# scenario(): a study with edits that remembers its baseline; counterfactual(): what the edits would change.

scenario <- function(study, ...) {
  of_class(study, "study", "folkmote_study", "study() or scenario()")
  edits <- list(...)
  fault <- which(!vapply(edits, inherits, NA, what = "folkmote_edit"))
  if (length(fault) > 0L) {
    wanted <- paste(
      "an edit: add_links(), cut_links(), thin_links(), rewire_links(), broadcast(), gathering(), shift_cost(), ...",
      "or forward_reports()"
    )
    stop_argument(paste0("..", fault[1L]), wanted, edits[[fault[1L]]])
  }
  names(edits) <- NULL
  if (inherits(study, "folkmote_scenario")) {
    edits <- c(study$edits, edits)
    study <- study$study
  }
  classes <- c("folkmote_scenario", "folkmote_study", "folkmote_object")
  x <- structure(
    list(study = study, members = study$members, edits = edits, cache = new_cache(), edited = new_cache()),
    class = classes
  )
  handle <- scenario_handle(x)
  summary <- from_table(raw_study_summary(study_handle(x)), study$members)
  record <- provenance_record(
    "scenario",
    inputs = c("baseline and edits" = raw_scenario_digest(handle)), output = summary, seed = edit_seeds(edits)
  )
  attr(summary, "digest") <- NULL
  class(x) <- NULL
  x$summary <- summary
  x$provenance <- record
  structure(x, class = classes)
}

edit_seeds <- function(edits) unlist(lapply(edits, `[[`, "seed"))

build_scenario <- function(x) {
  handle <- raw_scenario_create(study_handle(x$study))
  for (edit in x$edits) apply_edit(handle, edit, x$study)
  handle
}

# A scenario may be solved like any study; what it sets in the beliefs then replaces what is given.
beliefs_under <- function(beliefs, study) {
  for (edit in study$edits) {
    if (edit$kind == "set_beliefs") beliefs[names(edit$values)] <- edit$values
  }
  beliefs
}

print.folkmote_scenario <- function(x, rows = 12, ...) {
  cat("Scenario of a study of ", count_of(nrow(x$summary), "community", "communities"), ", ",
      count_of(nrow(x$study$members), "member"), "\n", sep = "")
  cat_edits(x$edits)
  show_communities(x$summary, x$summary$members, rows)
  invisible(x)
}

cat_edits <- function(edits) {
  if (length(edits) == 0L) cat("  no edit: the baseline itself\n")
  for (k in seq_along(edits)) cat("  ", k, ". ", edits[[k]]$text, "\n", sep = "")
}

counterfactual <- function(eq, scenario, draws = 1000, seed = NULL, threads = NULL, given = NULL,
                           reduce = c("common", "stakes", "control")) {
  of_class(eq, "eq", "folkmote_equilibrium", "equilibrium()")
  of_class(scenario, "scenario", "folkmote_scenario", "scenario()")
  draws <- one_whole(draws, "draws", 0, 1e9)
  if (draws == 1) stop_argument("draws", "0 for none, or at least 2", draws)
  given <- resolve_given(given)
  devices <- resolve_reduce(reduce)
  seed <- if (draws > 0) resolve_seed(seed)
  equilibrium <- equilibrium_handle(eq, threads)
  edited <- scenario_handle(scenario)
  table <- with_options(
    function(options) {
      raw_counterfactual_within(equilibrium, edited, draws, if (is.null(seed)) 0 else seed, given[1L], given[2L],
                                options)
    },
    threads = threads, devices = devices
  )
  result <- result_of(
    eq, from_table(table, eq$study$members), "counterfactual", seed = seed,
    inputs = c(scenario = raw_scenario_digest(edited)),
    settings = c(draws = draws, given_settings(given), if (draws > 0) devices)
  )
  attr(result, "edits") <- vapply(scenario$edits, `[[`, "", "text")
  attr(result, "draws") <- draws
  result
}

# Devices that lower the error of the simulated difference without moving it; each can be left out.
resolve_reduce <- function(reduce) {
  known <- c("common", "stakes", "control")
  if (!(is.null(reduce) || is.character(reduce)) || !all(reduce %in% known)) {
    stop_argument("reduce", "NULL or some of \"common\", \"stakes\", \"control\"", reduce)
  }
  stats::setNames(as.double(known %in% reduce), known)
}

print.folkmote_counterfactual <- function(x, rows = 12, ...) {
  frame <- plain_frame(x)
  single <- frame[frame$scope == "community", , drop = FALSE]
  cat("Counterfactual: ", paste(attr(x, "edits"), collapse = "; "), "\n", sep = "")
  cat("  baseline: ", verdict_counts(single$baseline_verdict), "\n", sep = "")
  cat("  scenario: ", verdict_counts(single$scenario_verdict), "\n", sep = "")
  frame$community <- ifelse(frame$scope == "pooled", "(pooled)", label_text(frame$community))
  shown <- c(
    "community", "baseline_least", "baseline_greatest", "scenario_least", "scenario_greatest", "difference_low",
    "difference_high", if (attr(x, "draws") > 0) c("spread_low", "spread_high")
  )
  show_communities(frame[shown], frame$members, rows + 1L, weakest(frame))
  if (attr(x, "draws") > 0) {
    cat("spread: 5 % and 95 % points over ", count_of(attr(x, "draws"), "play"), ", seed ",
        plain_number(attr(x, "provenance")$seed), "\n", sep = "")
  }
  say_unfinished_pair(single, attr(x, "verdicts"))
  invisible(x)
}

# The weaker of the two verdicts of a row decides how the row may be shown.
weakest <- function(frame) {
  rank <- pmax(match(frame$baseline_verdict, verdict_levels), match(frame$scenario_verdict, verdict_levels))
  verdict_levels[rank]
}

say_unfinished_pair <- function(single, verdicts) {
  say_unfinished(verdicts)
  open <- sum(single$scenario_verdict == "not converged" & single$baseline_verdict != "not converged")
  if (open > 0L) {
    cat(count_of(open, "community has", "communities have"), " not converged in the scenario and no answer yet. ",
        "Raise 'sweeps' or loosen 'tolerance' in equilibrium().\n", sep = "")
  }
}

summary.folkmote_counterfactual <- function(object, ...) {
  pooled <- plain_frame(object)
  pooled <- pooled[pooled$scope == "pooled", setdiff(names(pooled), c("scope", "community")), drop = FALSE]
  new_result(pooled, "counterfactual_summary", attr(object, "provenance"))
}

# One quantity per line: the pooled row is too wide for a console.
print.folkmote_counterfactual_summary <- function(x, ...) {
  frame <- plain_frame(x)
  text <- vapply(frame, column_text, "")
  if (weakest(frame) == "not converged") text[grepl(answer_columns, names(text))] <- "--"
  cat("Counterfactual, all members pooled\n")
  cat(paste0("  ", format(gsub("_", " ", names(text))), "  ", text), sep = "\n")
  if (weakest(frame) == "not converged") {
    cat("No answer yet: a community has not converged. Raise 'sweeps' or loosen 'tolerance' in equilibrium().\n")
  }
  invisible(x)
}
