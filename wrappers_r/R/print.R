# How results read in the console.

verdict_levels <- c("proved unique", "bracketed", "several", "not converged")

# "48 communities: 45 proved unique, 2 bracketed, 1 several"
verdict_counts <- function(verdicts) {
  counts <- table(factor(verdicts, levels = verdict_levels))
  counts <- counts[counts > 0L]
  paste0(
    count_of(length(verdicts), "community", "communities"), ": ",
    paste(format(as.vector(counts), big.mark = ",", trim = TRUE), names(counts), collapse = ", ")
  )
}

count_of <- function(n, one, many = paste0(one, "s")) {
  paste(format(n, big.mark = ",", trim = TRUE, scientific = FALSE), if (n == 1) one else many)
}

# Columns that are answers, and therefore blank where the run has not converged.
answer_columns <- paste0(
  "^(turnout_|sd_|chance_|action_|baseline_(least|greatest)|scenario_(least|greatest)|difference_|simulated_|",
  "standard_error_|spread_|median_)"
)
small_cell <- 10L

show_communities <- function(frame, sizes, rows, verdicts = NULL) {
  total <- nrow(frame)
  shown <- seq_len(min(total, rows))
  small <- !is.null(sizes) & !is.na(sizes[shown]) & sizes[shown] < small_cell
  text <- lapply(frame[shown, , drop = FALSE], column_text)
  for (id in intersect(c("community", "member"), names(text))) text[[id]] <- short_label(frame[[id]][shown])
  if (!is.null(verdicts)) text <- blank_unfinished(text, verdicts[shown] %in% "not converged")
  text <- join_ends(text)
  if (any(small)) text[[" "]] <- ifelse(small, "*", "")
  text <- as.data.frame(text, check.names = FALSE, stringsAsFactors = FALSE, optional = TRUE)
  names(text) <- short_heading(names(text))
  print(text, row.names = FALSE, right = TRUE)
  if (total > length(shown)) {
    cat("... and ", count_of(total - length(shown), "more row"), "; as.data.frame() gives all\n", sep = "")
  }
  if (any(small)) cat("* fewer than ", small_cell, " members: do not publish this row\n", sep = "")
}

blank_unfinished <- function(text, unfinished) {
  for (name in grep(answer_columns, names(text), value = TRUE)) text[[name]][unfinished] <- "--"
  text
}

# Two columns that are the ends of one interval become one: "0.550", or "0.412 to 0.873" where the ends differ.
join_ends <- function(text) {
  for (ends in list(c("_least", "_greatest"), c("_low", "_high"))) {
    for (low in grep(paste0(ends[1L], "$"), names(text), value = TRUE)) {
      stem <- sub(paste0(ends[1L], "$"), "", low)
      high <- paste0(stem, ends[2L])
      if (!high %in% names(text)) next
      text[[low]] <- ifelse(text[[low]] == text[[high]], text[[low]], paste(text[[low]], "to", text[[high]]))
      text[[high]] <- NULL
      names(text)[names(text) == low] <- stem
    }
  }
  text
}

short_heading <- function(names) {
  known <- c(
    hears_mean = "hears", hears_most = "at most", turnout_observed = "turnout", turnout_missing = "missing",
contraction_bound = "bound", chance_method = "method"
  )
  names <- ifelse(names %in% names(known), known[names], names)
  gsub("_", " ", names)
}

column_text <- function(values) {
  if (!is.double(values)) return(blank_missing(as.character(values), values))
  whole <- !is.na(values) & is.finite(values) & values == floor(values)
  if (all(whole | is.na(values)) && any(abs(values[whole]) > 1)) return(blank_missing(sprintf("%.0f", values),
    values))
  size <- max_size(values)
  form <- if (size >= 100) "%.1f" else if (size == 0 || size >= 0.001) "%.3f" else "%.1e"
  blank_missing(sprintf(form, values), values)
}

max_size <- function(values) {
  values <- abs(values[is.finite(values)])
  if (length(values) == 0L) 0 else max(values)
}

blank_missing <- function(text, values) {
  text[is.na(values)] <- ""
  text
}

# Communities with several equilibria are named, wherever they stand in the table.
say_several <- function(verdicts) {
  several <- which(verdicts$verdict == "several")
  if (length(several) == 0L) return(invisible())
  text <- paste(short_label(utils::head(verdicts$community[several], 6L)), collapse = ", ")
  cat("several equilibria: ", text, if (length(several) > 6L) ", ...", "\n", sep = "")
}

say_unfinished <- function(verdicts) {
  open <- which(verdicts$verdict == "not converged")
  if (length(open) == 0L) return(invisible())
  widths <- verdicts$width[open]
  cat(
    count_of(length(open), "community has", "communities have"), " not converged and ",
    if (length(open) == 1L) "has" else "have", " no answer yet: after ", plain_number(verdicts$sweeps[1L]),
    " sweeps the widest enclosure of a cutoff is ", format(max(widths), digits = 2L), " (tolerance ",
    format(verdicts$tolerance[1L]), "). Raise 'sweeps' or loosen 'tolerance' in equilibrium().\n", sep = ""
  )
}
