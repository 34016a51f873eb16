# study(): who listens to whom.

study <- function(members, links = NULL, broadcasts = NULL, gatherings = NULL, communities = NULL, mutual = FALSE) {
  mutual <- one_flag(mutual, "mutual")
  members <- as_input_frame(members, "members")
  x <- list(
    members = members,
    links = as_links(links, members, mutual),
    broadcasts = optional_frame(broadcasts, "broadcasts"),
    gatherings = optional_frame(gatherings, "gatherings"),
    communities = optional_frame(communities, "communities"),
    mutual = mutual,
    cache = new_cache()
  )
  x <- structure(x, class = c("folkmote_study", "folkmote_object"))
  summary <- from_table(raw_study_summary(study_handle(x)), x$members)
  inputs <- c(study = raw_study_digest(study_handle(x)),
    vapply(study_tables, function(name) table_digest(x[[name]], name), ""))
  record <- provenance_record("study", inputs = inputs, output = summary)
  attr(summary, "digest") <- NULL
  x <- unclass(x)
  x$summary <- summary
  x$provenance <- record
  structure(x, class = c("folkmote_study", "folkmote_object"))
}

study_tables <- c("members", "links", "broadcasts", "gatherings", "communities")

build_study <- function(x) {
  tables <- lapply(study_tables, function(name) to_table(x[[name]], name))
  on.exit(for (table in tables) if (!is.null(table)) raw_handle_release(table))
  raw_study_create(tables[[1L]], tables[[2L]], tables[[3L]], tables[[4L]], tables[[5L]], x$mutual)
}

as.data.frame.folkmote_study <- function(x, row.names = NULL, optional = FALSE, ...) x$summary

summary.folkmote_study <- function(object, ...) new_result(object$summary, "study_summary", object$provenance)

print.folkmote_study <- function(x, rows = 12, ...) {
  head <- x$summary
  cat("Study: ", count_of(nrow(head), "community", "communities"), ", ", count_of(nrow(x$members), "member"), "\n",
    sep = "")
  show_communities(head, head$members, rows)
  invisible(x)
}

# Objects remember what was solved from them, so that a part cannot be changed behind their back.
`$<-.folkmote_object` <- function(x, name, value) refuse_change(x)
`[[<-.folkmote_object` <- function(x, i, value) refuse_change(x)
`[<-.folkmote_object` <- function(x, i, value) refuse_change(x)

refuse_change <- function(x) {
  stop(folkmote_condition("folkmote_bad_argument", paste0(
    "an object of class '", class(x)[1L], "' cannot be changed in place; ",
    "make a new one, or describe edits with scenario()."
  )))
}
