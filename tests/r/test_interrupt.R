# A real interrupt sent to a real R process in the middle of each long verb: the prompt is back in 0.3 s, nothing leaks,
# and the session goes on. Progress, as the console and progressr show it.

child_script <- function(work, folder) {
  c(
    sprintf(".libPaths(c(%s))", paste0("\"", .libPaths(), "\"", collapse = ", ")),
    "library(folkmote)",
    "st <- study(data.frame(community = rep(1:4, each = 400), member = rep(1:400, 4)))",
    "b <- beliefs(0.4, 1, 4, stake_sd = 0.2)",
    "eq <- equilibrium(st, b)",
    "ring <- data.frame(community = 1, listener = 1:3000, speaker = c(2:3000, 1))",
    "crowd <- study(data.frame(community = 1, member = 1:3000), ring, mutual = TRUE)",
    "large <- equilibrium(crowd, b)",
    "folder_of_chunks <- tempfile(); dir.create(folder_of_chunks)",
    "hard <- study(data.frame(community = rep(1:300, each = 300), member = rep(1:300, 300)))",
    "edge <- beliefs(0.5, 2.8159, 1)",
    "invisible(gc()); start <- folkmote:::raw_live_handles()",
    sprintf("folder <- '%s'", folder),
    "say <- function(name, text) {",
    "  f <- file.path(folder, name)",
    "  writeLines(text, paste0(f, '_'))",
    "  invisible(file.rename(paste0(f, '_'), f))",
    "}",
    "say('started', as.character(Sys.getpid()))",
    "caught <- tryCatch({", work, "'finished' }, interrupt = function(i) class(i)[1])",
    "now <- as.numeric(Sys.time())",
    "again <- as.data.frame(equilibrium(study(data.frame(community = 1, member = 1:5)), b))$verdict",
    "gc(); left <- folkmote:::raw_live_handles() - start",
    "say('caught', c(caught, again, left, format(now, digits = 17)))"
  )
}

await <- function(file, seconds) {
  end <- Sys.time() + seconds
  while (!file.exists(file) && Sys.time() < end) Sys.sleep(0.01)
  file.exists(file)
}

interrupted <- function(work) {
  folder <- tempfile()
  dir.create(folder)
  script <- file.path(folder, "child.R")
  writeLines(child_script(work, folder), script)
  system2(file.path(R.home("bin"), "Rscript"), script, wait = FALSE, stdout = FALSE,
    stderr = file.path(folder, "log"))
  if (!await(file.path(folder, "started"), 60)) stop("the child did not start: ", readLines(file.path(folder, "log")))
  pid <- as.integer(readLines(file.path(folder, "started")))
  Sys.sleep(0.7)
  sent <- Sys.time()
  tools::pskill(pid, tools::SIGINT)
  answered <- await(file.path(folder, "caught"), 20)
  if (!answered) tools::pskill(pid, tools::SIGKILL)
  if (!answered) return(list(seconds = Inf))
  caught <- readLines(file.path(folder, "caught"))
  list(answer = caught[1:3], seconds = as.numeric(caught[4]) - as.numeric(sent))
}

# A machine with other work may be late once: the quickest of three has to be in time, and every one right.
expect_interrupt <- function(work) {
  name <- sub("\\(.*", "", work)
  for (attempt in 1:3) {
    found <- interrupted(work)
    expect_identical(found$answer, c("folkmote_cancelled", "proved unique", "0"))
    if (found$seconds < 0.3) break
  }
  expect_lt(found$seconds, 0.3)
  message("    ", name, " stopped after ", format(found$seconds, digits = 2), " s")
}

for (work in c(
  "equilibrium(hard, edge, tolerance = 1e-13, sweeps = 1e9)",
  "turnout(eq, at_least = seq(0.1, 0.9, length.out = 200))",
  "simulate(eq, 1e6, seed = 1)",
  "counterfactual(eq, scenario(st, broadcast(precision = 2)), draws = 3e5, seed = 1)",
  "counterfactual(large, scenario(crowd, broadcast(precision = 2)), draws = 1e5, seed = 1)",
  "run_chunk(eq, 1:1e6, 1, file = file.path(folder_of_chunks, 'a'))",
  "run_chunks(eq, 1e6, 1, folder_of_chunks, chunks = 3)"
)) {
  test_that(paste("an interrupt stops", sub("\\(.*", "", work)), {
    skip_on_os("windows")
    expect_interrupt(work)
  })
}

long_plays <- function(draws) {
  eq <- equilibrium(study(data.frame(community = 1, member = 1:2000)), beliefs(0.4, 1, 4, stake_sd = 0.2))
  function(...) simulate(eq, draws, seed = 1, threads = 1, ...)
}

test_that("progress moves within one large community, and progressr hears of it", {
  skip_if_not_installed("progressr")
  old <- options(progressr.enable = requireNamespace("progressr")) # off where nobody is at the console
  on.exit(options(old))
  seen <- 0
  plays <- long_plays(2e4)
  found <- withCallingHandlers(plays(), progression = function(p) if (p$type == "update") seen <<- c(seen, p$amount))
  expect_gt(length(seen), 3)
  expect_lte(sum(seen), 1000)
  expect_gt(sum(seen), 500)
  expect_identical(attr(found, "provenance")$output, attr(plays(), "provenance")$output)
})

test_that("a handler that jumps out of a run cancels it and leaks nothing", {
  skip_if_not_installed("progressr")
  old <- options(progressr.enable = requireNamespace("progressr"))
  on.exit(options(old))
  plays <- long_plays(1e6)
  plays_now <- long_plays(10)
  invisible(plays_now())
  invisible(gc())
  before <- folkmote:::raw_live_handles()
  got <- tryCatch(plays(), progression = function(p) "jumped", interrupt = function(e) class(e)[1])
  expect_true(got %in% c("jumped", "folkmote_cancelled"))
  expect_equal(nrow(plays_now()), 10)
  invisible(gc())
  expect_lte(folkmote:::raw_live_handles(), before)
})
