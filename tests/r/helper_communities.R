# Random communities with every feature mixed: as tables for the package and as matrices for the oracle.
# testthat reads this file before the tests.

source(file.path(Sys.getenv("FOLKMOTE_R_TESTS"), "oracle.R"), local = TRUE)

random_community <- function(label, seed) {
  set.seed(seed)
  n <- sample(2:11, 1)
  members <- data.frame(
    community = label, member = sample(100, n),
    weight = round(runif(n, 0.5, 3), 2), cost = round(runif(n, -0.2, 0.3), 2), benefit = round(runif(n, 0, 1.5), 2),
    signal_precision = ifelse(runif(n) < 0.2, 0, round(runif(n, 0.5, 6), 2)), stake_sd = round(runif(n, 0.1, 0.5), 2)
  )
  pairs <- subset(expand.grid(listener = 1:n, speaker = 1:n), listener != speaker)
  pairs <- pairs[runif(nrow(pairs)) < 0.3, ]
  relay <- ifelse(runif(nrow(pairs)) < 0.4, Inf, round(runif(nrow(pairs), 0.3, 8), 2))
  links <- data.frame(
    community = rep(label, nrow(pairs)), listener = members$member[pairs$listener],
    speaker = members$member[pairs$speaker], relay_precision = relay
  )
  some <- function(least) sort(sample(n, sample(least:n, 1)))
  gatherings <- if (runif(1) < 0.6) list(some(1), some(min(2, n))) else list()
  broadcasts <- if (runif(1) < 0.6) {
    list(list(precision = round(runif(1, 0.5, 3), 2), audience = some(1)), list(precision = 1.25, audience = some(1)))
  } else {
    list()
  }
  x <- list(
    mu = round(runif(1, 0, 0.8), 2), alpha = round(runif(1, 0.5, 3), 2), beta = members$signal_precision,
    sigma = members$stake_sd, weight = members$weight, benefit = members$benefit, cost = members$cost,
    exact = matrix(FALSE, n, n), relay = matrix(NA_real_, n, n), broadcasts = broadcasts,
    reach = sample(c(0, 1, 0.35), 1)
  )
  x$relay[cbind(pairs$listener, pairs$speaker)] <- relay
  for (g in gatherings) x$exact[g, g] <- TRUE
  diag(x$exact) <- FALSE
  list(
    members = members, links = links, oracle = x,
    gatherings = audience_table(label, members$member, gatherings, "gathering"),
    broadcasts = broadcast_table(label, members$member, broadcasts)
  )
}

audience_table <- function(label, ids, audiences, name) {
  table <- data.frame(
    community = rep(label, sum(lengths(audiences))), id = rep(seq_along(audiences), lengths(audiences)),
    member = as.numeric(ids[unlist(audiences)])
  )
  names(table)[2] <- name
  table
}

broadcast_table <- function(label, ids, broadcasts) {
  table <- audience_table(label, ids, lapply(broadcasts, `[[`, "audience"), "broadcast")
  precisions <- vapply(broadcasts, `[[`, 0, "precision")
  table$precision <- precisions[table$broadcast]
  table
}

community_study <- function(part) study(part$members, part$links, part$broadcasts, part$gatherings)

community_equilibrium <- function(part, st = community_study(part), ...) {
  equilibrium(st, beliefs(part$oracle$mu, part$oracle$alpha), share_payoff(reach = part$oracle$reach), ...)
}

# A small study without surprises, to see that the session goes on.
good_members <- function() data.frame(community = rep(c("A", "B"), c(4, 3)), member = c(1:4, 1:3),
  turnout = c(1, 0, NA, 1, 0, 0, 1))
good_links <- function() data.frame(community = c("A", "A", "B"), listener = c(1, 2, 1), speaker = c(2, 3, 3))
good_study <- function() study(good_members(), good_links(), mutual = TRUE)
good_beliefs <- function() beliefs(prior_mean = 0.4, prior_precision = 1, signal_precision = 4, stake_sd = 0.2)
good_equilibrium <- function() equilibrium(good_study(), good_beliefs())

expect_still_works <- function() {
  expect_identical(as.data.frame(good_equilibrium())$verdict, rep("proved unique", 2))
}

live_handles <- function() {
  gc(full = TRUE)
  folkmote:::raw_live_handles()
}
