# One rule of seeds, and numbers that depend on nothing else.

plays <- function(...) as.data.frame(simulate(good_equilibrium(), 5, ...))

test_that("without a seed R's generator governs", {
  set.seed(1)
  first <- simulate(good_equilibrium(), 5)
  after <- runif(1)
  set.seed(1)
  again <- simulate(good_equilibrium(), 5)
  expect_identical(as.data.frame(first), as.data.frame(again))
  expect_identical(runif(1), after)
  set.seed(1)
  runif(1)
  expect_identical(runif(1), after)
  seed <- attr(first, "provenance")$seed
  expect_identical(plays(seed = seed), as.data.frame(first))
  expect_match(capture.output(print(first))[1], format(seed, scientific = FALSE), fixed = TRUE)
  expect_false(identical(as.data.frame(simulate(good_equilibrium(), 5)), as.data.frame(first)))
})

test_that("a given seed leaves R's generator alone", {
  set.seed(3)
  state <- .Random.seed
  eq <- good_equilibrium()
  simulate(eq, 5, seed = 4)
  counterfactual(eq, scenario(good_study(), thin_links(0.5, seed = 2)), seed = 2^53)
  counterfactual(eq, scenario(good_study(), broadcast(precision = 1)), draws = 0)
  expect_identical(.Random.seed, state)
  thin_links(0.5)
  expect_false(identical(.Random.seed, state))
  expect_identical(plays(seed = 4), plays(seed = 4L))
  expect_false(identical(plays(seed = 2^53), plays(seed = 2^53 - 1)))
  expect_identical(nrow(plays(seed = 0)), 10L)
})

test_that("other seeds are refused with a sentence", {
  for (seed in list(NA, NA_real_, -1, 0.5, 2^53 + 2, Inf, NaN, "7", c(1, 2), list(1), TRUE)) {
    expect_error(simulate(good_equilibrium(), 5, seed = seed),
      "'seed' must be NULL or one whole number from 0 to 2^53", fixed = TRUE, class = "folkmote_bad_argument")
    expect_error(thin_links(0.1, seed = seed), "'seed' must be", fixed = TRUE)
  }
  expect_still_works()
})

test_that("plays do not depend on threads or on how many there are", {
  eq <- good_equilibrium()
  ten <- as.data.frame(simulate(eq, 10, seed = 7, threads = 1))
  expect_identical(as.data.frame(simulate(eq, 10, seed = 7, threads = 2)), ten)
  four <- as.data.frame(simulate(eq, 4, seed = 7))
  expect_identical(four, data.frame(ten[ten$replication <= 4, ], row.names = NULL))
  one <- as.data.frame(equilibrium(good_study(), good_beliefs(), threads = 1), level = "member")
  expect_identical(as.data.frame(equilibrium(good_study(), good_beliefs(), threads = 2), level = "member"), one)
})

test_that("threads are capped by what the machine's owner says", {
  resolve <- folkmote:::resolve_threads
  old <- options(mc.cores = NULL)
  limit <- Sys.getenv("OMP_THREAD_LIMIT", NA)
  on.exit({
    options(old)
    if (is.na(limit)) Sys.unsetenv("OMP_THREAD_LIMIT") else Sys.setenv(OMP_THREAD_LIMIT = limit)
  })
  Sys.unsetenv("OMP_THREAD_LIMIT")
  expect_lte(resolve(NULL), 2)
  expect_identical(resolve(8), 8)
  options(mc.cores = 3)
  expect_identical(resolve(8), 3)
  Sys.setenv(OMP_THREAD_LIMIT = "1")
  expect_identical(resolve(8), 1)
  expect_identical(resolve(NULL), 1)
})
