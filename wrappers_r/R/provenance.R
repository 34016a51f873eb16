# The record that every result carries, and the block of text that a data editor asks for.

provenance_record <- function(what, inputs, output, seed = NULL, settings = NULL) {
  digest <- attr(output, "digest")
  list(
    what = what,
    folkmote = raw_version(),
    stream = raw_stream_version(),
    seed = seed,
    settings = settings,
    inputs = inputs,
    output = digest,
    r = R.version.string,
    platform = R.version$platform,
    machine = machine_text(),
    time = format(Sys.time(), "%Y-%m-%dT%H:%M:%SZ", tz = "UTC")
  )
}

machine_text <- function() {
  system <- Sys.info()
  paste0(system[["sysname"]], " ", system[["release"]], ", ", system[["machine"]], ", ",
         count_of(available_threads(), "hardware thread"))
}

provenance <- function(x) {
  record <- record_of(x)
  if (is.null(record)) stop_argument("x", "a study, an equilibrium, a scenario or a result of folkmote", x)
  structure(record_lines(record), class = "folkmote_provenance", record = record)
}

record_of <- function(x) {
  if (inherits(x, "folkmote_object")) return(x$provenance)
  if (inherits(x, "folkmote_result")) return(attr(x, "provenance"))
  NULL
}

record_lines <- function(record) {
  items <- record_items(record)
  paste0(format(paste0(names(items), ":")), " ", items)
}

record_items <- function(record) {
  given <- record$inputs[record$inputs != "0000000000000000"]
  c(
    result = record$what,
    folkmote = record$folkmote,
    "stream version" = record$stream,
    seed = seed_text(record$seed),
    if (!is.null(record$settings)) vapply(record$settings, plain_number, ""),
    stats::setNames(given, paste("digest of", ifelse(names(given) == "all", "inputs", names(given)))),
    "digest of result" = record$output,
    R = record$r,
    platform = record$platform,
    machine = record$machine,
    time = record$time
  )
}

as.data.frame.folkmote_provenance <- function(x, row.names = NULL, optional = FALSE, ...) {
  items <- record_items(attr(x, "record"))
  data.frame(item = names(items), value = unname(items))
}

print.folkmote_provenance <- function(x, ...) {
  cat(x, sep = "\n")
  invisible(x)
}

as.character.folkmote_provenance <- function(x, ...) as.vector(unclass(x))
format.folkmote_provenance <- function(x, ...) as.vector(unclass(x))

seed_text <- function(seed) {
  if (is.null(seed)) "none: nothing was drawn" else paste(vapply(seed, plain_number, ""), collapse = ", ")
}
