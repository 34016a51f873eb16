# Results: data frames with a record of where they came from.

new_result <- function(frame, kind, record, verdicts = NULL) {
  attr(frame, "digest") <- NULL
  structure(frame,
    class = c(paste0("folkmote_", kind), "folkmote_result", "data.frame"),
    provenance = record, verdicts = verdicts
  )
}

plain_frame <- function(x) {
  attributes(x) <- attributes(x)[c("names", "row.names")]
  class(x) <- "data.frame"
  x
}

as.data.frame.folkmote_result <- function(x, row.names = NULL, optional = FALSE, ...) plain_frame(x)

# A part of a result is a plain data frame: it no longer is what its record describes.
`[.folkmote_result` <- function(x, ...) plain_frame(x)[...]
`$<-.folkmote_result` <- function(x, name, value) {
  x <- plain_frame(x)
  x[[name]] <- value
  x
}
`[<-.folkmote_result` <- function(x, ..., value) {
  x <- plain_frame(x)
  x[...] <- value
  x
}
`[[<-.folkmote_result` <- `[<-.folkmote_result`

print.folkmote_result <- function(x, rows = 12, ...) {
  verdicts <- attr(x, "verdicts")
  if (!is.null(verdicts)) cat(verdict_counts(verdicts$verdict), "\n", sep = "")
  frame <- plain_frame(x)
  at <- if (is.null(verdicts)) NULL else match_community(x, verdicts)
  sizes <- if (is.null(verdicts)) frame$members else verdicts$members[at]
  show_communities(frame, sizes, rows, verdicts$verdict[at])
  if (!is.null(verdicts)) say_unfinished(verdicts)
  invisible(x)
}

match_community <- function(x, verdicts) match(label_text(x$community), label_text(verdicts$community))
