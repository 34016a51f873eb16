# A real interrupt sent to a real R process in the middle of a long run.

child_script <- function(work, folder) {
  c(
    sprintf(".libPaths(c(%s))", paste0("\"", .libPaths(), "\"", collapse = ", ")),
    "library(folkmote)",
    "st <- study(data.frame(community = rep(1:4, each = 400), member = rep(1:400, 4)))",
    "b <- beliefs(0.4, 1, 4, stake_sd = 0.2)",
    "eq <- equilibrium(st, b)",
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
    "again <- as.data.frame(equilibrium(study(data.frame(community = 1, member = 1:5)), b))$verdict",
    "gc(); left <- folkmote:::raw_live_handles() - start",
    "say('caught', c(caught, again, left))"
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
  if (!await(file.path(folder, "started"), 30)) stop("the child did not start: ", readLines(file.path(folder, "log")))
  pid <- as.integer(readLines(file.path(folder, "started")))
  Sys.sleep(0.7)
  sent <- Sys.time()
  tools::pskill(pid, tools::SIGINT)
  answered <- await(file.path(folder, "caught"), 20)
  seconds <- as.numeric(Sys.time() - sent, units = "secs")
  if (!answered) tools::pskill(pid, tools::SIGKILL)
  list(answer = if (answered) readLines(file.path(folder, "caught")), seconds = seconds)
}

for (work in c(
  "simulate(eq, 3e5, seed = 1)",
  "equilibrium(hard, edge, tolerance = 1e-13, sweeps = 1e9)",
  "counterfactual(eq, scenario(st, broadcast(precision = 2)), draws = 3e5, seed = 1)"
)) {
  test_that(paste("an interrupt stops", sub("\\(.*", "", work)), {
    skip_on_os("windows")
    found <- interrupted(work)
    expect_identical(found$answer, c("folkmote_cancelled", "proved unique", "0"))
    expect_lt(found$seconds, 2)
    message("    ", sub("\\(.*", "", work), " stopped after ", format(found$seconds, digits = 2), " s")
  })
}
