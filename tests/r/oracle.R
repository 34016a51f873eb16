# An independent, dense solution of the model of one community, written from its definition and not from the kernel:
# what members know comes from the joint normal law of every report, best replies from uniroot().
#
# A community is a list: mu, alpha, and per member beta, sigma, weight, benefit, cost; exact (logical matrix,
# [i, j]: i hears j exactly), relay (matrix, [i, j]: precision of the link by which i hears j, NA where there is none),
# broadcasts (list of list(precision, audience)), reach (0 community .. 1 contacts).

# Every random quantity is independent; reports are sums of them. Returns loadings of the posterior means.
oracle_information <- function(x) {
  n <- length(x$beta)
  heard <- which(!is.na(x$relay) & !x$exact, arr.ind = TRUE)
  heard <- heard[heard[, 1] != heard[, 2] & x$beta[heard[, 2]] > 0, , drop = FALSE]
  noisy <- heard[is.finite(x$relay[heard]), , drop = FALSE]
  sources <- 1 + n + nrow(noisy) + length(x$broadcasts)
  variance <- numeric(sources)
  variance[1] <- 1 / x$alpha
  variance[1 + seq_len(n)] <- ifelse(x$beta > 0, 1 / x$beta, 0)
  if (nrow(noisy) > 0) variance[1 + n + seq_len(nrow(noisy))] <- 1 / x$relay[noisy]
  for (q in seq_along(x$broadcasts)) variance[1 + n + nrow(noisy) + q] <- 1 / x$broadcasts[[q]]$precision
  unit <- function(...) replace(numeric(sources), c(...), 1)
  loadings <- matrix(0, n, sources)
  for (i in seq_len(n)) {
    reports <- if (x$beta[i] > 0) list(unit(1, 1 + i)) else list()
    for (j in setdiff(seq_len(n), i)) {
      if (x$beta[j] == 0) next
      if (x$exact[i, j] || (!is.na(x$relay[i, j]) && is.infinite(x$relay[i, j]))) {
        reports <- c(reports, list(unit(1, 1 + j)))
      } else if (!is.na(x$relay[i, j])) {
        link <- which(noisy[, 1] == i & noisy[, 2] == j)
        reports <- c(reports, list(unit(1, 1 + j, 1 + n + link)))
      }
    }
    for (q in seq_along(x$broadcasts)) {
      if (i %in% x$broadcasts[[q]]$audience) reports <- c(reports, list(unit(1, 1 + n + nrow(noisy) + q)))
    }
    if (length(reports) == 0) next
    held <- do.call(rbind, reports)
    joint <- held %*% (variance * t(held))
    with_obstacle <- held[, 1] * variance[1]
    loadings[i, ] <- solve(joint, with_obstacle) %*% held
  }
  list(
    covariance = loadings %*% (variance * t(loadings)),
    slope = loadings[, 1],
    rest = loadings[, -1, drop = FALSE] %*% (variance[-1] * t(loadings[, -1, drop = FALSE]))
  )
}

oracle_weights <- function(x) {
  n <- length(x$beta)
  share <- function(counts) {
    w <- counts * rep(x$weight, each = n)
    total <- rowSums(w)
    w / ifelse(total > 0, total, 1)
  }
  everyone <- 1 - diag(n)
  contacts <- (x$exact | !is.na(x$relay)) * everyone
  (1 - x$reach) * share(everyone) + x$reach * share(contacts)
}

# Least and greatest cutoffs by monotone best replies from both ends.
oracle_cutoffs <- function(x, info = oracle_information(x), most = 5000) {
  n <- length(x$beta)
  w <- oracle_weights(x)
  total <- diag(info$covariance) + x$sigma^2
  reply <- function(cutoffs, i) {
    others <- which(w[i, ] > 0 & seq_len(n) != i)
    pull <- info$covariance[i, others] / total[i]
    spread <- sqrt(total[others] - info$covariance[i, others]^2 / total[i])
    gain <- function(t) {
      z <- (cutoffs[others] - x$mu - pull * (t - x$mu)) / spread
      x$benefit[i] * sum(w[i, others] * stats::pnorm(z)) - x$cost[i] - t
    }
    ends <- c(-x$cost[i] - 1e-6, x$benefit[i] - x$cost[i] + 1e-6)
    stats::uniroot(gain, ends, tol = 1e-15, maxiter = 10000)$root
  }
  iterate <- function(cutoffs) {
    for (sweep in seq_len(most)) {
      before <- cutoffs
      for (i in seq_len(n)) cutoffs[i] <- reply(cutoffs, i)
      if (max(abs(cutoffs - before)) < 2e-14) break
    }
    cutoffs
  }
  list(least = iterate(-x$cost), greatest = iterate(x$benefit - x$cost))
}

oracle_turnout <- function(x, cutoffs, info = oracle_information(x)) {
  chance <- stats::pnorm((cutoffs - x$mu) / sqrt(diag(info$covariance) + x$sigma^2))
  sum(x$weight * chance) / sum(x$weight)
}

oracle_turnout_given <- function(x, cutoffs, theta, info = oracle_information(x)) {
  sd <- sqrt(diag(info$rest) + x$sigma^2)
  chance <- stats::pnorm((cutoffs - x$mu - info$slope * (theta - x$mu)) / sd)
  sum(x$weight * chance) / sum(x$weight)
}

# Standard deviation of turnout; pair(h, k, r) is the bivariate normal distribution function.
oracle_turnout_sd <- function(x, cutoffs, pair, covariance = NULL, shift = 0, info = oracle_information(x)) {
  if (is.null(covariance)) covariance <- info$covariance
  sd <- sqrt(diag(covariance) + x$sigma^2)
  h <- (cutoffs - x$mu - shift) / sd
  n <- length(h)
  w <- x$weight / sum(x$weight)
  chance <- stats::pnorm(h)
  variance <- 0
  for (i in seq_len(n)) for (j in seq_len(n)) {
    both <- if (i == j) chance[i] else pair(h[i], h[j], covariance[i, j] / (sd[i] * sd[j]))
    variance <- variance + w[i] * w[j] * (both - chance[i] * chance[j])
  }
  sqrt(variance)
}
