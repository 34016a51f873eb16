# Holding back the harvest: the three questions of README.md, asked in R.
#
# Usage: Rscript holdout.R [results.csv [picture.png]]        HOLDOUT_THREADS sets the number of threads
#
# The study is invented. holdout.c and holdout.ipynb ask the same and write the same bytes.

library(folkmote)

script <- sub("^--file=", "", grep("^--file=", commandArgs(), value = TRUE))
here <- if (length(script) == 1L) dirname(script) else "."
asked <- commandArgs(trailingOnly = TRUE)
results_file <- if (length(asked) > 0L) asked[1L] else "holdout_R.csv"
picture_file <- if (length(asked) > 1L) asked[2L] else "holdout.png"
threads <- as.integer(Sys.getenv("HOLDOUT_THREADS", "2"))

table_of <- function(name) read.csv(file.path(here, "data", paste0(name, ".csv")))

# ---- The study and its baseline ----------------------------------------------------------------------------
# Costs come from the column `cost` of members, relay precisions from links, all else from beliefs().

st <- study(table_of("members"), table_of("links"), table_of("broadcasts"), table_of("gatherings"), table_of("communities"))
eq <- equilibrium(st, beliefs(prior_mean = 0.36, prior_precision = 6.2, signal_precision = 1, stake_sd = 0.15),
                  threads = threads)

# ---- The three questions -----------------------------------------------------------------------------------

scenarios <- list(
  radio = scenario(st, broadcast(members = "all", precision = 2)),
  meeting = scenario(st, gathering(members = "all")),
  `links lost` = scenario(st, thin_links(0.1, seed = 7))
)
answers <- lapply(scenarios, function(s) as.data.frame(counterfactual(eq, s, draws = 1000, seed = 7, threads = threads)))

# ---- What a reader sees ------------------------------------------------------------------------------------

verdict_line <- function(verdicts) {
  counts <- table(factor(verdicts, c("proved unique", "bracketed", "several", "not converged")))
  paste(counts[counts > 0L], names(counts)[counts > 0L], collapse = ", ")
}

cat("Holding back the harvest (an invented study), ", nrow(st$summary), " villages\nVerdicts:\n", sep = "")
cat(sprintf("  %-11s %s\n", "as it is", verdict_line(as.data.frame(eq)$verdict)))
for (q in names(answers)) cat(sprintf("  %-11s %s\n", q, verdict_line(answers[[q]]$scenario_verdict[-1L])))
cat("Share of growers expected to hold back, all villages pooled:\n")
cat(sprintf("  %-11s %8s %8s %10s  %-18s %9s\n", "", "as it is", "then", "difference", "5 to 95 % of plays", "MC error"))
for (q in names(answers)) {
  first <- answers[[q]][1L, ]
  with(first, cat(sprintf("  %-11s %8.3f %8.3f %+10.3f  %+8.3f to %+.3f %9.4f\n", q, baseline_greatest, scenario_greatest,
                          difference_high, spread_low, spread_high, standard_error_greatest)))
  if (first$difference_high - first$difference_low > 5e-4) {
    with(first, cat(sprintf("  %-11s the answer is an interval: %+.3f to %+.3f\n", "", difference_low, difference_high)))
  }
}

# ---- The results, all digits: reading a number back gives the same bits -------------------------------------

cell <- function(values) {
  if (is.double(values)) return(ifelse(is.finite(values), sprintf("%.17g", values), as.character(values)))
  ifelse(is.na(values), "", as.character(values))
}
rows_of <- function(q) do.call(paste, c(list(q), unname(lapply(answers[[q]], cell)), sep = ","))
out <- file(results_file, "wb")
writeLines(c(paste(c("question", names(answers[[1L]])), collapse = ","), unlist(lapply(names(answers), rows_of))), out, sep = "\n")
close(out)

# ---- The picture -------------------------------------------------------------------------------------------

ink <- "#22303C"
quiet <- "#8A97A3"
colour <- c(radio = "#2F6DB5", meeting = "#C4501B", `links lost` = "#6B5B95")
caption <- c(radio = "A second radio message", meeting = "A meeting in every village", `links lost` = "Every tenth contact lost")
percent <- function(x) 100 * x

# Change of the pooled share with its 5 to 95 % range of plays.
draw_pooled <- function() {
  par(mar = c(4.4, 11.8, 2.6, 1.2))
  at <- 3:1
  first <- do.call(rbind, lapply(answers, function(a) a[1L, ]))
  plot(NA, xlim = c(-3, 14.5), ylim = c(0.4, 3.7), axes = FALSE, xlab = "", ylab = "")
  abline(v = 0, col = quiet, lty = 2)
  with(first, segments(percent(spread_low), at, percent(spread_high), at, lwd = 5, col = colour, lend = 1))
  points(percent(first$difference_high), at, pch = 21, cex = 2, bg = colour, col = "white", lwd = 1.5)
  text(percent(first$difference_high), at + 0.32, sprintf("%+.1f points", percent(first$difference_high)), col = colour, font = 2)
  text(first$spread_high * 100 + 0.25, at, sprintf("%.0f%% to %.0f%%", percent(first$baseline_greatest), percent(first$scenario_greatest)),
       adj = c(0, 0.5), col = ink, cex = 0.85)
  axis(1, col = quiet, col.ticks = quiet)
  axis(2, at, caption, las = 1, tick = FALSE, line = -0.6, font = 1)
  title(xlab = "Change in the share who hold back (percentage points)", line = 2.4)
  mtext("All villages together", side = 3, adj = 0, line = 0.6, font = 2)
}

# Every village: share before and after; off the diagonal means change.
draw_villages <- function(q, first_panel) {
  par(mar = c(4.2, if (first_panel) 4.4 else 2.4, 2.6, 0.8))
  a <- answers[[q]][-1L, ]
  x <- percent(a$baseline_greatest)
  y <- percent(a$scenario_greatest)
  plot(NA, xlim = c(0, 100), ylim = c(0, 100), axes = FALSE, xlab = "", ylab = "", asp = 1)
  abline(0, 1, col = quiet, lty = 2)
  segments(x, pmax(0, x + percent(a$spread_low)), x, pmin(100, x + percent(a$spread_high)), col = adjustcolor(colour[[q]], 0.28), lwd = 1.6)
  points(x, y, pch = 21, cex = 0.95, bg = colour[[q]], col = "white", lwd = 0.6)
  axis(1, seq(0, 100, 25), paste0(seq(0, 100, 25), "%"), col = quiet)
  axis(2, seq(0, 100, 25), paste0(seq(0, 100, 25), "%"), las = 1, col = quiet)
  title(xlab = "Hold back as things are", line = 2.4)
  if (first_panel) title(ylab = "Hold back after the change", line = 3.2)
  mtext(caption[[q]], side = 3, adj = 0, line = 0.6, font = 2, col = colour[[q]], cex = 0.85)
}

draw <- function() {
  png(picture_file, width = 1650, height = 1500, res = 170, type = "cairo", antialias = "subpixel")
  on.exit(dev.off())
  layout(rbind(c(1, 1, 1), 2:4), heights = c(0.85, 1), widths = c(1.1, 1, 1))
  par(oma = c(2.2, 0, 4.6, 0), family = "sans", fg = ink, col.axis = ink, col.lab = ink, mgp = c(2.4, 0.7, 0), tcl = -0.3)
  draw_pooled()
  for (q in names(answers)) draw_villages(q, q == names(answers)[1L])
  meeting <- answers$meeting[1L, ]
  mtext(sprintf("Meetings raise the share who hold back from %.0f%% to %.0f%%", percent(meeting$baseline_greatest),
                percent(meeting$scenario_greatest)), outer = TRUE, adj = 0.02, line = 2.5, font = 2, cex = 1.35, col = ink)
  mtext("but they pull villages to the middle: the doubtful rise, the confident fall", outer = TRUE, adj = 0.02,
        line = 0.9, cex = 1, col = ink)
  mtext(paste0("Invented study of ", nrow(st$summary), " villages. Bars: 5 to 95 % of 1,000 plays. Dashed: no change."), side = 1,
        outer = TRUE, adj = 0.02, line = 0.7, cex = 0.7, col = quiet)
}
draw()
cat("Results: ", results_file, "\nPicture: ", picture_file, "\n", sep = "")
