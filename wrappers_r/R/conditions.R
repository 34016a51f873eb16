# From status to condition. checked() is the only place where the kernel's status becomes an R condition: the
# class carries the status by name, the message is the kernel's own sentence.

checked <- function(reply) {
  if (reply$status == status_code[["ok"]]) return(reply$value)
  if (reply$status == status_code[["cancelled"]]) raise_interrupt()
  name <- tolower(raw_status_name(reply$status))
  message <- if (nzchar(reply$message)) reply$message else raw_status_text(reply$status)
  stop(folkmote_condition(name, message))
}

folkmote_condition <- function(class, message) {
  structure(class = c(class, "folkmote_error", "error", "condition"), list(message = message, call = NULL))
}

# As if the user had interrupted plain R code: handlers of class interrupt see it, else the call is abandoned.
raise_interrupt <- function() {
  condition <- structure(
    class = c("folkmote_cancelled", "interrupt", "condition"),
    list(message = "the run was interrupted; nothing was made", call = NULL)
  )
  signalCondition(condition)
  if (interactive()) invokeRestart("abort")
  stop(structure(class = c("folkmote_cancelled", "folkmote_error", "error", "condition"), unclass(condition)))
}

# A wrong R type never reaches the kernel: one sentence that says which argument, what came and what is wanted.
stop_argument <- function(argument, wanted, given) {
  stop(folkmote_condition(
    "folkmote_bad_argument", paste0("'", argument, "' must be ", wanted, "; given: ", describe(given), ".")
  ))
}

stop_data <- function(...) stop(folkmote_condition("folkmote_bad_data", paste0(...)))

# How a value reads in a message: short, and never its contents when it is long.
describe <- function(x) {
  if (is.null(x)) return("NULL")
  if (is.data.frame(x)) return(paste0("a data frame of ", nrow(x), " rows"))
  if (is.atomic(x) && length(x) == 1L && !is.object(x)) {
    return(if (is.character(x)) encodeString(x, quote = "\"", na.encode = TRUE) else plain_number(x))
  }
  kind <- if (is.object(x) || !is.atomic(x)) paste0("an object of class '", class(x)[1L], "'") else typeof(x)
  if (is.atomic(x)) paste0(kind, " of length ", length(x)) else kind
}

# Never 1e+05; an exponent only where the number would be unreadable without.
plain_number <- function(x) {
  extreme <- is.finite(x) && x != 0 && (abs(x) > 2^53 || abs(x) < 1e-4)
  format(x, digits = 15L, scientific = extreme, trim = TRUE)
}
