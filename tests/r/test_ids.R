# Ids go in and come out in the caller's type; rows are never reordered.

ids_of <- function(ids, community = rep("A", length(ids)), links = NULL) {
  st <- study(data.frame(community = community, member = ids), links)
  eq <- equilibrium(st, good_beliefs())
  as.data.frame(eq, level = "member")
}

test_that("every type of id comes back as it was", {
  kinds <- list(
    integer = c(5L, 3L, 100000L), double = c(100000, 2^53, 7), text = c("b", "a", "1e5"), unicode = c("Jos\u00e9",
      "\u0416", "z"),
    factor = factor(c("b", "a", "c"), levels = c("c", "unused", "b", "a")), large = c(-2147483647L, 2147483647L, 0L)
  )
  for (kind in names(kinds)) expect_identical(ids_of(kinds[[kind]])$member, kinds[[kind]], label = kind)
  for (kind in c("integer", "double", "text", "unicode", "factor", "large")) {
    communities <- rep(kinds[[kind]], each = 2)
    expect_identical(ids_of(rep(1:2, 3), communities)$community, communities, label = kind)
  }
})

test_that("latin1 text is the same label as UTF-8", {
  latin <- iconv("Jos\u00e9", "UTF-8", "latin1")
  links <- data.frame(community = "A", listener = "Jos\u00e9", speaker = "b")
  expect_identical(ids_of(c(latin, "b"), links = links)$member, c("Jos\u00e9", "b"))
})

test_that("labels match over types", {
  links <- data.frame(community = factor("A"), listener = c("100000", "7"),
    speaker = factor(c("7", "9007199254740992")))
  text <- ids_of(c(100000, 7, 2^53), links = links)
  numbers <- ids_of(c(100000, 7, 2^53),
    links = data.frame(community = "A", listener = c(100000, 7), speaker = c(7, 2^53)))
  expect_identical(text, numbers)
  expect_identical(ids_of(c("100000", "7", "9007199254740992"), links = links)[-2], numbers[-2])
})

label_pairs <- function(x) paste(x$community, x$member)

test_that("interleaved rows keep their order", {
  members <- data.frame(community = rep(c("B", "A"), 4), member = c(4, 1, 3, 2, 2, 3, 1, 4),
    cost = seq(0, 0.35, 0.05))
  links <- data.frame(community = c("A", "B"), listener = c(4, 1), speaker = c(2, 3))
  eq <- equilibrium(study(members, links), good_beliefs())
  by_member <- as.data.frame(eq, level = "member")
  expect_identical(by_member[c("community", "member")], members[c("community", "member")])
  expect_identical(as.data.frame(eq)$community, c("B", "A"))
  sorted <- order(members$community, members$member)
  apart <- as.data.frame(equilibrium(study(members[sorted, ], links), good_beliefs()), level = "member")
  expect_equal(by_member$cutoff_least[sorted], apart$cutoff_least, tolerance = 1e-9)
  plays <- as.data.frame(simulate(eq, 2, seed = 1, level = "member"))
  expect_true(all(label_pairs(plays) %in% label_pairs(members)))
})

test_that("no id is written with an exponent", {
  st <- study(data.frame(community = 100000, member = c(100000, 200000, 3e6)))
  eq <- equilibrium(st, good_beliefs())
  text <- capture.output(print(eq), print(st), print(turnout(eq)), print(scenario(st, thin_links(0, seed = 1e5))))
  expect_false(any(grepl("e+", text, fixed = TRUE)))
  expect_match(paste(text, collapse = " "), "100000", fixed = TRUE)
})

test_that("tibbles are data frames", {
  skip_if_not_installed("tibble")
  members <- tibble::as_tibble(good_members())
  st <- study(members, tibble::as_tibble(good_links()), mutual = TRUE)
  expect_identical(as.data.frame(st), as.data.frame(good_study()))
  expect_identical(class(st$members), "data.frame")
})
