# sensitivity(): against differences of whole solutions, and what it refuses.

ring <- function(n = 12) {
  study(
    data.frame(community = "Ring", member = seq_len(n)),
    data.frame(community = "Ring", listener = seq_len(n), speaker = c(seq_len(n)[-1L], 1L)),
    broadcasts = data.frame(community = "Ring", broadcast = "r", member = 1:4, precision = 1.5)
  )
}
ring_turnout <- function(mean = 0.4, precision = 1, signal = 4, relay = 3, stake = 0.2, benefit = 1, cost = 0.1) {
  as.data.frame(equilibrium(ring(), beliefs(mean, precision, signal, relay, stake), share_payoff(benefit, cost),
    tolerance = 1e-13))$turnout_greatest
}

test_that("every common derivative agrees with differences of solved equilibria", {
  eq <- equilibrium(ring(), beliefs(0.4, 1, 4, 3, 0.2), share_payoff(1, 0.1))
  found <- as.data.frame(sensitivity(eq))
  expect_identical(found$parameter, names(folkmote:::derivative_code))
  expect_identical(found$broadcast, c(rep(NA_integer_, 7L), 1L))
  expect_true(all(found$status_least == "solved" & found$status_greatest == "solved"))
  moves <- c("mean", "precision", "signal", "relay", "stake", "benefit", "cost")
  base <- list(mean = 0.4, precision = 1, signal = 4, relay = 3, stake = 0.2, benefit = 1, cost = 0.1)
  for (k in seq_along(moves)) {
    at <- function(by) {
      base[[moves[k]]] <- base[[moves[k]]] + by
      do.call(ring_turnout, base)
    }
    h <- 2e-3
    expected <- (8 * (at(h) - at(-h)) - (at(2 * h) - at(-2 * h))) / (12 * h)
    expect_lt(abs(found$turnout_greatest[k] - expected), 1e-6, label = moves[k])
  }
})

test_that("members' own derivatives add up, and links come with the caller's ids", {
  eq <- equilibrium(ring(), beliefs(0.4, 1, 4, 3, 0.2))
  whole <- as.data.frame(sensitivity(eq, c("cost", "stake_sd")))
  own <- as.data.frame(sensitivity(eq, c("cost", "stake_sd"), level = "member"))
  expect_equal(as.vector(tapply(own$turnout_own_least, own$parameter, sum)[c("cost", "stake_sd")]), whole$turnout_least)
  links <- as.data.frame(sensitivity(eq, "links"))
  expect_identical(nrow(links), 132L)
  expect_identical(typeof(links$listener), "integer")
  expect_equal(links$precision[links$listener == 1L & links$speaker == 2L], 4 * 3 / 7)
  expect_identical(sum(links$precision > 0), 12L)
})

test_that("printing says what the rows are, and cautions where they are people", {
  eq <- equilibrium(ring(), beliefs(0.4, 1, 4, 3, 0.2))
  expect_output(print(sensitivity(eq)), "Derivatives of expected turnout, per unit of each parameter")
  expect_output(print(sensitivity(eq, "links")), "no list of whom to press")
  expect_output(print(sensitivity(eq, "cost", level = "member")), "keep them private")
  open <- equilibrium(ring(), beliefs(0.4, 1, 4, 3, 0.2), sweeps = 1)
  expect_output(print(sensitivity(open, "cost")), "not converged")
  expect_true(all(is.nan(as.data.frame(sensitivity(open))$turnout_least)))
})

test_that("what cannot be asked for is refused in one sentence", {
  eq <- equilibrium(ring(), beliefs(0.4, 1, 4, 3, 0.2))
  for (wrong in list("weight", c("cost", "cost"), c("links", "cost"), character(), 1, NA_character_)) {
    expect_error(sensitivity(eq, wrong), "with_respect_to", class = "folkmote_bad_argument")
  }
  expect_error(sensitivity(eq, "links", level = "member"), "pairs of members", class = "folkmote_bad_argument")
  expect_error(sensitivity(eq, level = "household"), "level", class = "folkmote_bad_argument")
  expect_error(sensitivity(ring()), "equilibrium()", class = "folkmote_bad_argument")
})
