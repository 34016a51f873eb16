# Graphs and matrices as links give the study that the edge table gives.

same_study <- function(a, b) {
  expect_identical(as.data.frame(a), as.data.frame(b))
  solve <- function(st) equilibrium(st, beliefs(0.4, 1, 2, relay_precision = 3))
  expect_identical(as.data.frame(solve(a), level = "member"), as.data.frame(solve(b), level = "member"))
  expect_identical(solve(a)$provenance$inputs, solve(b)$provenance$inputs)
}
members <- data.frame(community = "A", member = c(10, 30, 20, 40))
arrows <- data.frame(community = "A", listener = c(10, 10, 20), speaker = c(30, 20, 40))

test_that("a matrix entry [i, j] says that i listens to j", {
  skip_if_not_installed("Matrix")
  a <- matrix(0, 4, 4)
  a[1, 2] <- 1
  a[1, 3] <- -2
  a[3, 4] <- 0.1
  expected <- study(members, arrows)
  same_study(study(members, a), expected)
  same_study(study(members, a != 0), expected)
  sparse <- Matrix::Matrix(a, sparse = TRUE)
  same_study(study(members, sparse), expected)
  same_study(study(members, methods::as(sparse, "TsparseMatrix")), expected)
  same_study(study(members, methods::as(sparse, "RsparseMatrix")), expected)
  same_study(study(members, methods::as(sparse, "nMatrix")), expected)
  same_study(study(members, sparse, mutual = TRUE), study(members, arrows, mutual = TRUE))
  both <- a != 0 | t(a) != 0
  same_study(study(members, Matrix::Matrix(both * 1, sparse = TRUE)), study(members, arrows, mutual = TRUE))
  ordered <- c(4, 2, 1, 3)
  named <- sparse[ordered, ordered]
  dimnames(named) <- rep(list(as.character(members$member[ordered])), 2)
  same_study(study(members, named), expected)
})

test_that("an igraph arrow from i to j says that i listens to j", {
  skip_if_not_installed("igraph")
  expected <- study(members, arrows)
  edges <- cbind(match(arrows$listener, members$member), match(arrows$speaker, members$member))
  graph <- igraph::add_edges(igraph::make_empty_graph(4), t(edges))
  same_study(study(members, graph), expected)
  named <- igraph::graph_from_data_frame(arrows[2:3], vertices = data.frame(name = rev(members$member)))
  same_study(study(members, named), expected)
  mutual <- study(members, arrows, mutual = TRUE)
  same_study(study(members, igraph::as.undirected(named)), mutual)
  same_study(study(members, igraph::as.undirected(named), mutual = TRUE), mutual)
  igraph::E(named)$relay_precision <- c(1, 2, Inf)
  same_study(study(members, named), study(members, cbind(arrows, relay_precision = c(1, 2, Inf))))
})

test_that("a list of networks is named by community", {
  skip_if_not_installed("igraph")
  two <- rbind(members, data.frame(community = "B", member = 1:3))
  links <- rbind(arrows, data.frame(community = "B", listener = c(1, 2, 2, 3), speaker = c(2, 1, 3, 2)))
  a <- matrix(0, 4, 4)
  a[cbind(c(1, 1, 3), c(2, 3, 4))] <- 1
  path <- igraph::make_graph(~ 1 - 2 - 3)
  same_study(study(two, list(B = path, A = a)), study(two, links))
  factored <- transform(two, community = factor(community), member = as.integer(member))
  expect_s3_class(study(factored, list(A = a, B = path))$links$community, "factor")
  expect_type(study(factored, list(A = a, B = path))$links$speaker, "integer")
  expect_error(study(two, a), "2 communities", class = "folkmote_bad_data")
  expect_error(study(two, list(a, path)), "named by community")
  expect_error(study(two, list(A = a, C = path)), "'C'", class = "folkmote_bad_data")
  expect_error(study(two, list(A = a, A = path)), "twice")
  expect_error(study(two, list(A = a[1:3, 1:3])), "3 vertices")
  expect_error(study(two, list(A = a[1:3, ])), "square")
  expect_error(study(two, list(B = igraph::make_graph(~ 1 - 2 - 9))), "'9'", class = "folkmote_bad_data")
  a[2, 2] <- NA
  expect_error(study(two, list(A = a)), "[2, 2]", fixed = TRUE)
  a[2, 2] <- 1
  expect_error(study(two, list(A = a)), "oneself")
  loops <- igraph::make_graph(c(1, 2, 1, 2), n = 3)
  expect_error(study(two, list(B = loops)), "duplicate")
  expect_still_works()
})

test_that("edits take networks too", {
  skip_if_not_installed("igraph")
  st <- study(members, arrows)
  graph <- igraph::make_graph(c(4, 1, 2, 3), n = 4)
  table <- data.frame(community = "A", listener = c(40, 30), speaker = c(10, 20))
  expect_identical(as.data.frame(scenario(st, add_links(graph))), as.data.frame(scenario(st, add_links(table))))
})
