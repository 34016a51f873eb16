# The invented study "holding back the harvest": writes the five tables of data/.
#
# Every village, grower and number here is made up. The world (who phones whom, who heard the radio, who came to
# a meeting, who got a voucher) is drawn by base R; what growers did is one play of the model, drawn by
# folkmote::simulate(), so that the data fit the beliefs that the three programs use.
#
# Usage: Rscript make_data.R [folder]        writes the tables into folder (default: data/ beside this script)

library(folkmote)

world_seed <- 48L
play_seed <- 7
villages <- 48L

# In units of the benefit of a complete hold-out.
cost_at_home <- 0.13
cost_per_km <- 0.008
voucher_worth <- 0.1

phone_precision <- 2
radio_precision <- 1.5

# The beliefs that the study was made with; holdout.R, holdout.c and holdout.ipynb use the same.
growers_believe <- list(prior_mean = 0.36, prior_precision = 6.2, signal_precision = 1, stake_sd = 0.15)

RNGkind("Mersenne-Twister", "Inversion", "Rejection")
set.seed(world_seed)

one_of <- function(x, size, prob = NULL) x[sample.int(length(x), size, prob = prob)]

# Contacts of one village as pairs of growers: kin groups of one to four, and phone contacts where newcomers ring
# those who are rung already (preferential attachment).
kin_pairs <- function(n) {
  group <- rep(seq_len(n), sample(1:4, n, replace = TRUE, prob = c(0.35, 0.35, 0.2, 0.1)))[seq_len(n)]
  group <- group[sample.int(n)]
  pairs <- which(outer(group, group, "==") & upper.tri(diag(n)), arr.ind = TRUE)
  pairs[order(pairs[, 1L], pairs[, 2L]), , drop = FALSE]
}

phone_pairs <- function(n) {
  known <- c(1L, 1L, rep(0L, n - 2L))
  pairs <- list(c(1L, 2L))
  for (newcomer in 3:n) {
    old <- seq_len(newcomer - 1L)
    for (friend in sort(one_of(old, min(length(old), sample(1:2, 1L)), prob = known[old] + 1))) {
      pairs[[length(pairs) + 1L]] <- c(friend, newcomer)
      known[c(friend, newcomer)] <- known[c(friend, newcomer)] + 1L
    }
  }
  do.call(rbind, pairs)
}

# Some follow what a well-known grower says without being heard back.
one_way <- function(n, pairs) {
  known <- tabulate(pairs, n) + 1
  listeners <- sort(one_of(seq_len(n), round(0.7 * n)))
  speakers <- vapply(listeners, function(i) one_of(seq_len(n)[-i], 1L, prob = known[-i]^1.5), 0L)
  cbind(listeners, speakers)
}

# Kin first, so that a pair who are kin and also phone each other is heard exactly and stands once.
village_links <- function(village, n) {
  kin <- kin_pairs(n)
  phone <- phone_pairs(n)
  follow <- one_way(n, rbind(kin, phone))
  links <- data.frame(
    community = village,
    listener = c(kin[, 1L], kin[, 2L], phone[, 1L], phone[, 2L], follow[, 1L]),
    speaker = c(kin[, 2L], kin[, 1L], phone[, 2L], phone[, 1L], follow[, 2L]),
    relay_precision = c(rep(Inf, 2L * nrow(kin)), rep(phone_precision, 2L * nrow(phone) + nrow(follow)))
  )
  links <- links[!duplicated(links[c("listener", "speaker")]), ]
  links[order(links$listener, links$speaker), ]
}

share_of <- function(n, share) sort(one_of(seq_len(n), max(2L, round(n * share))))

communities <- data.frame(
  community = sprintf("V%02d", seq_len(villages)),
  growers = sample(30:160, villages),
  km_to_store = sample(1:14, villages, replace = TRUE),
  saturation = one_of(rep(c(0, 25, 50, 75), length.out = villages), villages),
  radio = one_of(rep(c(1L, 0L), length.out = villages), villages),
  meeting = one_of(rep(c(1L, 0L, 0L), length.out = villages), villages)
)

members <- links <- broadcasts <- gatherings <- NULL
for (v in seq_len(villages)) {
  village <- communities$community[v]
  n <- communities$growers[v]
  voucher <- integer(n)
  if (communities$saturation[v] > 0) voucher[share_of(n, communities$saturation[v] / 100)] <- 1L
  members <- rbind(members, data.frame(
    community = village, member = seq_len(n), voucher = voucher,
    cost = cost_at_home + cost_per_km * communities$km_to_store[v] - voucher_worth * voucher
  ))
  links <- rbind(links, village_links(village, n))
  if (communities$radio[v] == 1L) {
    broadcasts <- rbind(broadcasts, data.frame(
      community = village, broadcast = "radio", member = share_of(n, runif(1L, 0.3, 0.7)), precision = radio_precision
    ))
  }
  if (communities$meeting[v] == 1L) {
    gatherings <- rbind(gatherings, data.frame(
      community = village, gathering = "meeting", member = share_of(n, runif(1L, 0.08, 0.25))
    ))
  }
}

# One play: each village meets one drawn obstacle, and every grower acts on the index that it then holds.
st <- study(members, links, broadcasts, gatherings, communities)
eq <- equilibrium(st, do.call(beliefs, growers_believe))
play <- as.data.frame(simulate(eq, nsim = 1, seed = play_seed, level = "member"))
stopifnot(identical(play$member, members$member))
members$turnout <- play$action_greatest
members$turnout[sort(one_of(seq_len(nrow(members)), round(0.03 * nrow(members))))] <- NA # away on the day

# What each grower holds (MODEL: K_i), and with it the law of the obstacle given the grower's index.
own <- growers_believe$signal_precision
at <- function(table, id) match(paste(table$community, table[[id]]), paste(members$community, members$member))
per_member <- function(rows, values) {
  total <- numeric(nrow(members))
  sums <- rowsum(values, rows)
  total[as.integer(rownames(sums))] <- sums
  total
}
room <- split(at(gatherings, "member"), gatherings$community)
together <- unlist(lapply(room, function(who) outer(who, who, paste)))
by_phone <- !paste(at(links, "listener"), at(links, "speaker")) %in% together
relayed <- 1 / (1 / own + 1 / links$relay_precision)
held <- own + per_member(at(links, "listener")[by_phone], relayed[by_phone]) +
  per_member(at(broadcasts, "member"), broadcasts$precision) +
  per_member(unlist(room), own * rep(lengths(room) - 1, lengths(room)))

# Expected share: the turnout curve averaged over that law, told with a little noise and rounded to twentieths.
steps <- (seq_len(41L) - 21) / 5
weight <- dnorm(steps) / sum(dnorm(steps))
mu <- growers_believe$prior_mean
alpha <- growers_believe$prior_precision
estimate_variance <- held / (alpha * (alpha + held))
index_variance <- estimate_variance + growers_believe$stake_sd^2
theta_mean <- mu + estimate_variance / index_variance * (play$index - mu)
theta_sd <- sqrt(1 / alpha - estimate_variance^2 / index_variance)
grid <- seq(-3, 4, by = 0.05)
curve <- as.data.frame(turnout(eq, given = grid))
expected <- numeric(nrow(members))
for (village in communities$community) {
  rows <- which(members$community == village)
  share <- curve$turnout_greatest[curve$community == village]
  theta <- outer(theta_mean[rows], rep(1, length(steps))) + outer(theta_sd[rows], steps)
  expected[rows] <- matrix(approx(grid, share, theta, rule = 2)$y, length(rows)) %*% weight
}
told <- expected + rnorm(length(expected), sd = 0.05)
members$expected_share <- round(20 * pmin(1, pmax(0, told))) / 20
members$expected_share[sort(one_of(seq_len(nrow(members)), round(0.12 * nrow(members))))] <- NA # did not answer

# Fixed column formats, one line feed per row: the same bytes on every machine.
text_of <- function(values, format) ifelse(is.na(values), "NA", sprintf(format, values))
write_table <- function(folder, name, columns) {
  file <- file(file.path(folder, paste0(name, ".csv")), "wb")
  on.exit(close(file))
  writeLines(c(paste(names(columns), collapse = ","), do.call(paste, c(unname(columns), sep = ","))), file, sep = "\n")
}

script <- sub("^--file=", "", grep("^--file=", commandArgs(), value = TRUE))
asked <- commandArgs(trailingOnly = TRUE)
folder <- if (length(asked) > 0L) asked[1L] else file.path(dirname(script), "data")
dir.create(folder, showWarnings = FALSE, recursive = TRUE)

write_table(folder, "members", with(members, list(
  community = community, member = text_of(member, "%d"), voucher = text_of(voucher, "%d"), cost = text_of(cost, "%.3f"),
  turnout = text_of(turnout, "%d"), expected_share = text_of(expected_share, "%.2f")
)))
write_table(folder, "links", with(links, list(
  community = community, listener = text_of(listener, "%d"), speaker = text_of(speaker, "%d"),
  relay_precision = text_of(relay_precision, "%g")
)))
write_table(folder, "broadcasts", with(broadcasts, list(
  community = community, broadcast = broadcast, member = text_of(member, "%d"), precision = text_of(precision, "%g")
)))
write_table(folder, "gatherings", with(gatherings, list(
  community = community, gathering = gathering, member = text_of(member, "%d")
)))
write_table(folder, "communities", with(communities, list(
  community = community, growers = text_of(growers, "%d"), km_to_store = text_of(km_to_store, "%d"),
  saturation = text_of(saturation, "%d"), radio = text_of(radio, "%d"), meeting = text_of(meeting, "%d")
)))
