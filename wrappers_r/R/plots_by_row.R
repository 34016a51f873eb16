# Pictures with one row per community.

plot.folkmote_study <- function(x, sort = TRUE, ...) plot_listening(x$summary,
  "Who is in the study, and who is heard", sort)

plot.folkmote_scenario <- function(x, sort = TRUE, ...) {
  subtitle <- paste(vapply(x$edits, `[[`, "", "text"), collapse = "; ")
  plot_listening(x$summary, "The study after the edits", sort, subtitle)
}

plot_listening <- function(table, title, sort, subtitle = NULL) {
  old <- keep_par()
  on.exit(graphics::par(old))
  if (one_flag(sort, "sort")) table <- table[order(-table$members, seq_len(nrow(table))), ]
  observed <- any(!is.na(table$turnout_observed))
  ends <- if (observed) c(0.31, 0.36, 0.67, 0.72) else c(0.47, 0.53, 1, NA)
  lanes <- list(
    list(from = 0, to = ends[1L], range = c(0, max(table$members) * 1.04), title = "Members"),
    list(from = ends[2L], to = ends[3L], range = c(0, max(table$hears_most, 1) * 1.04), title = "Each hears"),
    if (observed) list(from = ends[4L], to = 1, range = c(0, 1), title = "Observed turnout", percent = TRUE)
  )
  if (is.null(subtitle)) {
    subtitle <- paste0(
      count_of(nrow(table), "community", "communities"), ", ", count_of(sum(table$members), "member"), ", ",
      count_of(sum(table$links), "link")
    )
  }
  chart <- row_chart(short_label(table$community), Filter(Negate(is.null), lanes), title, subtitle)
  draw_listening(chart, lanes, table, observed)
  row_key(chart, Filter(Negate(is.null), list(
    list(text = "heard on average", draw = key_point(ink[["settled"]], 21L, ink[["settled"]])),
    list(text = "up to the most heard", draw = key_line(ink[["settled"]], 1.5)),
    if (observed) list(text = "acted, of those observed", draw = key_point(ink[["split"]], 18L))
  )))
  invisible()
}

draw_listening <- function(chart, lanes, table, observed) {
  y <- chart$y
  half <- 0.3 * chart$spacing
  graphics::rect(0, y - half, lane_x(lanes[[1L]], table$members), y + half, col = see_through(ink[["quiet"]], 0.55),
    border = NA)
  mean <- lane_x(lanes[[2L]], table$hears_mean)
  graphics::segments(mean, y, lane_x(lanes[[2L]], table$hears_most), y, col = ink[["settled"]], lwd = 1.5)
  graphics::points(mean, y, pch = 21L, bg = ink[["settled"]], col = ink[["settled"]], cex = 0.9 * chart$size)
  if (observed) {
    seen <- !is.na(table$turnout_observed)
    graphics::points(lane_x(lanes[[3L]], table$turnout_observed[seen]), y[seen],
      pch = 18L, col = ink[["split"]], cex = max(0.9, 1.3 * chart$size)
    )
  }
}

plot.folkmote_equilibrium <- function(x, sort = TRUE, what = "turnout", ...) {
  what <- one_choice(what, "what", c("turnout", "cutoffs"))
  old <- keep_par()
  on.exit(graphics::par(old))
  if (what == "cutoffs") {
    plot_cutoffs(as.data.frame(x, level = "member"), verdicts_of(x))
    return(invisible())
  }
  table <- x$communities
  if (one_flag(sort, "sort")) table <- table[order(-table$turnout_greatest, -table$turnout_least), ]
  lane <- list(from = 0, to = 1, range = c(0, 1), title = "Expected share of members who act", percent = TRUE)
  chart <- row_chart(
    short_label(table$community), list(lane), "Expected turnout by community", verdict_counts(table$verdict)
  )
  draw_ends(lane, table$turnout_least, table$turnout_greatest, table$verdict, chart)
  row_key(chart, verdict_key(table$verdict))
  invisible()
}

# Turnout without a given obstacle: the mean with one standard deviation on both sides.
plot_moments <- function(x, verdicts) {
  frame <- plain_frame(x)
  frame <- frame[!duplicated(label_text(frame$community)), ]
  verdict <- verdicts$verdict[match(label_text(frame$community), label_text(verdicts$community))]
  order <- order(-frame$turnout_greatest, -frame$turnout_least)
  frame <- frame[order, ]
  verdict <- verdict[order]
  lane <- list(from = 0, to = 1, range = c(0, 1), title = "Share of members who act", percent = TRUE)
  chart <- row_chart(short_label(frame$community), list(lane), "Turnout by community", verdict_counts(verdict))
  low <- pmax(0, frame$turnout_least - frame$sd_least)
  high <- pmin(1, frame$turnout_greatest + frame$sd_greatest)
  done <- verdict != "not converged"
  graphics::segments(lane_x(lane, low[done]), chart$y[done], lane_x(lane, high[done]), chart$y[done],
    col = see_through(ink[["quiet"]], 0.6), lwd = 2
  )
  draw_ends(lane, frame$turnout_least, frame$turnout_greatest, verdict, chart)
  row_key(chart, c(verdict_key(verdict), list(
    list(text = "one standard deviation", draw = key_line(see_through(ink[["quiet"]], 0.6), 2))
  )))
}

plot.folkmote_counterfactual <- function(x, sort = TRUE, ...) {
  old <- keep_par()
  on.exit(graphics::par(old))
  frame <- plain_frame(x)
  pooled <- which(frame$scope == "pooled")
  rest <- which(frame$scope == "community")
  if (one_flag(sort, "sort")) rest <- rest[order(-frame$difference_high[rest], -frame$difference_low[rest])]
  frame <- frame[c(pooled, rest), ]
  labels <- c("All members", short_label(frame$community[-1L]))
  spread <- if (attr(x, "draws") > 0) c(frame$spread_low, frame$spread_high)
  reach <- range(0, frame$difference_low, frame$difference_high, spread, na.rm = TRUE)
  pad <- max(0.06 * diff(reach), 0.005)
  left <- list(from = 0, to = 0.45, range = c(0, 1), title = "Expected turnout", percent = TRUE)
  right <- list(from = 0.53, to = 1, range = reach + c(-pad, pad), title = "Difference (percentage points)",
    points = TRUE)
  chart <- row_chart(
    labels, list(left, scaled_lane(right)), "What the scenario would change", short_edits(attr(x, "edits")),
    bold = c(TRUE, rep(FALSE, length(rest)))
  )
  draw_before_after(chart, left, frame)
  draw_differences(chart, right, frame, !is.null(spread))
  graphics::segments(0, -chart$spacing, 1, -chart$spacing, col = ink[["quiet"]], lwd = 0.8)
  row_key(chart, counterfactual_key(frame, !is.null(spread)))
  invisible()
}

# The same lane with its scale in percentage points.
scaled_lane <- function(lane) {
  lane$range <- 100 * lane$range
  lane
}

short_edits <- function(edits) {
  text <- if (length(edits) == 0L) "no edit: the baseline itself" else paste(edits, collapse = "; ")
  if (nchar(text) > 90L) paste0(strtrim(text, 87L), "...") else text
}

draw_before_after <- function(chart, lane, frame) {
  y <- chart$y
  open <- weakest(frame) == "not converged"
  nudge <- 0.16 * chart$spacing
  done <- !open
  draw_range(lane, frame$baseline_least[done], frame$baseline_greatest[done], y[done] + nudge, ink[["before"]],
    "white", chart$size)
  draw_range(lane, frame$scenario_least[done], frame$scenario_greatest[done], y[done] - nudge, ink[["after"]],
    ink[["after"]], chart$size)
  say_open(lane, open, chart)
}

draw_range <- function(lane, low, high, y, colour, bg, size) {
  graphics::segments(lane_x(lane, low), y, lane_x(lane, high), y, col = colour, lwd = 2.5 * size, lend = 1L)
  graphics::points(lane_x(lane, c(low, high)), rep(y, 2L), pch = 21L, col = colour, bg = bg, cex = 0.75 * size,
    lwd = 1.3)
}

draw_differences <- function(chart, lane, frame, spread) {
  y <- chart$y
  open <- weakest(frame) == "not converged"
  done <- !open
  if (spread) {
    graphics::segments(lane_x(lane, frame$spread_low[done]), y[done], lane_x(lane, frame$spread_high[done]), y[done],
      col = see_through(ink[["quiet"]], 0.6), lwd = 1.5
    )
  }
  single <- done & frame$difference_high - frame$difference_low < 0.002
  wide <- done & !single
  graphics::segments(lane_x(lane, frame$difference_low[wide]), y[wide], lane_x(lane, frame$difference_high[wide]),
    y[wide],
    col = ink[["split"]], lwd = 5 * chart$size, lend = 1L
  )
  graphics::points(lane_x(lane, frame$difference_high[single]), y[single],
    pch = 23L, col = ink[["text"]], bg = ink[["text"]], cex = 0.9 * chart$size
  )
  say_open(lane, open, chart)
  text <- sprintf("%+.1f", 100 * frame$difference_high[single])
  value_labels(lane_x(lane, frame$difference_high[single]), y[single] + 0.3 * chart$spacing, text)
}

counterfactual_key <- function(frame, spread) {
  several <- any(frame$difference_high - frame$difference_low >= 0.002, na.rm = TRUE)
  Filter(Negate(is.null), list(
    list(text = "baseline", draw = key_point(ink[["before"]], 21L, "white")),
    list(text = "scenario", draw = key_point(ink[["after"]], 21L, ink[["after"]])),
    list(text = "expected difference", draw = key_point(ink[["text"]], 23L, ink[["text"]])),
    if (several) list(text = "difference, over all equilibria", draw = key_line(ink[["split"]], 5)),
    if (spread) list(text = "5-95 % of plays", draw = key_line(see_through(ink[["quiet"]], 0.6), 1.5))
  ))
}
