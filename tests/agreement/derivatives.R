# Prints the digests of the example study's derivatives, as derivatives.c does.
# Usage: Rscript derivatives.R data-folder

library(folkmote)

folder <- commandArgs(trailingOnly = TRUE)[1L]
table_of <- function(name) read.csv(file.path(folder, paste0(name, ".csv")))
st <- study(table_of("members"), table_of("links"), table_of("broadcasts"), table_of("gatherings"),
            table_of("communities"))
eq <- equilibrium(st, beliefs(prior_mean = 0.36, prior_precision = 6.2, signal_precision = 1, stake_sd = 0.15))
digest_of <- function(x) attr(provenance(x), "record")$output
writeLines(c(digest_of(sensitivity(eq)), digest_of(sensitivity(eq, level = "member")), digest_of(sensitivity(eq, "links"))))
