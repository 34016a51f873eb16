# Plain objects round a kernel: they survive files, leak nothing and cannot go stale.

test_that("objects survive saveRDS", {
  st <- study(good_members(), good_links(), mutual = TRUE)
  eq <- equilibrium(st, good_beliefs())
  sc <- scenario(st, broadcast(precision = 2), thin_links(0.5, seed = 1))
  cf <- counterfactual(eq, sc, draws = 50, seed = 7)
  file <- tempfile()
  saveRDS(list(st = st, eq = eq, sc = sc, cf = cf), file)
  back <- readRDS(file)
  expect_identical(as.data.frame(back$st), as.data.frame(st))
  expect_identical(as.data.frame(back$eq, level = "member"), as.data.frame(eq, level = "member"))
  expect_identical(as.data.frame(turnout(back$eq, given = 0.2)), as.data.frame(turnout(eq, given = 0.2)))
  expect_identical(as.data.frame(counterfactual(back$eq, back$sc, draws = 50, seed = 7)), as.data.frame(cf))
  expect_identical(as.data.frame(counterfactual(eq, back$sc, draws = 50, seed = 7)), as.data.frame(cf))
  expect_identical(as.data.frame(scenario(back$st, broadcast(precision = 2), thin_links(0.5, seed = 1))),
    as.data.frame(sc))
  expect_identical(back$cf, cf)
  expect_identical(as.character(provenance(back$eq)), as.character(provenance(eq)))
})

test_that("live handles return to the start value", {
  start <- live_handles()
  local({
    eq <- good_equilibrium()
    sc <- scenario(eq$study, cut_links(), forward_reports(2))
    counterfactual(eq, sc, draws = 10, seed = 1)
    simulate(eq, 3, seed = 1, level = "member")
    turnout(eq, given = 0:1, at_least = 0.5)
    expect_gt(folkmote:::raw_live_handles(), start)
  })
  for (k in 1:20) {
    try(study(good_members(), data.frame(community = "A", listener = 1, speaker = 9)), silent = TRUE)
    try(equilibrium(good_study(), beliefs(0, 1)), silent = TRUE)
    try(scenario(good_study(), add_links(good_links())), silent = TRUE)
    try(beliefs(0, -1), silent = TRUE)
  }
  expect_identical(live_handles(), start)
})

test_that("results hold no handle of their own", {
  start <- live_handles()
  eq <- good_equilibrium()
  expect_lte(live_handles() - start, 2)
  rm(eq)
  expect_identical(live_handles(), start)
})

test_that("raw handles are checked for kind and life", {
  table <- folkmote:::raw_table_create(1)
  expect_error(folkmote:::raw_study_summary(table), "folkmote_study")
  expect_error(folkmote:::raw_table_rows(1), "folkmote_table")
  folkmote:::raw_handle_release(table)
  expect_error(folkmote:::raw_table_rows(table), "no longer alive")
  folkmote:::raw_handle_release(table)
})

test_that("objects cannot be changed behind their back", {
  st <- good_study()
  expect_error(st$members <- 1, "cannot be changed", class = "folkmote_bad_argument")
  expect_error(st[["links"]] <- NULL, "cannot be changed")
  cf <- counterfactual(good_equilibrium(), scenario(st), draws = 0)
  expect_identical(class(cf[1, ]), "data.frame")
  cf$new <- 1
  expect_identical(class(cf), "data.frame")
})

test_that("the raw layer has the header's constants", {
  constants <- folkmote:::raw_header_constants()
  expect_identical(constants[[1]], as.character(packageVersion("folkmote")))
  expect_identical(folkmote:::raw_status_name(2L), "FOLKMOTE_BAD_DATA")
  expect_identical(folkmote:::raw_status_text(77L), "unknown status")
  expect_identical(folkmote:::raw_parameter_bounds(18L), c(0, 1, 0, 0))
  expect_error(folkmote:::raw_parameter_bounds(99L), class = "folkmote_bad_argument")
})

test_that("provenance names everything a data editor asks for", {
  st <- good_study()
  eq <- equilibrium(st, good_beliefs())
  cf <- counterfactual(eq, scenario(st, thin_links(0.5, seed = 41)), draws = 50, seed = 42)
  text <- as.character(provenance(cf))
  for (item in c("folkmote: ", "stream version: ", "seed: ", "digest of equilibrium: ", "digest of scenario: ",
    "digest of result: ", "R: ", "platform: ", "time: ")) {
    expect_true(any(startsWith(text, item)), label = item)
  }
  expect_true(any(grepl("^seed: +42$", text)))
  expect_identical(sum(grepl("^digest.* [0-9a-f]{16}$", text)), 4L)
  expect_true(any(grepl("^seed: +41$", as.character(provenance(scenario(st, thin_links(0.5, seed = 41)))))))
  same <- equilibrium(good_study(), good_beliefs())
  expect_identical(same$provenance$inputs, eq$provenance$inputs)
  expect_identical(same$provenance$output, eq$provenance$output)
  other <- equilibrium(st, beliefs(0.41, 1, 4, stake_sd = 0.2))
  expect_false(identical(other$provenance$inputs, eq$provenance$inputs))
})
