# Tests of the R package, against the copy installed in FOLKMOTE_R_LIBRARY.
# Usage: Rscript tests/r/run.R [pattern]
# The last line is "R: N passed, N failed", counted in expectations.

argument <- function(name) sub(paste0("^--", name, "="), "",
  grep(paste0("^--", name, "="), commandArgs(), value = TRUE))
tests <- dirname(normalizePath(argument("file")))
library_folder <- Sys.getenv("FOLKMOTE_R_LIBRARY")
if (nzchar(library_folder)) .libPaths(c(normalizePath(library_folder, mustWork = TRUE), .libPaths()))
Sys.setenv(FOLKMOTE_R_TESTS = tests, FOLKMOTE_REFERENCE = file.path(dirname(tests), "reference"))

suppressPackageStartupMessages({
  library(testthat)
  library(folkmote)
})
pattern <- commandArgs(trailingOnly = TRUE)
results <- test_dir(tests,
  filter = if (length(pattern) > 0L) pattern[1L], reporter = "check", load_package = "none", stop_on_failure = FALSE
)
outcomes <- unlist(lapply(results, function(test) vapply(test$results, function(one) class(one)[1L], "")))
passed <- sum(outcomes == "expectation_success")
failed <- sum(outcomes %in% c("expectation_failure", "expectation_error"))
skipped <- sum(outcomes == "expectation_skip")
if (skipped > 0L) cat("skipped:", skipped, "\n")
cat(sprintf("R: %d passed, %d failed\n", passed, failed))
quit(status = if (failed > 0L || passed == 0L) 1L else 0L)
