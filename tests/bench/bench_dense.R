# The plain iteration of bench_dense.cpp, in vectorised R.
#     Rscript bench_dense.R members file
arguments <- commandArgs(trailingOnly = TRUE)
n <- as.integer(arguments[1])
links <- as.matrix(read.table(arguments[2]))
mu <- 0.4
alpha <- 1
beta <- 2
sigma <- 0.1
time <- system.time({
  holds <- diag(n)
  holds[links] <- 1
  held <- beta * rowSums(holds)
  p <- alpha + held
  e <- held / (alpha * p) + sigma^2
  covariance <- (outer(held, held) / alpha + beta * tcrossprod(holds)) / outer(p, p)
  rho <- covariance / e
  sd <- sqrt(pmax(outer(e, e, function(a, b) b) - covariance^2 / e, 0))
  diag(sd) <- 1
  solve_from <- function(start) {
    cutoff <- rep(start, n)
    repeat {
      chance <- pnorm((outer(rep(1, n), cutoff - mu) - rho * (cutoff - mu)) / sd)
      diag(chance) <- 0
      reply <- (cutoff + rowSums(chance) / (n - 1)) / 2 # damped: undamped it does not converge here
      moved <- max(abs(reply - cutoff))
      cutoff <- reply
      if (moved <= 1e-11) break
    }
    cutoff
  }
  least <- solve_from(0)
  greatest <- solve_from(1)
})
stopifnot(max(abs(least - greatest)) < 1e-9)
cat(sprintf("R %.4f\n", time[["elapsed"]]))
