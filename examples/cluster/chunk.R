# One chunk of the plays.
#     Rscript chunk.R task tasks draws folder
arguments <- commandArgs(trailingOnly = TRUE)
here <- dirname(sub("^--file=", "", grep("^--file=", commandArgs(), value = TRUE)))
task <- as.integer(arguments[1])
folder <- arguments[4]
source(file.path(here, "study.R"))

indices <- split_draws(as.numeric(arguments[3]), as.integer(arguments[2]))[[task]]
made <- run_chunk(eq, indices, seed, file = file.path(folder, sprintf("part-%04d.chunk", task)))
cat(if (attr(made, "computed")) "computed" else "already there", made, "\n")
