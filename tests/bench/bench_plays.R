# The plays of bench_plays.cpp in vectorised R: all normals at once, neighbour sums by a sparse matrix.
#     Rscript bench_plays.R members plays file
suppressPackageStartupMessages(library(Matrix))
arguments <- commandArgs(trailingOnly = TRUE)
n <- as.integer(arguments[1])
plays <- as.integer(arguments[2])
links <- as.matrix(read.table(arguments[3]))
heard <- sparseMatrix(i = links[, 1], j = links[, 2], x = 1, dims = c(n, n))
mu <- 0.45
beta <- 2
sigma <- 0.3
cutoff <- rep(0.5, n) # where it stands does not change the time
block <- 500 # draws at once, within the processor's reach
time <- system.time({
  precision <- 1 + beta * (1 + rowSums(heard))
  turnout <- numeric(0)
  for (first in seq(1, plays, block)) {
    theta <- mu + rnorm(block)
    x <- matrix(rnorm(n * block), n) / sqrt(beta) + rep(theta, each = n)
    index <- (mu + beta * (x + as.matrix(heard %*% x))) / precision + sigma * matrix(rnorm(n * block), n)
    turnout <- c(turnout, colMeans(index <= cutoff))
  }
})
stopifnot(length(turnout) >= plays)
cat(sprintf("R %.4f\n", time[["elapsed"]]))
