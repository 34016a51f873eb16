# Writes binormal_libraries.csv: bivariate normal probabilities by two R packages on a fixed grid.
#     Rscript make_binormal_reference.R        (in this folder; needs mvtnorm and pbivnorm)
library(mvtnorm)
library(pbivnorm)

limits <- c(-6, -3.5, -2, -1, -0.25, 0, 0.5, 1.25, 2.5, 4)
correlations <- c(-0.999, -0.95, -0.8, -0.5, -0.2, 0.1, 0.4, 0.75, 0.9, 0.97, 0.999)
grid <- expand.grid(h = limits, k = limits, rho = correlations)
grid <- grid[grid$h <= grid$k, ]

tvpack <- mapply(function(h, k, rho)
  pmvnorm(upper = c(h, k), corr = matrix(c(1, rho, rho, 1), 2), algorithm = TVPACK(abseps = 1e-15))[1],
  grid$h, grid$k, grid$rho)

exact <- function(x) formatC(x, digits = 17, format = "g", width = -1)
out <- data.frame(h = exact(grid$h), k = exact(grid$k), rho = exact(grid$rho), mvtnorm_tvpack = exact(tvpack),
                  pbivnorm = exact(pbivnorm(grid$h, grid$k, grid$rho)),
                  source = sprintf("mvtnorm %s TVPACK; pbivnorm %s; R %s.%s", packageVersion("mvtnorm"),
                                   packageVersion("pbivnorm"), R.version$major, R.version$minor))
write.csv(out, "binormal_libraries.csv", row.names = FALSE, quote = 6)
