# Plays through a future plan: set the plan that your machines offer.
#     Rscript future.R folder draws [template of Slurm jobs, for future.batchtools]
arguments <- commandArgs(trailingOnly = TRUE)
here <- dirname(sub("^--file=", "", grep("^--file=", commandArgs(), value = TRUE)))
source(file.path(here, "study.R"))

if (length(arguments) > 2L) {
  future::plan(future.batchtools::batchtools_slurm, template = arguments[3])
} else {
  future::plan(future::multisession, workers = 2)
}
plays <- run_chunks(eq, draws = as.numeric(arguments[2]), seed = seed, folder = arguments[1], chunks = 4)
print(provenance(plays))
