# equilibrium(): the least and the greatest cutoff equilibrium of every community, and the verdict.

equilibrium <- function(study, beliefs, payoff = share_payoff(), tolerance = 1e-10, threads = NULL, sweeps = 1e5) {
  of_class(study, "study", "folkmote_study", "study() or scenario()")
  of_class(beliefs, "beliefs", "folkmote_beliefs", "beliefs()")
  of_class(payoff, "payoff", "folkmote_payoff", "share_payoff()")
  x <- structure(
    list(
      study = study, beliefs = beliefs_under(beliefs, study), payoff = payoff,
      tolerance = one_number(tolerance, "tolerance", "one number from 1e-13 to 1", 1e-13, 1),
      sweeps = one_whole(sweeps, "sweeps", 1, 1e9),
      cache = new_cache()
    ),
    class = c("folkmote_equilibrium", "folkmote_object")
  )
  handle <- equilibrium_handle(x, threads)
  table <- from_table(raw_equilibrium_table(handle, level_code[["community"]]), study$members)
  record <- provenance_record(
    "equilibrium", inputs = c(study = raw_study_digest(study_handle(study)), all = raw_equilibrium_digest(handle)),
    output = table,
    settings = c(tolerance = x$tolerance, sweeps = x$sweeps)
  )
  attr(table, "digest") <- NULL
  class(x) <- NULL
  x$communities <- table
  x$provenance <- record
  structure(x, class = c("folkmote_equilibrium", "folkmote_object"))
}

build_equilibrium <- function(x, threads = NULL) {
  beliefs <- build_beliefs(x$beliefs, x$study)
  payoff <- build_payoff(x$payoff, x$study)
  on.exit({
    raw_handle_release(beliefs)
    raw_handle_release(payoff)
  })
  with_options(
    function(options) raw_equilibrium_create(study_handle(x$study), beliefs, payoff, options),
    threads = threads, tolerance = x$tolerance, sweeps = x$sweeps
  )
}

as.data.frame.folkmote_equilibrium <- function(x, row.names = NULL, optional = FALSE, ..., level = "community") {
  level <- one_choice(level, "level", names(level_code))
  if (level == "community") return(x$communities)
  frame <- from_table(raw_equilibrium_table(equilibrium_handle(x), level_code[["member"]]), x$study$members)
  attr(frame, "digest") <- NULL
  frame
}

summary.folkmote_equilibrium <- function(object, ...) {
  new_result(object$communities, "equilibrium_summary", object$provenance, verdicts = verdicts_of(object))
}

print.folkmote_equilibrium <- function(x, rows = 12, ...) {
  verdicts <- verdicts_of(x)
  cat("Equilibrium of ", verdict_counts(verdicts$verdict), "\n", sep = "")
  shown <- x$communities[c("community", "verdict", "turnout_least", "turnout_greatest", "contraction_bound")]
  show_communities(shown, verdicts$members, rows, verdicts$verdict)
  say_several(verdicts)
  say_unfinished(verdicts)
  invisible(x)
}

# What later results carry along, so that none of them prints as an answer where there is none.
verdicts_of <- function(eq) {
  table <- eq$communities
  data.frame(
    community = table$community, verdict = table$verdict, width = table$width, members = eq$study$summary$members,
    sweeps = eq$sweeps, tolerance = eq$tolerance
  )
}
