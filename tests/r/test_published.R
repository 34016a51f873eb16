# Check values from outside the project.

reference <- function(file) read.csv(file.path(Sys.getenv("FOLKMOTE_REFERENCE"), file))

# Equal members without links: their obstacle is the negative of Morris and Shin's fundamental less one, the
# prior mean mu here answers to theirs at 1 - kappa = kappa' by symmetry: acting iff m <= kappa with gain S - theta
# gives kappa = Phi(sqrt(gamma) (kappa - mu)), the equation of the file with the same mu.
test_that("cutoffs of the linear global game are the published roots", {
  roots <- reference("gg_investment_cutoffs.csv")
  key <- paste(roots$mu, roots$alpha, roots$beta)
  for (one in split(roots, factor(key, unique(key)))) {
    if (one$beta[1] > 1e9) next
    st <- study(data.frame(community = "g", member = 1:40))
    eq <- equilibrium(st, beliefs(one$mu[1], one$alpha[1], one$beta[1]), tolerance = 1e-12)
    found <- as.data.frame(eq, level = "member")
    kappa <- one$kappa_posterior_cutoff
    # At the edge of uniqueness the enclosure ends flat; elsewhere the roots are met closely.
    flat <- abs(max(one$slope_of_rhs_at_root) - 1) < 1e-2
    allowed <- if (flat) 2e-5 else 1e-9
    expect_lt(max(abs(found$cutoff_least - min(kappa))), allowed, label = one$mu[1])
    expect_lt(max(abs(found$cutoff_greatest - max(kappa))), allowed, label = one$mu[1])
    verdict <- as.data.frame(eq)$verdict
    if (!flat) expect_identical(verdict == "several", nrow(one) > 1)
  }
})

test_that("the uniqueness bound is Morris and Shin's condition", {
  bound <- function(alpha, beta) {
    st <- study(data.frame(community = "g", member = 1:50))
    as.data.frame(equilibrium(st, beliefs(0.5, alpha, beta)))$contraction_bound
  }
  gamma <- function(alpha, beta) alpha^2 * (alpha + beta) / (beta * (alpha + 2 * beta))
  # The bound crosses 1 exactly where gamma crosses 2 pi.
  edge <- uniroot(function(alpha) gamma(alpha, 1) - 2 * pi, c(1, 5), tol = 1e-14)$root
  expect_equal(bound(edge, 1), 1, tolerance = 1e-9)
  expect_lt(bound(edge * 0.999, 1), 1)
  expect_gt(bound(edge * 1.001, 1), 1)
})

test_that("without benefit the model is a probit", {
  st <- study(data.frame(community = "g", member = 1:5, cost = c(-0.3, 0, 0.2, 0.5, 1),
    stake_sd = c(0, 0.1, 0.4, 1, 2)))
  eq <- equilibrium(st, beliefs(0.4, 2, 3), share_payoff(benefit = 0))
  found <- as.data.frame(eq, level = "member")
  expect_equal(found$cutoff_greatest, -c(-0.3, 0, 0.2, 0.5, 1), tolerance = 1e-10)
  index_sd <- sqrt(3 / (2 * (2 + 3)) + c(0, 0.1, 0.4, 1, 2)^2)
  expect_equal(found$chance_least, pnorm((found$cutoff_least - 0.4) / index_sd), tolerance = 1e-12)
})
