# Every kind of bad input stops with one message that names table, column, first rows and how many; afterwards the
# session still works.

refuses <- function(code, ..., class = "folkmote_bad_data") {
  condition <- tryCatch(code, error = identity)
  expect_s3_class(condition, class)
  expect_s3_class(condition, "folkmote_error")
  message <- conditionMessage(condition)
  for (part in c(...)) expect_match(message, part, fixed = TRUE)
  expect_false(grepl("\n", message, fixed = TRUE))
  expect_match(message, "[.]$")
  expect_still_works()
}

with_value <- function(table, column, rows, value) {
  table[[column]][rows] <- value
  table
}
members_with <- function(column, rows, value) {
  members <- good_members()
  if (!column %in% names(members)) members[[column]] <- rep(1, 7)
  study(with_value(members, column, rows, value), good_links())
}
links_with <- function(column, rows, value) {
  links <- good_links()
  if (!column %in% names(links)) links[[column]] <- rep(1, 3)
  study(good_members(), with_value(links, column, rows, value))
}
radio <- function() data.frame(community = "A", broadcast = "radio", member = 1:3, precision = 2)
hall <- function() data.frame(community = "B", gathering = "hall", member = 1:3)

test_that("unknown members and communities", {
  refuses(links_with("speaker", c(1, 3), 9), "links", "'speaker'", "rows 1 and 3", "(2 rows)", "unknown member")
  refuses(links_with("listener", 2, 9), "links", "'listener'", "row 2", "(1 row)")
  refuses(links_with("community", 2, "Z"), "links", "'community'", "row 2", "(1 row)")
  refuses(study(good_members(), NULL, with_value(radio(), "member", 2, 9)), "broadcasts", "'member'", "row 2",
    "(1 row)")
  refuses(study(good_members(), gatherings = with_value(hall(), "member", 3, 9)), "gatherings", "'member'", "row 3")
})

test_that("links to oneself", {
  refuses(links_with("speaker", 1:3, c(1, 2, 1)), "links", "rows 1, 2 and 3", "(3 rows)", "oneself")
})

test_that("duplicate links and members", {
  refuses(study(good_members(), good_links()[c(1, 2, 3, 2, 1), ]), "links", "rows 4 and 5", "(2 rows)", "duplicate")
  twice <- rbind(good_links(), data.frame(community = "A", listener = 2, speaker = 1))
  refuses(study(good_members(), twice, mutual = TRUE), "links", "row 4", "(1 row)", "mutual")
  expect_s3_class(study(good_members(), twice), "folkmote_study")
  refuses(members_with("member", c(2, 3), 1), "members", "'member'", "rows 2 and 3", "(2 rows)")
  refuses(study(good_members(), NULL, radio()[c(1, 2, 3, 1), ]), "broadcasts", "row 4", "(1 row)")
  refuses(study(good_members(), gatherings = hall()[c(1, 1, 2, 3), ]), "gatherings", "row 2", "(1 row)")
})

test_that("links across communities", {
  members <- good_members()
  members$member <- paste0(members$community, members$member)
  links <- data.frame(community = "A", listener = c("A1", "A2"), speaker = c("A2", "B1"))
  refuses(study(members, links), "links", "'speaker'", "row 2", "(1 row)", "another community")
})

test_that("NA where none may be", {
  for (column in c("community", "member")) refuses(members_with(column, 6, NA), "members", paste0("'", column, "'"),
    "row 6", "(1 row)", "missing")
  for (column in c("weight", "cost", "benefit", "signal_precision", "stake_sd")) {
    refuses(members_with(column, c(2, 5), NA), "members", paste0("'", column, "'"), "rows 2 and 5", "(2 rows)",
      "missing")
  }
  for (column in c("community", "listener", "speaker", "relay_precision")) {
    refuses(links_with(column, 3, NA), "links", paste0("'", column, "'"), "row 3", "(1 row)", "missing")
  }
  refuses(study(good_members(), NULL, with_value(radio(), "precision", 1:3, NA)), "broadcasts", "'precision'",
    "rows 1, 2 and 3", "missing")
  refuses(study(good_members(), communities = data.frame(community = c("A", NA, "B"))), "communities", "'community'",
    "row 2", "missing")
  expect_s3_class(members_with("turnout", 1:7, NA), "folkmote_study")
  expect_s3_class(members_with("expected_share", 1:7, NA_real_), "folkmote_study")
  covariate <- good_members()
  covariate$age <- NA
  covariate$notes <- as.list(1:7)
  covariate$born <- as.Date(NA)
  expect_s3_class(study(covariate), "folkmote_study")
})

test_that("weights and precisions that are not positive", {
  refuses(members_with("weight", c(1, 3), c(0, -1)), "members", "'weight'", "rows 1 and 3", "(2 rows)")
  refuses(members_with("signal_precision", 4, -1), "members", "'signal_precision'", "row 4", "(1 row)")
  refuses(members_with("stake_sd", 4, -1), "members", "'stake_sd'", "row 4", "(1 row)")
  refuses(members_with("benefit", 4, -1), "members", "'benefit'", "row 4", "(1 row)")
  refuses(links_with("relay_precision", 2, 0), "links", "'relay_precision'", "row 2", "(1 row)")
  refuses(study(good_members(), NULL, with_value(radio(), "precision", 1:3, 0)), "broadcasts", "'precision'",
    "(3 rows)")
  expect_s3_class(members_with("signal_precision", 4, 0), "folkmote_study")
  expect_s3_class(links_with("relay_precision", 2, Inf), "folkmote_study")
})

test_that("values that are not finite, or out of range", {
  for (column in c("weight", "cost", "benefit", "signal_precision", "stake_sd")) {
    refuses(members_with(column, 7, Inf), "members", paste0("'", column, "'"), "row 7", "(1 row)", "finite")
    refuses(members_with(column, 7, -Inf), "members", paste0("'", column, "'"), "row 7", "(1 row)")
    refuses(members_with(column, 7, NaN), "members", paste0("'", column, "'"), "row 7", "(1 row)")
  }
  refuses(study(good_members(), NULL, with_value(radio(), "precision", 1:3, Inf)), "broadcasts", "'precision'",
    "finite")
  refuses(members_with("expected_share", 2, 1.2), "members", "'expected_share'", "row 2", "(1 row)")
  refuses(members_with("member", 2, 1.5), "members", "'member'", "row 2", "whole")
  refuses(members_with("member", 2, 2^54), "members", "'member'", "row 2", "2^53")
})

test_that("turnout that is not binary", {
  refuses(members_with("turnout", 1:6, c(2, -1, 0.5, 3, 4, 5)), "members", "'turnout'", "rows 1, 2, 3, 4, 5", "...",
    "(6 rows)")
})

test_that("wrong types", {
  refuses(members_with("turnout", 1:7, as.character(rep(0:1, length.out = 7))), "members", "'turnout'", "7 rows",
    "numeric")
  refuses(study(transform(good_members(), turnout = factor(turnout))), "members", "'turnout'", "7 rows")
  members <- good_members()
  members$weight <- as.list(1:7)
  refuses(study(members), "members", "'weight'", "'list'", "7 rows", "row 1")
  members$weight <- as.Date("2020-01-01") + 1:7
  refuses(study(members), "members", "'weight'", "'Date'", "7 rows")
  members$weight <- complex(7)
  refuses(study(members), "members", "'weight'", "7 rows")
  broken <- good_members()
  broken$community[2] <- "\xff"
  Encoding(broken$community) <- "UTF-8"
  refuses(study(broken), "members", "'community'", "row 2", "(1 row)", "encoding")
})

test_that("empty communities, missing columns and tables", {
  refuses(study(good_members(), communities = data.frame(community = c("A", "B", "C", "D"))), "communities",
    "'community'", "rows 3 and 4", "(2 rows)")
  refuses(study(good_members(), communities = data.frame(community = "A")), "communities", "'community'")
  refuses(study(good_members()[0, ]), "members")
  for (column in c("community", "member")) refuses(study(good_members()[setdiff(names(good_members()), column)]),
    "members", column, "missing")
  for (column in c("community", "listener", "speaker")) refuses(study(good_members(),
    good_links()[setdiff(names(good_links()), column)]), "links", column, "missing")
  refuses(study(good_members(), NULL, radio()[1:3]), "broadcasts", "'precision'", "missing")
  refuses(study(good_members(), NULL, with_value(radio(), "precision", 2, 3)), "broadcasts", "'precision'", "row 2")
  doubled <- cbind(good_members(), member = 1:7)
  refuses(study(doubled), "members", "'member'", "twice")
})

test_that("wrong R values stop before the kernel with a sentence that names the argument", {
  wrong <- function(code, ...) refuses(code, ..., class = "folkmote_bad_argument")
  wrong(study(1:3), "'members'", "a data frame", "integer of length 3")
  wrong(study(good_members(), "x"), "'links'")
  wrong(study(good_members(), mutual = NA), "'mutual'", "TRUE or FALSE", "NA")
  wrong(beliefs(prior_precision = 1), "'prior_mean'")
  wrong(beliefs("a", 1), "'prior_mean'", "\"a\"")
  wrong(beliefs(0, 0), "prior_precision", "0")
  wrong(beliefs(0, NA_real_), "prior_precision")
  wrong(beliefs(0, 1, stake_sd = -1), "stake_sd")
  wrong(beliefs(0, 1, relay_precision = 0), "relay_precision")
  wrong(share_payoff(reach = 2), "'reach'")
  wrong(share_payoff(reach = "friends"), "'reach'", "\"friends\"")
  wrong(share_payoff(benefit = -1), "benefit")
  wrong(equilibrium(1, good_beliefs()), "'study'", "study()")
  wrong(equilibrium(good_study(), 1), "'beliefs'")
  wrong(equilibrium(good_study(), good_beliefs(), 1), "'payoff'")
  wrong(equilibrium(good_study(), good_beliefs(), tolerance = 0), "'tolerance'")
  wrong(equilibrium(good_study(), good_beliefs(), threads = 0), "'threads'")
  wrong(equilibrium(good_study(), good_beliefs(), sweeps = 1.5), "'sweeps'", "1.5")
  wrong(equilibrium(good_study(), beliefs(0, 1)), "signal_precision")
  wrong(equilibrium(good_study(), beliefs(c(1, 2, 3), 1, 1)), "prior_mean", "3 values")
  wrong(turnout(1), "'eq'")
  wrong(turnout(good_equilibrium(), given = "x"), "'given'")
  wrong(turnout(good_equilibrium(), given = NA_real_), "'given'")
  wrong(turnout(good_equilibrium(), at_least = 1.1), "'at_least'")
  wrong(simulate(good_equilibrium(), 0), "'nsim'")
  wrong(simulate(good_equilibrium(), level = "house"), "'level'")
  wrong(simulate(good_equilibrium(), givn = 1), "unknown argument", "givn")
  wrong(scenario(good_study(), 1), "an edit")
  wrong(broadcast(), "'precision'")
  wrong(broadcast(precision = 0), "'precision'")
  wrong(broadcast("some", 1), "'members'", "\"some\"")
  wrong(thin_links(1.5), "'share'")
  wrong(shift_cost(Inf), "'by'")
  wrong(shift_benefit(NA), "'by'")
  wrong(rewire_links(2), "'share'")
  wrong(counterfactual(good_equilibrium(), scenario(good_study(), shift_benefit(-3)), draws = 0), "shift_benefit leaves")
  wrong(forward_reports(0), "'hops'")
  wrong(forward_reports(65), "'hops'", "64")
  wrong(set_beliefs(), "named arguments")
  wrong(set_beliefs(benefit = 1), "named arguments")
  wrong(set_beliefs(prior_precision = -1), "prior_precision")
  wrong(counterfactual(good_equilibrium(), 1), "'scenario'")
  wrong(counterfactual(good_equilibrium(), scenario(good_study()), draws = 1), "'draws'")
  wrong(provenance(1), "'x'")
  other <- study(data.frame(community = 1, member = 1:3))
  wrong(counterfactual(good_equilibrium(), scenario(other)), "scenario")
})

test_that("edits that do not fit the study", {
  st <- good_study()
  absent <- data.frame(community = "A", listener = 1, speaker = 4)
  refuses(scenario(st, cut_links(absent)), "links", "row 1", "(1 row)")
  refuses(scenario(st, add_links(good_links())), "links", "rows 1, 2 and 3", "(3 rows)")
  refuses(scenario(st, broadcast(data.frame(community = "Z"), 1)), "'community'", "row 1")
  refuses(scenario(st, gathering(data.frame(community = "A", member = c(1, 9)))), "'member'", "row 2")
  expect_identical(sum(as.data.frame(scenario(st, cut_links()))$links), 0L)
  expect_identical(as.data.frame(scenario(st, add_links(absent), cut_links(absent))), as.data.frame(st))
})
