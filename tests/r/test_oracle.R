# The kernel against the dense oracle, to 1e-9.

test_that("cutoffs, turnout and curves agree on 50 random communities", {
  for (seed in 1:50) {
    part <- random_community("here", seed)
    eq <- community_equilibrium(part, tolerance = 1e-10)
    x <- part$oracle
    info <- oracle_information(x)
    truth <- oracle_cutoffs(x, info)
    found <- as.data.frame(eq, level = "member")
    expect_identical(found$member, part$members$member)
    expect_lt(max(abs(found$cutoff_least - truth$least)), 1e-9, label = paste("least cutoff, seed", seed))
    expect_lt(max(abs(found$cutoff_greatest - truth$greatest)), 1e-9, label = paste("greatest cutoff, seed", seed))
    whole <- as.data.frame(eq)
    expect_lt(abs(whole$turnout_least - oracle_turnout(x, truth$least, info)), 1e-9)
    expect_lt(abs(whole$turnout_greatest - oracle_turnout(x, truth$greatest, info)), 1e-9)
    given <- as.data.frame(turnout(eq, given = c(-0.5, 0.4, 1.3)))
    curve <- vapply(given$given, function(theta) oracle_turnout_given(x, truth$greatest, theta, info), 0)
    expect_lt(max(abs(given$turnout_greatest - curve)), 1e-9)
  }
})

test_that("several equilibria are enclosed at both ends", {
  n <- 30
  st <- study(data.frame(community = 1, member = 1:n))
  eq <- equilibrium(st, beliefs(0.5, 10, 1), tolerance = 1e-10)
  x <- list(
    mu = 0.5, alpha = 10, beta = rep(1, n), sigma = rep(0, n), weight = rep(1, n), benefit = rep(1, n),
    cost = rep(0, n), exact = matrix(FALSE, n, n), relay = matrix(NA_real_, n, n), broadcasts = list(), reach = 0
  )
  truth <- oracle_cutoffs(x)
  found <- as.data.frame(eq, level = "member")
  expect_identical(as.data.frame(eq)$verdict, "several")
  expect_lt(max(abs(found$cutoff_least - truth$least)), 1e-9)
  expect_lt(max(abs(found$cutoff_greatest - truth$greatest)), 1e-9)
})

test_that("all communities in one study give what each gives alone", {
  parts <- lapply(1:12, function(seed) random_community(sprintf("c%02d", seed), seed))
  bind <- function(name) do.call(rbind, lapply(parts, `[[`, name))
  st <- study(bind("members"), bind("links"), bind("broadcasts"), bind("gatherings"))
  mu <- vapply(parts, function(part) part$oracle$mu, 0)
  alpha <- vapply(parts, function(part) part$oracle$alpha, 0)
  together <- as.data.frame(equilibrium(st, beliefs(mu, alpha), share_payoff(reach = 0.35)))
  apart <- do.call(rbind, lapply(parts, function(part) {
    part$oracle$reach <- 0.35
    as.data.frame(community_equilibrium(part))
  }))
  expect_identical(together, apart)
  names(mu) <- names(alpha) <- vapply(parts, function(part) part$members$community[1], "")
  shuffled <- sample(12)
  expect_identical(as.data.frame(equilibrium(st, beliefs(mu[shuffled], alpha[shuffled]),
    share_payoff(reach = 0.35))), together)
})

test_that("the spread of turnout agrees with mvtnorm and pbivnorm", {
  skip_if_not_installed("mvtnorm")
  pair <- function(h, k, r) {
    mvtnorm::pmvnorm(upper = c(h, k), corr = matrix(c(1, r, r, 1), 2), algorithm = mvtnorm::TVPACK(abseps = 1e-14))[1]
  }
  for (seed in c(3, 8, 21, 34)) {
    part <- random_community("here", seed)
    x <- part$oracle
    info <- oracle_information(x)
    truth <- oracle_cutoffs(x, info)$greatest
    eq <- community_equilibrium(part, tolerance = 1e-10)
    expect_lt(abs(as.data.frame(turnout(eq))$sd_greatest - oracle_turnout_sd(x, truth, pair, info = info)), 1e-9)
    given <- as.data.frame(turnout(eq, given = 0.6))
    sd <- oracle_turnout_sd(x, truth, pair, info$rest, info$slope * (0.6 - x$mu), info)
    expect_lt(abs(given$sd_greatest - sd), 1e-8)
    if (requireNamespace("pbivnorm", quietly = TRUE)) {
      other <- oracle_turnout_sd(x, truth, function(h, k, r) pbivnorm::pbivnorm(h, k, r), info = info)
      expect_lt(abs(as.data.frame(turnout(eq))$sd_greatest - other), 1e-8)
    }
  }
})

test_that("plays agree with the analytic values within Monte Carlo error", {
  part <- random_community("here", 5)
  eq <- community_equilibrium(part)
  analytic <- as.data.frame(turnout(eq))
  plays <- as.data.frame(simulate(eq, 40000, seed = 11))
  expect_lt(abs(mean(plays$turnout_greatest) - analytic$turnout_greatest), 5 * analytic$sd_greatest / 200)
  expect_lt(abs(sd(plays$turnout_greatest) - analytic$sd_greatest), 0.02)
  expect_lt(abs(mean(plays$obstacle) - part$oracle$mu), 5 / sqrt(part$oracle$alpha * 40000))
})

test_that("a scenario is worth what solving the edited community says", {
  for (seed in c(2, 9, 17)) {
    part <- random_community("here", seed)
    st <- community_study(part)
    eq <- community_equilibrium(part, st, tolerance = 1e-10)
    sc <- scenario(st, broadcast(precision = 1.5), shift_cost(0.1), shift_benefit(0), set_beliefs(prior_mean = 0.3))
    x <- part$oracle
    x$broadcasts <- c(x$broadcasts, list(list(precision = 1.5, audience = seq_along(x$beta))))
    x$cost <- x$cost + 0.1
    x$mu <- 0.3
    truth <- oracle_turnout(x, oracle_cutoffs(x)$greatest)
    cf <- as.data.frame(counterfactual(eq, sc, draws = 0))
    expect_lt(abs(cf$scenario_greatest[2] - truth), 1e-9)
    expect_lt(abs(cf$difference_greatest[2] - (truth - as.data.frame(eq)$turnout_greatest)), 1e-9)
    expect_true(all(is.na(cf$spread_low)))
    solved <- equilibrium(sc, beliefs(part$oracle$mu, part$oracle$alpha), share_payoff(reach = x$reach),
      tolerance = 1e-10)
    expect_lt(abs(as.data.frame(solved)$turnout_greatest - truth), 1e-9)
  }
})

test_that("forwarding over two exact hops is listening to the second neighbours", {
  path <- data.frame(community = "p", listener = 1:7, speaker = 2:8)
  second <- data.frame(community = "p", listener = 1:6, speaker = 3:8)
  members <- data.frame(community = "p", member = 1:8)
  st <- study(members, path)
  eq <- equilibrium(st, good_beliefs())
  far <- as.data.frame(counterfactual(eq, scenario(st, forward_reports(2)), draws = 0))
  near <- as.data.frame(counterfactual(eq, scenario(st, add_links(second)), draws = 0))
  expect_equal(far$scenario_greatest, near$scenario_greatest, tolerance = 1e-10)
})
