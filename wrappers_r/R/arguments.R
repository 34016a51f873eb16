# Checks of scalar arguments, the rule of seeds and the number of threads.

is_number <- function(x) is.numeric(x) && !is.object(x) && length(x) == 1L && !is.na(x)
is_whole <- function(x) is_number(x) && is.finite(x) && x == floor(x)

one_number <- function(x, argument, wanted = "one finite number", low = -Inf, high = Inf, low_open = FALSE) {
  ok <- is_number(x) && is.finite(x) && x >= low && x <= high && !(low_open && x == low)
  if (!ok) stop_argument(argument, wanted, x)
  as.double(x)
}

one_whole <- function(x, argument, low, high) {
  wanted <- paste0("one whole number from ", plain_number(low), " to ", plain_number(high))
  if (!is_whole(x) || x < low || x > high) stop_argument(argument, wanted, x)
  as.double(x)
}

one_flag <- function(x, argument) {
  if (!is.logical(x) || length(x) != 1L || is.na(x)) stop_argument(argument, "TRUE or FALSE", x)
  x
}

one_choice <- function(x, argument, choices) {
  if (!is.character(x) || length(x) != 1L || !x %in% choices) {
    stop_argument(argument, paste0("one of ", paste0("\"", choices, "\"", collapse = ", ")), x)
  }
  x
}

some_numbers <- function(x, argument, wanted, low = -Inf, high = Inf) {
  ok <- is.numeric(x) && !is.object(x) && length(x) > 0L && all(is.finite(x)) && all(x >= low & x <= high)
  if (!ok) stop_argument(argument, wanted, x)
  as.double(x)
}

of_class <- function(x, argument, class, maker) {
  if (!inherits(x, class)) stop_argument(argument, paste0("what ", maker, " returns"), x)
  x
}

no_more_arguments <- function(...) {
  if (...length() == 0L) return(invisible())
  named <- ...names()
  extra <- if (is.null(named)) rep("", ...length()) else named
  extra[is.na(extra) | !nzchar(extra)] <- "an unnamed argument"
  stop(folkmote_condition("folkmote_bad_argument", paste0("unknown argument: ", paste(extra, collapse = ", "), ".")))
}

# One rule: without a seed one number is taken from R's own generator, so that set.seed() governs; a given seed is
# used as it is and R's generator is left alone.
resolve_seed <- function(seed) {
  if (is.null(seed)) return(floor(stats::runif(1L) * 2147483648))
  if (!is_whole(seed) || seed < 0 || seed > 2^53) {
    stop_argument("seed", "NULL or one whole number from 0 to 2^53", seed)
  }
  as.double(seed)
}

# At most two by default; OMP_THREAD_LIMIT and the option mc.cores cap what is asked for. Results never depend on it.
resolve_threads <- function(threads) {
  asked <- if (is.null(threads)) min(2L, available_threads()) else one_whole(threads, "threads", 1, 1024)
  max(1, min(asked, cap_of(Sys.getenv("OMP_THREAD_LIMIT")), cap_of(getOption("mc.cores"))))
}

cap_of <- function(limit) {
  cap <- suppressWarnings(as.numeric(limit))
  if (length(cap) == 1L && !is.na(cap) && cap >= 1) floor(cap) else Inf
}

available_threads <- function() {
  found <- parallel::detectCores()
  if (is.na(found)) 1L else found
}
