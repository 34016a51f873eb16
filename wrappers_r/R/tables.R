# Data frames to the kernel's tables and back. Every input and every result passes here.

# The columns that the kernel reads; all others are the caller's own and stay out.
used_columns <- list(
  members = c(
    "community", "member", "turnout", "expected_share", "weight", "cost", "benefit", "signal_precision", "stake_sd"
  ),
  links = c("community", "listener", "speaker", "relay_precision"),
  broadcasts = c("community", "broadcast", "member", "precision"),
  gatherings = c("community", "gathering", "member"),
  communities = "community",
  audience = c("community", "member")
)

as_input_frame <- function(x, argument) {
  if (!is.data.frame(x)) stop_argument(argument, "a data frame", x)
  frame <- as.data.frame(x, stringsAsFactors = FALSE)
  twice <- unique(names(frame)[duplicated(names(frame))])
  twice <- intersect(twice, unlist(used_columns))
  if (length(twice) > 0L) stop_data(argument, ": column '", twice[1L], "' stands twice; keep one.")
  frame
}

optional_frame <- function(x, argument) if (is.null(x)) NULL else as_input_frame(x, argument)

# Handle of a table with the columns of `frame` that are used; NULL stays NULL.
to_table <- function(frame, argument, used = used_columns[[argument]]) {
  if (is.null(frame)) return(NULL)
  table <- raw_table_create(nrow(frame))
  for (name in intersect(used, names(frame))) add_column(table, name, frame[[name]], argument)
  table
}

add_column <- function(table, name, values, argument) {
  values <- plain_column(values, name, argument)
  add <- switch(typeof(values),
    character = raw_table_add_text,
    double = raw_table_add_real,
    raw_table_add_integer
  )
  add(table, name, values)
}

# Factors become their labels; classes that only decorate a vector are taken off; others are refused by name.
plain_column <- function(values, name, argument) {
  if (is.factor(values)) values <- as.character(values)
  decorated <- inherits(values, c("AsIs", "labelled", "haven_labelled"))
  usable <- (is.character(values) || is.numeric(values) || is.logical(values)) && is.null(dim(values)) &&
    (decorated || !is.object(values))
  if (!usable) {
    stop_data(
      argument, ": column '", name, "' is of class '", class(values)[1L], "' in all ", NROW(values),
      " rows (from row 1); make it text, whole numbers, numbers or a factor."
    )
  }
  values <- unclass(values)
  attributes(values) <- NULL
  if (is.character(values)) readable_text(values, name, argument) else values
}

readable_text <- function(values, name, argument) {
  values <- enc2utf8(values)
  broken <- which(!is.na(values) & !validUTF8(values))
  if (length(broken) > 0L) {
    stop_data(
      argument, ": column '", name, "', ", row_list(broken),
      ": the text is not valid in its encoding; read the file again with the right one."
    )
  }
  values
}

# "rows 3, 4 and 9 (3 rows)", as the kernel says it.
row_list <- function(rows) {
  shown <- utils::head(rows, 5L)
  text <- if (length(rows) > 5L) {
    paste0(paste(shown, collapse = ", "), ", ...")
  } else if (length(rows) > 1L) {
    paste(paste(shown[-length(shown)], collapse = ", "), "and", shown[length(shown)])
  } else {
    shown
  }
  paste0(if (length(rows) == 1L) "row " else "rows ", text, " (", length(rows),
         if (length(rows) == 1L) " row)" else " rows)")
}

# A result of the kernel as a data frame; ids get the caller's own type and levels back.
from_table <- function(table, members) {
  columns <- seq_len(raw_table_columns(table)) - 1L
  values <- lapply(columns, get_column, table = table)
  names(values) <- vapply(columns, raw_table_column_name, "", table = table)
  for (id in intersect(c("community", "member", "listener", "speaker"), names(values))) {
    values[[id]] <- restore_id(values[[id]], members[[if (id == "community") "community" else "member"]])
  }
  frame <- structure(values, class = "data.frame", row.names = .set_row_names(raw_table_rows(table)))
  attr(frame, "digest") <- raw_table_digest(table)
  raw_handle_release(table)
  frame
}

get_column <- function(column, table) {
  type <- raw_table_column_type(table, column)
  get <- list(raw_table_get_text, raw_table_get_integer, raw_table_get_real)[[match(type, type_code)]]
  get(table, column)
}

restore_id <- function(values, original) {
  if (is.factor(original)) {
    return(factor(values, levels = levels(original), ordered = is.ordered(original)))
  }
  if (inherits(original, "AsIs")) original <- unclass(original)
  storage.mode(values) <- typeof(original)
  values
}

table_digest <- function(frame, argument) {
  table <- to_table(frame, argument)
  digest <- raw_table_digest(table)
  if (!is.null(table)) raw_handle_release(table)
  digest
}
