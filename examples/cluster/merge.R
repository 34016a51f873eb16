# Merges the chunk files of a folder.
#     Rscript merge.R folder draws
arguments <- commandArgs(trailingOnly = TRUE)
here <- dirname(sub("^--file=", "", grep("^--file=", commandArgs(), value = TRUE)))
source(file.path(here, "study.R"))

plays <- merge_chunks(eq, dir(arguments[1], "[.]chunk$", full.names = TRUE), as.numeric(arguments[2]))
print(summary(plays))
print(provenance(plays))
