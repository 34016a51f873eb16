# The whole job on open networks that other packages carry, against the dense oracle.

# Equal members; exact links as a logical matrix.
plain_oracle <- function(exact, mu, alpha, beta, sigma, reach = 0) {
  n <- nrow(exact)
  list(
    mu = mu, alpha = alpha, beta = rep(beta, n), sigma = rep(sigma, n), weight = rep(1, n), benefit = rep(1, n),
    cost = rep(0, n), exact = exact, relay = matrix(NA_real_, n, n), broadcasts = list(), reach = reach
  )
}

test_that("Zachary's karate club, as igraph carries it", {
  skip_if_not_installed("igraph")
  graph <- igraph::make_graph("Zachary")
  members <- data.frame(community = "club", member = seq_len(igraph::vcount(graph)))
  st <- study(members, graph)
  head <- as.data.frame(st)
  expect_identical(head$members, 34L)
  expect_equal(head$links, 2 * 78)
  expect_equal(head$hears_most, 17)
  table <- as.data.frame(igraph::as_edgelist(graph))
  names(table) <- c("listener", "speaker")
  b <- beliefs(prior_mean = 0.4, prior_precision = 1, signal_precision = 2, stake_sd = 0.2)
  eq <- equilibrium(st, b)
  expect_identical(eq$provenance$inputs,
    equilibrium(study(members, cbind(community = "club", table), mutual = TRUE), b)$provenance$inputs)
  x <- plain_oracle(igraph::as_adjacency_matrix(graph, sparse = FALSE) > 0, 0.4, 1, 2, 0.2)
  info <- oracle_information(x)
  truth <- oracle_cutoffs(x, info)
  found <- as.data.frame(eq, level = "member")
  expect_identical(as.data.frame(eq)$verdict, "proved unique")
  expect_lt(max(abs(found$cutoff_least - truth$least)), 1e-9)
  expect_lt(max(abs(found$cutoff_greatest - truth$greatest)), 1e-9)
  expect_lt(abs(as.data.frame(eq)$turnout_least - oracle_turnout(x, truth$least, info)), 1e-9)
  curve <- as.data.frame(turnout(eq, given = seq(-1, 2, 0.5)))
  expect_lt(max(abs(curve$turnout_least - vapply(curve$given, oracle_turnout_given, 0, x = x, cutoffs = truth$least,
    info = info))), 1e-9)
  expect_true(all(diff(curve$turnout_least) < 0))
  # Everyone meets: all hold the same information.
  cf <- as.data.frame(counterfactual(eq, scenario(st, gathering()), draws = 400, seed = 7))
  x$exact <- matrix(TRUE, 34, 34) & !diag(34)
  met <- oracle_turnout(x, oracle_cutoffs(x)$greatest)
  expect_lt(abs(cf$scenario_greatest[2] - met), 1e-9)
  expect_lt(abs(cf$difference_greatest[1] - cf$difference_greatest[2]), 1e-15)
  expect_lt(abs(cf$simulated_greatest[2] - cf$difference_greatest[2]), 5 * cf$standard_error_greatest[2])
})

test_that("friendships of a boarding school, directed, as ggraph carries them", {
  skip_if_not_installed("ggraph")
  box <- new.env()
  data("highschool", package = "ggraph", envir = box)
  links <- subset(box$highschool, year == 1957)
  links <- data.frame(community = "school", listener = links$from, speaker = links$to)
  boys <- sort(unique(c(links$listener, links$speaker)))
  st <- study(data.frame(community = "school", member = boys), links)
  expect_equal(as.data.frame(st)$links, nrow(links))
  eq <- equilibrium(st, beliefs(0.5, 1.5, 1, stake_sd = 0.3), share_payoff(reach = "contacts"))
  n <- length(boys)
  exact <- matrix(FALSE, n, n)
  exact[cbind(match(links$listener, boys), match(links$speaker, boys))] <- TRUE
  x <- plain_oracle(exact, 0.5, 1.5, 1, 0.3, reach = 1)
  truth <- oracle_cutoffs(x)
  found <- as.data.frame(eq, level = "member")
  expect_identical(found$member, boys)
  expect_lt(max(abs(found$cutoff_least - truth$least)), 1e-9)
  expect_lt(max(abs(found$cutoff_greatest - truth$greatest)), 1e-9)
})
