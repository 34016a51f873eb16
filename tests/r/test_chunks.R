# Chunks: any split gives the bytes of the single run, on this process and on workers; conditions and devices.

chunk_eq <- function() {
  st <- study(data.frame(community = rep(c("a", "b"), c(5, 8)), member = 1:13))
  equilibrium(st, beliefs(0.4, 1, 4, stake_sd = 0.2))
}
output_of <- function(x) attr(x, "provenance")$output
new_folder <- function() {
  folder <- tempfile("chunks")
  dir.create(folder)
  folder
}

test_that("splits cover every draw once", {
  for (chunks in c(1, 3, 7, 10)) {
    split <- split_draws(10, chunks)
    expect_length(split, chunks)
    expect_equal(unlist(split), 1:10)
  }
  expect_error(split_draws(3, 4), class = "folkmote_bad_argument")
})

test_that("any split merges to the single run, and a second run computes nothing", {
  eq <- chunk_eq()
  for (level in c("community", "member")) {
    single <- simulate(eq, 57, seed = 9, level = level)
    for (chunks in c(1, 4, 57)) {
      folder <- new_folder()
      expect_identical(output_of(run_chunks(eq, 57, 9, folder, chunks = chunks, level = level)), output_of(single))
      stamps <- file.mtime(dir(folder, full.names = TRUE))
      run_chunks(eq, 57, 9, folder, chunks = chunks, level = level)
      expect_identical(file.mtime(dir(folder, full.names = TRUE)), stamps)
    }
  }
  merged <- run_chunks(eq, 57, 9, new_folder(), chunks = 4)
  expect_identical(as.data.frame(merged), as.data.frame(simulate(eq, 57, seed = 9)))
  expect_s3_class(merged, "folkmote_simulation")
})

test_that("chunks of a scenario hold both sides on the same draws", {
  eq <- chunk_eq()
  sc <- scenario(eq$study, broadcast(precision = 2))
  merged <- run_chunks(eq, 30, 9, new_folder(), chunks = 3, scenario = sc, given = c(0, 1))
  single <- run_chunk(eq, 1:30, 9, scenario = sc, given = c(0, 1))
  expect_identical(output_of(merged), output_of(single))
  plays <- simulate(eq, 30, seed = 9, given = c(0, 1))
  expect_identical(merged$baseline_least, plays$turnout_least)
  expect_true(all(merged$obstacle >= 0 & merged$obstacle <= 1))
  expect_error(run_chunk(eq, 1:3, 9, scenario = sc, level = "member"), class = "folkmote_bad_argument")
})

test_that("what does not make one run is refused by name", {
  eq <- chunk_eq()
  files <- file.path(new_folder(), c("a", "b", "c"))
  parts <- list(1:10, 11:20, 21:30)
  for (k in 1:3) expect_true(attr(run_chunk(eq, parts[[k]], 9, file = files[k]), "computed"))
  expect_false(attr(run_chunk(eq, parts[[1]], 9, file = files[1]), "computed"))
  expect_error(merge_chunks(eq, files[c(1, 3)], 30), "draws 10 to 19", class = "folkmote_bad_file")
  expect_error(merge_chunks(eq, c(files, files[1]), 30), "stand in another file", class = "folkmote_bad_file")
  expect_error(run_chunk(eq, 1:10, 8, file = files[1]), "other inputs", class = "folkmote_bad_file")
  expect_error(run_chunk(eq, c(1, 3), 8), "consecutive", class = "folkmote_bad_argument")
  expect_error(run_chunk(eq, 1:3, NULL), "'seed'", class = "folkmote_bad_argument")
})

test_that("a future plan changes nothing", {
  skip_if_not_installed("future")
  eq <- chunk_eq()
  before <- future::plan(future::multisession, workers = 2)
  on.exit(future::plan(before))
  expect_identical(output_of(run_chunks(eq, 40, 9, new_folder(), chunks = 5)), output_of(simulate(eq, 40, seed = 9)))
})

test_that("conditions and devices do what they say", {
  eq <- chunk_eq()
  sc <- scenario(eq$study, shift_cost(-0.2))
  plays <- simulate(eq, 200, seed = 1, given = c(0.5, Inf))
  expect_true(all(plays$obstacle >= 0.5) && diff(range(plays$obstacle)) > 0)
  for (bad in list("a", c(1, 0), c(0, NA), 1:3, Inf)) {
    expect_error(simulate(eq, 1, seed = 1, given = bad), "'given'", class = "folkmote_bad_argument")
  }
  plain <- counterfactual(eq, sc, draws = 400, seed = 2, reduce = NULL)
  best <- counterfactual(eq, sc, draws = 400, seed = 2)
  expect_identical(plain$difference_least, best$difference_least)
  expect_true(all(best$standard_error_least < plain$standard_error_least / 3))
  within <- counterfactual(eq, sc, draws = 400, seed = 2, given = c(0, 0.5))
  expect_true(all(abs(within$simulated_least - within$difference_least) < 5 * within$standard_error_least + 1e-9))
  at <- counterfactual(eq, sc, draws = 0, given = 0.3)
  expect_equal(at$baseline_least[-1], turnout(eq, given = 0.3)$turnout_least)
  expect_error(counterfactual(eq, sc, reduce = "luck"), "'reduce'", class = "folkmote_bad_argument")
})
