# Every class prints and plots, and what has not converged never looks like an answer.

several_study <- function(k) {
  members <- data.frame(community = sprintf("Village %02d", rep(seq_len(k), each = 12)), member = rep(1:12, k))
  members$turnout <- rep(c(0, 1, NA), length.out = nrow(members))
  links <- data.frame(community = members$community, listener = members$member, speaker = members$member %% 12 + 1)
  study(members, links, mutual = TRUE)
}
solve_several <- function(st, ...) {
  k <- nrow(as.data.frame(st))
  alpha <- rep(1, k)
  alpha[1] <- 25
  equilibrium(st, beliefs(0.5, alpha, 0.8, stake_sd = 0.05), ...)
}
everything <- function(st, eq) {
  list(
    st, eq, summary(st), summary(eq), turnout(eq), turnout(eq, given = c(0, 0.5, 1)), turnout(eq,
      at_least = c(0.2, 0.5)),
    turnout(eq, given = c(0, 1), at_least = 0.5), simulate(eq, 30, seed = 1), scenario(st, cut_links()),
    counterfactual(eq, scenario(st, broadcast(precision = 2)), draws = 30, seed = 1),
    counterfactual(eq, scenario(st, gathering()), draws = 0)
  )
}
picture <- function(x, ...) {
  for (device in list(png, pdf)) {
    file <- tempfile()
    device(file)
    before <- par(c("mar", "mfrow", "xpd"))
    plot(x, ...)
    after <- par(c("mar", "mfrow", "xpd"))
    dev.off()
    expect_gt(file.size(file), 1000)
    expect_identical(after[2:3], before[2:3])
  }
}

test_that("every class prints, converts and plots, with one community and with many", {
  for (k in c(1, 3, 48)) {
    st <- several_study(k)
    eq <- solve_several(st)
    for (x in everything(st, eq)) {
      text <- capture.output(shown <- print(x))
      expect_identical(shown, x)
      expect_gt(length(text), 1)
      expect_lte(max(nchar(text, "width")), 230)
      expect_identical(class(as.data.frame(x)), "data.frame")
      if (!inherits(x, c("folkmote_study_summary", "folkmote_equilibrium_summary"))) picture(x)
    }
    picture(turnout(eq, at_least = seq(0, 1, 0.1)), what = "chance")
    picture(turnout(eq, given = seq(-1, 2, 0.25), at_least = c(0.25, 0.5)), what = "chance")
    capture.output(for (x in list(eq$beliefs, eq$payoff, thin_links(0.1, seed = 1), provenance(eq))) print(x))
    expect_identical(names(as.data.frame(eq$beliefs)), c("parameter", "values", "lowest", "highest"))
  }
})

test_that("verdicts come first", {
  first <- capture.output(print(solve_several(several_study(48))))[1]
  expect_identical(first, "Equilibrium of 48 communities: 47 proved unique, 1 several")
})

test_that("rows of small communities are flagged", {
  text <- capture.output(print(good_equilibrium()))
  expect_true(any(grepl("fewer than 10 members", text)))
  expect_false(any(grepl("fewer than 10 members", capture.output(print(solve_several(several_study(3)))))))
})

test_that("cutoffs are drawn against the information held, whatever the verdicts", {
  for (eq in list(good_equilibrium(), solve_several(several_study(3)), solve_several(several_study(3), sweeps = 3))) {
    held <- as.data.frame(eq, level = "member")$information_held
    expect_true(all(is.finite(held) & held >= 0))
    picture(eq, what = "cutoffs")
  }
  expect_error(plot(good_equilibrium(), what = "people"), "'what'")
})

test_that("single members are shown on the explicit switch only", {
  eq <- good_equilibrium()
  expect_false("member" %in% names(as.data.frame(eq)))
  expect_true("member" %in% names(as.data.frame(eq, level = "member")))
  expect_error(as.data.frame(eq, level = "person"), "'level'")
  expect_false(any(grepl("cutoff_least", capture.output(print(eq)))))
})

test_that("what has not converged never prints as an answer", {
  st <- several_study(3)
  eq <- solve_several(st, sweeps = 3)
  frame <- as.data.frame(eq)
  open <- frame$verdict == "not converged"
  expect_true(any(open))
  results <- list(
    eq, summary(eq), turnout(eq), turnout(eq, given = 0.3, at_least = 0.5), simulate(eq, 3, seed = 1), simulate(eq,
      30, seed = 1),
    counterfactual(eq, scenario(st, cut_links()), draws = 10, seed = 1)
  )
  for (x in results) {
    text <- capture.output(print(x))
    rows <- grep(frame$community[open][1], text, value = TRUE, fixed = TRUE)
    expect_true(length(rows) > 0 && all(grepl("--", rows, fixed = TRUE)))
    words <- paste(text, collapse = " ")
    expect_match(words, "not converged", fixed = TRUE)
    expect_match(words, "after 3 sweeps", fixed = TRUE)
    expect_match(words, "Raise 'sweeps' or loosen 'tolerance'", fixed = TRUE)
    if (!inherits(x, "folkmote_equilibrium_summary")) picture(x)
  }
  pooled <- capture.output(print(summary(results[[7]])))
  expect_match(paste(pooled, collapse = " "), "No answer yet", fixed = TRUE)
  expect_false(any(grepl("difference.*[0-9]", pooled)))
})
