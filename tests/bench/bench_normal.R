# Speed of R's own normal distribution function on the same kind of numbers as bench_normal.cpp, for the ratio.
#     Rscript bench_normal.R [values] [rounds]
arguments <- as.integer(commandArgs(trailingOnly = TRUE))
n <- if (length(arguments) > 0) arguments[1] else 1000000L
rounds <- if (length(arguments) > 1) arguments[2] else 15L
set.seed(1)
x <- rnorm(n, 0, 2)
u <- runif(n)
median_time <- function(work) median(replicate(rounds, system.time(work())[["elapsed"]])) / n * 1e9
cat(sprintf("R pnorm %8.2f ns per value\n", median_time(function() pnorm(x))))
cat(sprintf("R qnorm %8.2f ns per value\n", median_time(function() qnorm(u))))
if (requireNamespace("pbivnorm", quietly = TRUE)) {
  h <- x[seq_len(n %/% 10)] / 2
  k <- rev(h)
  for (rho in c(-0.9, -0.5, 0.1, 0.5, 0.9, 0.95, 0.99)) {
    time <- median(replicate(3, system.time(pbivnorm::pbivnorm(h, k, rep(rho, length(h))))[["elapsed"]])) / length(h) * 1e9
    cat(sprintf("pbivnorm, rho = %5.2f %8.1f ns per value\n", rho, time))
  }
}
