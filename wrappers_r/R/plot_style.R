# One look for all pictures: rows with labels on the left and one or more lanes, each with its own scale. The
# colours stay apart for colour-blind readers and in grey print; shapes repeat what colours say.

ink <- c(
  text = "#1F2D3A", quiet = "#7C8792", rule = "#DDE2E7", band = "#F4F6F8", settled = "#1F6AA5", split = "#C2571A",
  before = "#7C8792", after = "#1F6AA5"
)

see_through <- function(colour, alpha) grDevices::adjustcolor(colour, alpha.f = alpha)

short_label <- function(labels, most = 24L) {
  labels <- label_text(labels)
  long <- nchar(labels, "width") > most
  labels[long] <- paste0(strtrim(labels[long], most - 3L), "...")
  labels
}

# lanes: list(from, to, range, title, percent); from and to are fractions of the width.
row_chart <- function(labels, lanes, title, subtitle, bold = FALSE) {
  n <- length(labels)
  graphics::plot.new()
  height <- graphics::par("din")[2L] - 0.95 - 0.85
  spacing <- min(if (n <= 6L) 0.5 else 0.34, height / n)
  cex <- max(0.45, min(0.85, spacing / 0.17))
  width <- max(graphics::strwidth(labels, units = "inches", cex = cex, font = if (any(bold)) 2L else 1L), 0.4)
  graphics::par(mai = c(0.85, width + 0.25, 0.95, 0.3), new = TRUE, xpd = NA)
  graphics::plot.new()
  inches <- graphics::par("pin")[2L]
  graphics::plot.window(c(0, 1), c(-inches, 0), xaxs = "i", yaxs = "i")
  y <- -(seq_len(n) - 0.5) * spacing
  bottom <- -n * spacing
  step <- ceiling(0.085 / spacing)
  named <- seq_len(n) %% step == 1L | step == 1L
  lapply(lanes, draw_lane, y = y, bottom = bottom, spacing = spacing)
  graphics::text(-0.08 / graphics::par("pin")[1L], y[named], labels[named],
    adj = c(1, 0.5), cex = cex, col = ink[["text"]], font = ifelse(rep_len(bold, n)[named], 2L, 1L)
  )
  chart_title(title, subtitle)
  list(y = y, bottom = bottom, spacing = spacing, cex = cex, size = max(0.45, min(1.15, spacing / 0.2)))
}

chart_title <- function(title, subtitle) {
  left <- graphics::grconvertX(0.12, "inches", "user")
  top <- function(inches) graphics::grconvertY(graphics::par("din")[2L] - inches, "inches", "user")
  graphics::text(left, top(0.22), title, adj = c(0, 0.5), font = 2L, cex = 1.1, col = ink[["text"]], xpd = NA)
  graphics::text(left, top(0.46), subtitle, adj = c(0, 0.5), cex = 0.82, col = ink[["quiet"]], xpd = NA)
}

draw_lane <- function(lane, y, bottom, spacing) {
  at <- pretty(lane$range, n = max(2L, round(9 * (lane$to - lane$from))))
  at <- at[at >= lane$range[1L] - 1e-9 & at <= lane$range[2L] + 1e-9]
  x <- lane_x(lane, at)
  graphics::rect(lane$from, bottom, lane$to, 0, col = ink[["band"]], border = NA)
  graphics::segments(x, bottom, x, 0, col = ink[["rule"]])
  if (lane$range[1L] < 0 && lane$range[2L] > 0) {
    graphics::segments(lane_x(lane, 0), bottom, lane_x(lane, 0), 0, col = ink[["quiet"]], lwd = 1.4)
  }
  drop <- 0.13
  graphics::text(x, bottom - drop, axis_text(at, lane$percent), cex = 0.75, col = ink[["quiet"]])
  graphics::text(lane$from, 0.12, lane$title, adj = c(0, 0.5), cex = 0.85, font = 2L, col = ink[["text"]])
}

axis_text <- function(at, percent) {
  if (isTRUE(percent)) at <- 100 * at
  text <- format(at, trim = TRUE, drop0trailing = TRUE, big.mark = ",", scientific = FALSE)
  if (isTRUE(percent)) paste0(text, "%") else text
}

lane_x <- function(lane, values) {
  share <- (values - lane$range[1L]) / (lane$range[2L] - lane$range[1L])
  lane$from + (lane$to - lane$from) * share
}

# A key of one or two lines under the rows. Each entry: list(text, draw = function(x, y)).
row_key <- function(chart, entries) {
  wide <- graphics::par("pin")[1L]
  left <- -graphics::par("mai")[2L] / wide + 0.12 / wide
  x <- left
  y <- chart$bottom - 0.45
  for (entry in entries) {
    size <- graphics::strwidth(entry$text, cex = 0.8) + 0.62 / wide
    if (x > left && x + size > 1 + 0.15 / wide) {
      x <- left
      y <- y - 0.2
    }
    entry$draw(x, x + 0.3 / wide, y)
    graphics::text(x + 0.38 / wide, y, entry$text, adj = c(0, 0.5), cex = 0.8, col = ink[["text"]])
    x <- x + size
  }
}

key_line <- function(col, lwd, lty = 1L, pch = NA, bg = NA) {
  force(col)
  function(from, to, y) {
    graphics::segments(from, y, to, y, col = col, lwd = lwd, lty = lty, lend = 1L)
    if (!is.na(pch)) graphics::points((from + to) / 2, y, pch = pch, col = col, bg = bg, cex = 1)
  }
}

key_point <- function(col, pch, bg = NA) {
  force(col)
  function(from, to, y) graphics::points((from + to) / 2, y, pch = pch, col = col, bg = bg, cex = 1, lwd = 1.5)
}

# Marks of a verdict: filled dot, open dot, bar. Where a run has not converged nothing is drawn but these words.
draw_ends <- function(lane, least, greatest, verdict, chart) {
  y <- chart$y
  left <- lane_x(lane, least)
  right <- lane_x(lane, greatest)
  several <- verdict == "several"
  one <- verdict %in% c("proved unique", "bracketed")
  say_open(lane, verdict == "not converged", chart)
  graphics::segments(left[several], y[several], right[several], y[several],
    col = ink[["split"]], lwd = 4 * chart$size, lend = 1L
  )
  graphics::points(c(left[several], right[several]), rep(y[several], 2L),
    pch = 15L, col = ink[["split"]], cex = 0.95 * chart$size
  )
  graphics::points(right[one], y[one],
    pch = 21L, col = ink[["settled"]], cex = chart$size, lwd = 1.5,
    bg = ifelse(verdict[one] == "proved unique", ink[["settled"]], "white")
  )
  value_labels(right[one], y[one], axis_text(round(greatest[one], 3L), lane$percent))
}

say_open <- function(lane, open, chart) {
  if (!any(open)) return(invisible())
  graphics::text(rep(lane$from, sum(open)), chart$y[open], rep("  not converged", sum(open)),
    adj = c(0, 0.5), cex = min(0.75, chart$cex), font = 3L, col = ink[["quiet"]]
  )
}

# Numbers beside the marks, as long as there is room for them.
value_labels <- function(x, y, text) {
  if (length(x) == 0L || length(x) > 15L) return(invisible())
  graphics::text(x, y, text, pos = ifelse(x > 0.9, 2L, 4L), offset = 0.6, cex = 0.75, col = ink[["text"]])
}

verdict_key <- function(verdicts) {
  entries <- list(
    "proved unique" = list(text = "one answer, proved", draw = key_point(ink[["settled"]], 21L, ink[["settled"]])),
    "bracketed" = list(text = "one answer within the tolerance", draw = key_point(ink[["settled"]], 21L, "white")),
    "several" = list(text = "several: least to greatest", draw = key_line(ink[["split"]], 4, pch = 15L))
  )
  entries[names(entries) %in% verdicts]
}

keep_par <- function() {
  graphics::par(no.readonly = TRUE)[c("mai", "xpd", "new", "mfrow", "oma", "cex", "mgp")]
}
