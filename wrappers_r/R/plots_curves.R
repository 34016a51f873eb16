# Curves of turnout given the obstacle, and simulated plays.

plot.folkmote_turnout <- function(x, what = "turnout", ...) {
  what <- one_choice(what, "what", c("turnout", "chance"))
  old <- keep_par()
  on.exit(graphics::par(old))
  verdicts <- attr(x, "verdicts")
  if (what == "chance" && !"at_least" %in% names(x)) {
    stop_argument("what", "\"turnout\": these results hold no chances; call turnout() with 'at_least'", what)
  }
  across <- if ("given" %in% names(x)) "given" else if (what == "chance") "at_least" else NA
  if (is.na(across)) plot_moments(x, verdicts) else plot_curves(plain_frame(x), verdicts, what, across)
  invisible()
}

most_panels <- 9L

plot_curves <- function(frame, verdicts, what, across) {
  at <- match(label_text(frame$community), label_text(verdicts$community))
  if (what == "turnout" && "at_least" %in% names(frame)) {
    first <- !duplicated(data.frame(at, frame[[across]]))
    frame <- frame[first, ]
    at <- at[first]
  }
  parts <- split(frame, at)
  n <- nrow(verdicts)
  title <- if (what == "turnout") "Turnout, given the obstacle" else chance_title(across)
  panels <- if (n <= most_panels) n else 1L
  columns <- ceiling(sqrt(panels))
  graphics::par(mfrow = c(ceiling(panels / columns), columns), oma = c(3.2, 3.4, 4, 0.6),
    mai = c(0.25, 0.3, 0.28, 0.1), cex = 1)
  axes <- list(x = range(frame[[across]]), what = what, across = across)
  if (n <= most_panels) {
    for (k in seq_len(n)) {
      curve_panel(axes, short_label(verdicts$community[k], c(40L, 22L, 16L)[columns]),
        k %% columns == 1L || columns == 1L)
      draw_curve(parts[[k]], axes, verdicts$verdict[k], 1)
    }
  } else {
    curve_panel(axes, "", TRUE)
    for (k in order(-match(verdicts$verdict, verdict_levels))) draw_curve(parts[[k]], axes, verdicts$verdict[k], 0.45)
  }
  curve_frame(title, verdicts, across, what)
}

chance_title <- function(across) {
  paste0("Chance that turnout reaches a share", if (across == "given") ", given the obstacle")
}

curve_panel <- function(axes, label, first) {
  graphics::plot.new()
  graphics::plot.window(axes$x, c(0, 1), yaxs = "i")
  usr <- graphics::par("usr")
  graphics::rect(usr[1L], 0, usr[2L], 1, col = ink[["band"]], border = NA)
  ticks <- pretty(axes$x, n = 5L)
  ticks <- ticks[ticks >= usr[1L] & ticks <= usr[2L]]
  graphics::abline(h = seq(0, 1, 0.25), v = ticks, col = ink[["rule"]])
  below <- axis_text(ticks, axes$across == "at_least")
  graphics::axis(1L, ticks, below, tick = FALSE, mgp = c(0, 0.25, 0), cex.axis = 0.8, col.axis = ink[["quiet"]])
  if (first) {
    shares <- seq(0, 1, 0.25)
    graphics::axis(2L, shares, axis_text(shares, TRUE),
      tick = FALSE, las = 1L, mgp = c(0, 0.35, 0), cex.axis = 0.8, col.axis = ink[["quiet"]]
    )
  }
  graphics::mtext(label, 3L, line = 0.25, adj = 0, cex = 0.85, font = 2L, col = ink[["text"]])
}

draw_curve <- function(part, axes, verdict, alpha) {
  groups <- if (axes$what == "chance" && axes$across == "given") split(part, part$at_least) else list(part)
  for (k in seq_along(groups)) draw_both_ends(groups[[k]], axes, verdict, alpha, k)
}

draw_both_ends <- function(part, axes, verdict, alpha, lty) {
  part <- part[order(part[[axes$across]]), ]
  x <- part[[axes$across]]
  least <- part[[paste0(axes$what, "_least")]]
  greatest <- part[[paste0(axes$what, "_greatest")]]
  if (verdict == "not converged") return(say_no_curve(alpha))
  colour <- if (verdict == "several") ink[["split"]] else ink[["settled"]]
  if (verdict == "several") {
    graphics::polygon(c(x, rev(x)), c(least, rev(greatest)),
      col = see_through(colour, if (alpha < 1) 0.06 else 0.18), border = NA)
    graphics::lines(x, least, col = see_through(colour, alpha), lwd = 1.8, lty = lty)
  }
  graphics::lines(x, greatest, col = see_through(colour, alpha), lwd = 2, lty = lty)
  if (lty > 1L || axes$what == "chance" && axes$across == "given") {
    middle <- which.min(abs(greatest - 0.5))
    graphics::text(x[middle], greatest[middle], paste0(" ", format(100 * part$at_least[1L]), "%"), adj = c(0, 0),
      cex = 0.75, col = colour)
  }
}

say_no_curve <- function(alpha) {
  if (alpha == 1) graphics::text(mean(graphics::par("usr")[1:2]), 0.5, "not converged", font = 3L,
    col = ink[["quiet"]])
}

curve_frame <- function(title, verdicts, across, what) {
  graphics::mtext(title, 3L, outer = TRUE, line = 2.4, adj = 0, font = 2L, cex = 1.1, col = ink[["text"]])
  graphics::mtext(verdict_counts(verdicts$verdict), 3L, outer = TRUE, line = 1.2, adj = 0, cex = 0.82,
    col = ink[["quiet"]])
  present <- verdicts$verdict
  said <- c(
    if (any(present %in% verdict_levels[1:2])) "blue: one answer",
    if (any(present == "several")) "orange band: least to greatest",
    if (any(present == "not converged")) "not converged: no curve is drawn"
  )
  graphics::mtext(paste(said, collapse = "   "), 3L, outer = TRUE, line = 0.2, adj = 0, cex = 0.78,
    col = ink[["quiet"]])
  bottom <- if (across == "given") "Obstacle (larger is harder)" else "Share of members who act, at least"
  graphics::mtext(bottom, 1L, outer = TRUE, line = 1.6, cex = 0.9, col = ink[["text"]])
  side <- if (what == "turnout") "Expected share who act" else "Chance"
  graphics::mtext(side, 2L, outer = TRUE, line = 1.9, cex = 0.9, col = ink[["text"]])
}

plot.folkmote_simulation <- function(x, ...) {
  old <- keep_par()
  on.exit(graphics::par(old))
  verdicts <- attr(x, "verdicts")
  table <- plain_frame(summary(x))
  if (nrow(table) == 1L) plot_plays(plain_frame(x), verdicts) else plot_play_rows(table, verdicts)
  invisible()
}

plot_play_rows <- function(table, verdicts) {
  order <- order(-table$median_greatest, -table$median_least)
  table <- table[order, ]
  verdict <- verdicts$verdict[order]
  lane <- list(from = 0, to = 1, range = c(0, 1), title = "Share of members who act", percent = TRUE)
  subtitle <- paste0(count_of(table$plays[1L], "play"), " of ", verdict_counts(verdict))
  chart <- row_chart(short_label(table$community), list(lane), "Simulated turnout by community", subtitle)
  done <- verdict != "not converged"
  graphics::segments(lane_x(lane, table$spread_low[done]), chart$y[done], lane_x(lane, table$spread_high[done]),
    chart$y[done],
    col = see_through(ink[["quiet"]], 0.6), lwd = 2
  )
  draw_ends(lane, table$median_least, table$median_greatest, verdict, chart)
  row_key(chart, Filter(Negate(is.null), list(
    list(text = "median of the plays", draw = key_point(ink[["settled"]], 21L, ink[["settled"]])),
    list(text = "5-95 % of the plays", draw = key_line(see_through(ink[["quiet"]], 0.6), 2)),
    if (any(verdict == "several")) list(text = "medians, least to greatest",
      draw = key_line(ink[["split"]], 4, pch = 15L))
  )))
}

plot_plays <- function(frame, verdicts) {
  breaks <- seq(0, 1, length.out = 21L)
  if (verdicts$verdict[1L] == "not converged") frame <- frame[0L, ]
  least <- graphics::hist(frame$turnout_least, breaks = breaks, plot = FALSE)$counts
  greatest <- graphics::hist(frame$turnout_greatest, breaks = breaks, plot = FALSE)$counts
  graphics::par(mai = c(0.85, 0.8, 0.95, 0.2))
  graphics::plot.new()
  graphics::plot.window(c(0, 1), c(0, max(least, greatest, 1) * 1.05), yaxs = "i")
  graphics::abline(h = pretty(c(0, max(least, greatest, 1))), col = ink[["rule"]])
  left <- breaks[-length(breaks)]
  bars <- function(counts, col, border) {
    some <- counts > 0L
    graphics::rect(left[some], 0, breaks[-1L][some], counts[some], col = col, border = border)
  }
  bars(greatest, see_through(ink[["settled"]], 0.55), "white")
  if (any(least != greatest)) bars(least, see_through(ink[["split"]], 0.3), ink[["split"]])
  graphics::axis(1L, seq(0, 1, 0.25), paste0(seq(0, 100, 25), "%"), tick = FALSE, mgp = c(0, 0.3, 0),
    col.axis = ink[["quiet"]], cex.axis = 0.85)
  graphics::axis(2L, tick = FALSE, las = 1L, mgp = c(0, 0.4, 0), col.axis = ink[["quiet"]], cex.axis = 0.85)
  graphics::title(xlab = "Share of members who act", ylab = "Plays", col.lab = ink[["text"]], mgp = c(2, 1, 0))
  subtitle <- paste0(count_of(nrow(frame), "play"),
    if (any(least != greatest)) "; blue: greatest equilibrium, orange: least")
  chart_title(paste("Simulated turnout,", short_label(verdicts$community[1L])),
    paste0(subtitle, "; ", verdicts$verdict[1L]))
}
