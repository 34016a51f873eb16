# The study of the example, invented: 12 villages of 60 members, each a ring of mutual contacts.
library(folkmote)

members <- data.frame(community = rep(sprintf("village-%02d", 1:12), each = 60), member = rep(1:60, 12))
links <- data.frame(
  community = members$community, listener = members$member, speaker = members$member %% 60 + 1
)
eq <- equilibrium(
  study(members, links, mutual = TRUE),
  beliefs(prior_mean = 0.45, prior_precision = 1, signal_precision = 4, stake_sd = 0.2)
)
seed <- 7
