# Edits of a study: small descriptions that scenario() applies in order.

new_edit <- function(kind, ..., text) structure(list(kind = kind, ..., text = text), class = "folkmote_edit")

add_links <- function(links, mutual = FALSE) {
  new_edit("add_links", links = links, mutual = one_flag(mutual, "mutual"), text = "add links")
}

cut_links <- function(links = NULL, mutual = FALSE) {
  text <- if (is.null(links)) "cut every link" else "cut links"
  new_edit("cut_links", links = links, mutual = one_flag(mutual, "mutual"), text = text)
}

thin_links <- function(share, seed = NULL) {
  share <- one_number(share, "share", "one number from 0 to 1", 0, 1)
  seed <- resolve_seed(seed)
  text <- paste0("lose ", format(100 * share), " % of the contacts (seed ", plain_number(seed), ")")
  new_edit("thin_links", share = share, seed = seed, text = text)
}

rewire_links <- function(share, seed = NULL) {
  share <- one_number(share, "share", "one number from 0 to 1", 0, 1)
  seed <- resolve_seed(seed)
  text <- paste0("rewire ", format(100 * share), " % of the contacts (seed ", plain_number(seed), ")")
  new_edit("rewire_links", share = share, seed = seed, text = text)
}

broadcast <- function(members = "all", precision) {
  if (missing(precision)) stop_argument("precision", "one positive, finite number", NULL)
  precision <- one_number(precision, "precision", "one positive, finite number", low = 0, low_open = TRUE)
  audience <- as_audience(members)
  text <- paste0("broadcast of precision ", format(precision), " to ", audience_text(audience))
  new_edit("broadcast", audience = audience, precision = precision, text = text)
}

gathering <- function(members = "all") {
  audience <- as_audience(members)
  new_edit("gathering", audience = audience, text = paste("gathering of", audience_text(audience)))
}

shift_cost <- function(by, members = "all") {
  by <- one_number(by, "by")
  audience <- as_audience(members)
  text <- paste0("shift the cost by ", format(by), " for ", audience_text(audience))
  new_edit("shift_cost", audience = audience, by = by, text = text)
}

shift_benefit <- function(by, members = "all") {
  by <- one_number(by, "by")
  audience <- as_audience(members)
  text <- paste0("shift the benefit by ", format(by), " for ", audience_text(audience))
  new_edit("shift_benefit", audience = audience, by = by, text = text)
}

set_beliefs <- function(...) {
  values <- list(...)
  allowed <- names(parameter_code)[parameter_code < 16L]
  named <- !is.null(names(values)) && all(names(values) %in% allowed) && !anyDuplicated(names(values))
  if (length(values) == 0L || !named) {
    stop(folkmote_condition("folkmote_bad_argument", paste0(
      "set_beliefs() takes named arguments among ", paste(allowed, collapse = ", "), ", each at most once."
    )))
  }
  values <- Map(parameter_values, values, names(values))
  handle <- raw_beliefs_create() # values out of range stop here, not later in scenario()
  for (name in names(values)) raw_beliefs_set(handle, parameter_code[[name]], as.double(values[[name]]))
  raw_handle_release(handle)
  text <- paste0("set ",
    paste0(gsub("_", " ", names(values)), " to ", vapply(values, parameter_text, ""), collapse = ", "))
  new_edit("set_beliefs", values = values, text = text)
}

forward_reports <- function(hops) {
  hops <- one_whole(hops, "hops", 1, 64)
  new_edit("forward_reports", hops = hops, text = paste("forward reports over", count_of(hops, "hop")))
}

# NULL stands for everyone.
as_audience <- function(members) {
  if (identical(members, "all")) return(NULL)
  if (!is.data.frame(members)) {
    stop_argument("members", "\"all\" or a data frame with community, or with community and member", members)
  }
  frame <- as_input_frame(members, "members")
  frame[intersect(used_columns$audience, names(frame))]
}

audience_text <- function(audience) {
  if (is.null(audience)) return("everyone")
  if ("member" %in% names(audience)) count_of(nrow(audience), "member") else
    count_of(nrow(audience), "community", "communities")
}

print.folkmote_edit <- function(x, ...) {
  cat("Edit: ", x$text, "\n", sep = "")
  invisible(x)
}

# Apply one edit to a scenario of the kernel.
apply_edit <- function(handle, edit, study) {
  with_table <- function(frame, argument, use) {
    table <- to_table(frame, argument)
    on.exit(if (!is.null(table)) raw_handle_release(table))
    use(table)
  }
  with_audience <- function(use) with_table(edit$audience, "audience", use)
  with_links <- function(use) {
    with_table(as_links(edit$links, study$members, edit$mutual), "links",
      function(table) use(handle, table, edit$mutual))
  }
  switch(edit$kind,
    add_links = with_links(raw_scenario_add_links),
    cut_links = with_links(raw_scenario_cut_links),
    thin_links = raw_scenario_thin_links(handle, edit$share, edit$seed),
    rewire_links = raw_scenario_rewire_links(handle, edit$share, edit$seed),
    broadcast = with_audience(function(table) raw_scenario_broadcast(handle, table, edit$precision)),
    gathering = with_audience(function(table) raw_scenario_gathering(handle, table)),
    shift_cost = with_audience(function(table) raw_scenario_shift_cost(handle, table, edit$by)),
    shift_benefit = with_audience(function(table) raw_scenario_shift_benefit(handle, table, edit$by)),
    set_beliefs = for (name in names(edit$values)) {
      values <- in_study_order(edit$values[[name]], name, study)
      raw_scenario_set_beliefs(handle, parameter_code[[name]], values)
    },
    forward_reports = raw_scenario_forward_reports(handle, edit$hops)
  )
}
