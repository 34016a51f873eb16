# Cutoffs against information held: one point per member, nobody named.

plot_cutoffs <- function(members, verdicts) {
  verdict <- verdicts$verdict[match(label_text(members$community), label_text(verdicts$community))]
  done <- verdict != "not converged"
  graphics::par(mai = c(0.85, 0.85, 0.95, 0.25))
  graphics::plot.new()
  if (!any(done)) {
    chart_title("Cutoffs by information held", "not converged: no cutoffs are drawn")
    return(invisible())
  }
  held <- members$information_held[done]
  cutoffs <- c(members$cutoff_least[done], members$cutoff_greatest[done])
  wide <- min(held) > 0 && max(held) > 30 * min(held)
  graphics::plot.window(padded(held, wide), padded(cutoffs), log = if (wide) "x" else "")
  cutoff_axes(wide)
  alpha <- max(0.15, min(0.85, 150 / sum(done)))
  several <- verdict == "several"
  draw_cutoffs(members, done & !several, ink[["settled"]], alpha)
  draw_intervals(members, several, alpha)
  chart_title("Cutoffs by information held", paste0(verdict_counts(verdicts$verdict), "; a point is a member"))
  present <- intersect(c("proved unique", "several"), ifelse(verdict[done] == "several", "several", "proved unique"))
  words <- c("proved unique" = "blue: one answer", several = "orange: least to greatest")
  graphics::mtext(paste(words[present], collapse = "   "), 3L, line = 0.2, adj = 0, cex = 0.78, col = ink[["quiet"]])
}

padded <- function(values, wide = FALSE) {
  ends <- range(values)
  if (wide) return(ends * c(0.85, 1.18))
  room <- max(diff(ends), 1e-3 * max(abs(ends), 1)) * 0.06
  ends + c(-room, room)
}

cutoff_axes <- function(wide) {
  usr <- graphics::par("usr")
  left <- if (wide) 10^usr[1:2] else usr[1:2]
  graphics::rect(left[1L], usr[3L], left[2L], usr[4L], col = ink[["band"]], border = NA)
  across <- graphics::axTicks(1L)
  up <- graphics::axTicks(2L)
  graphics::abline(h = up, v = across, col = ink[["rule"]])
  graphics::axis(1L, across, axis_text(across, FALSE), tick = FALSE, mgp = c(0, 0.3, 0), col.axis = ink[["quiet"]],
    cex.axis = 0.85)
  graphics::axis(2L, up, axis_text(up, FALSE), tick = FALSE, las = 1L, mgp = c(0, 0.4, 0), col.axis = ink[["quiet"]],
    cex.axis = 0.85)
  graphics::title(xlab = "Information held (precision beside the prior)", ylab = "Cutoff (in units of the obstacle)",
    col.lab = ink[["text"]], mgp = c(2.2, 1, 0))
}

draw_cutoffs <- function(members, some, colour, alpha) {
  graphics::points(members$information_held[some], members$cutoff_greatest[some], pch = 21L, cex = 0.8,
    col = see_through(colour, alpha), bg = see_through(colour, alpha * 0.6))
}

draw_intervals <- function(members, some, alpha) {
  x <- members$information_held[some]
  least <- members$cutoff_least[some]
  greatest <- members$cutoff_greatest[some]
  colour <- see_through(ink[["split"]], alpha)
  graphics::segments(x, least, x, greatest, col = see_through(ink[["split"]], alpha * 0.4), lwd = 1.2)
  graphics::points(c(x, x), c(least, greatest), pch = 15L, cex = 0.65, col = colour)
}
