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

st <- study(table_of("members"), table_of("links"), table_of("broadcasts"), table_of("gatherings"),
            table_of("communities"))
eq <- equilibrium(st, beliefs(prior_mean = 0.36, prior_precision = 6.2, signal_precision = 1, stake_sd = 0.15),
                  threads = threads)

# ---- The three questions -----------------------------------------------------------------------------------

scenarios <- list(
  radio = scenario(st, broadcast(members = "all", precision = 2)),
  meeting = scenario(st, gathering(members = "all")),
  `links lost` = scenario(st, thin_links(0.1, seed = 7))
)
ask <- function(edited) as.data.frame(counterfactual(eq, edited, draws = 1000, seed = 7, threads = threads))
answers <- lapply(scenarios, ask)

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
header <- paste(c("question", names(answers[[1L]])), collapse = ",")
writeLines(c(header, unlist(lapply(names(answers), rows_of))), out, sep = "\n")
close(out)

# ---- The picture -------------------------------------------------------------------------------------------

ink <- "#22303C"
quiet <- "#7C8894"
colour <- c(radio = "#2F6DB5", meeting = "#C4501B", `links lost` = "#6B5B95")
caption <- c(radio = "A second radio message", meeting = "A meeting in every village",
             `links lost` = "Every tenth contact lost")
lesson <- c(radio = "lifts low villages, lowers high ones", meeting = "the same, and far more strongly",
            `links lost` = "lowers low villages, lifts high ones")
percent <- function(x) 100 * x

# One dot per village says one answer; a picture of intervals over equilibria would have to look different.
verdicts <- unlist(lapply(answers, `[`, c("baseline_verdict", "scenario_verdict")))
stopifnot(verdicts %in% c("proved unique", "bracketed"))

# The pooled change with its 5 to 95 % range of plays, one line per question.
draw_pooled <- function() {
  first <- do.call(rbind, lapply(answers, function(a) a[1L, ]))
  at <- 3:1
  par(mar = c(4, 14.2, 2.4, 0.8))
  plot(NA, xlim = c(-2, 14), ylim = c(0.6, 3.5), axes = FALSE, xlab = "", ylab = "", xaxs = "i")
  axis(1, seq(-2, 14, 2), c("-2", "0", sprintf("+%d", seq(2L, 14L, 2L))), col = quiet)
  abline(v = 0, col = quiet, lty = 2)
  segments(percent(first$spread_low), at, percent(first$spread_high), at, lwd = 7, lend = 1,
           col = adjustcolor(colour, 0.45))
  points(percent(first$difference_high), at, pch = 21, cex = 2.3, bg = colour, col = "white", lwd = 1.5)
  text(pmax(percent(first$difference_high), 0.9), at + 0.34, sprintf("%+.1f points", percent(first$difference_high)),
       col = colour, font = 2, cex = 1.15)
  levels <- with(first, sprintf("%.0f%% to %.0f%%", percent(baseline_greatest), percent(scenario_greatest)))
  text(percent(first$spread_high) + 0.25, at, levels, adj = c(0, 0.45), col = ink, cex = 1.05)
  axis(2, at, caption, las = 1, tick = FALSE, line = -0.8, cex.axis = 1.15)
  title(xlab = "Change in the share of all growers who hold back (percentage points)", line = 2.3)
  mtext("All villages together", side = 3, at = -2, adj = 0, line = 0.7, font = 2, cex = 0.85)
}

# Every village before and after the change; off the dashed line means change.
draw_villages <- function(q, left) {
  a <- answers[[q]][-1L, ]
  x <- percent(a$baseline_greatest)
  par(mar = c(3.8, if (left) 4.8 else 3.4, 3.8, 0.8))
  plot(NA, xlim = c(0, 100), ylim = c(0, 100), axes = FALSE, xlab = "", ylab = "", xaxs = "i", yaxs = "i")
  segments(0, 0, 100, 100, col = quiet, lty = 2)
  segments(x, pmax(0, x + percent(a$spread_low)), x, pmin(100, x + percent(a$spread_high)), lwd = 1.6,
           col = adjustcolor(colour[[q]], 0.25))
  points(x, percent(a$scenario_greatest), pch = 21, cex = 1.25, bg = colour[[q]], col = "white", lwd = 0.6)
  ticks <- seq(0, 100, 25)
  axis(1, ticks, paste0(ticks, "%"), col = quiet)
  axis(2, ticks, paste0(ticks, "%"), las = 1, col = quiet)
  title(xlab = "Hold back as things are", line = 2.3)
  if (left) title(ylab = "Hold back after the change", line = 3.3)
  mtext(caption[[q]], side = 3, adj = 0, line = 1.8, font = 2, col = colour[[q]], cex = 0.85)
  mtext(lesson[[q]], side = 3, adj = 0, line = 0.6, col = ink, cex = 0.75)
}

draw <- function() {
  png(picture_file, width = 1380, height = 1140, res = 138, type = "cairo", antialias = "gray")
  on.exit(dev.off())
  layout(rbind(c(1, 1, 1), 2:4), heights = c(0.78, 1), widths = c(1.06, 1, 1))
  par(oma = c(1.8, 0.8, 5.2, 1), family = "sans", fg = ink, col.axis = ink, col.lab = ink, cex.lab = 1.1,
      mgp = c(2.3, 0.6, 0), tcl = -0.3)
  draw_pooled()
  for (q in names(answers)) draw_villages(q, q == names(answers)[1L])
  meeting <- answers$meeting[1L, ]
  note <- function(text, ...) mtext(text, outer = TRUE, adj = 0, ...)
  note(sprintf("Village meetings lift holding back from %.0f%% to %.0f%%", percent(meeting$baseline_greatest),
               percent(meeting$scenario_greatest)), line = 2.9, font = 2, cex = 1.5, col = ink)
  note("but where most would hold back already, they lower it: talk pulls villages to the middle", line = 1.2, cex = 1.05,
       col = ink)
  size <- sprintf("%d villages, %s growers", nrow(st$summary), format(nrow(st$members), big.mark = ","))
  note(paste0("Invented study: ", size, ". Dots: expected share, one per village below. ",
              "Bars: 5 to 95 % of 1,000 plays. Dashed: no change."), side = 1, line = 0.6, cex = 0.7, col = quiet)
}
draw()
cat("Results: ", results_file, "\nPicture: ", picture_file, "\n", sep = "")
