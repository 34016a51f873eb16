# Links from graphs and matrices. One meaning throughout: an arrow from i to j, or a non-zero entry [i, j], says
# that i listens to j. An undirected graph holds both directions of every contact.

as_links <- function(links, members, mutual) {
  if (is.null(links) || is.data.frame(links)) return(optional_frame(links, "links"))
  if (is_network(links)) {
    return(network_links(list(links), members, one_community(members), mutual))
  }
  if (is.list(links) && length(links) > 0L && all(vapply(links, is_network, NA))) {
    return(network_links(links, members, names_of_networks(links, members), mutual))
  }
  stop_argument("links", paste(
    "a data frame with community, listener and speaker, an igraph graph, an adjacency matrix,",
    "or a list of these named by community"
  ), links)
}

is_network <- function(x) inherits(x, c("igraph", "Matrix", "matrix"))

one_community <- function(members) {
  require_columns(members)
  labels <- unique(members$community)
  if (length(labels) == 1L) return(label_text(labels))
  stop_data(
    "links: one network was given for a study of ", length(labels),
    " communities; give a list of networks named by community."
  )
}

names_of_networks <- function(links, members) {
  require_columns(members)
  labels <- names(links)
  known <- unique(label_text(members$community))
  unnamed <- is.null(labels) || anyNA(labels) || any(!nzchar(labels))
  if (unnamed) stop_data("links: the list of networks must be named by community.")
  fault <- which(!labels %in% known)
  if (length(fault) > 0L) {
    stop_data("links: network ", named_list(labels[fault]),
      ": no member belongs to such a community; correct the name.")
  }
  if (anyDuplicated(labels)) {
    stop_data("links: network '", labels[duplicated(labels)][1L], "' stands twice; give one network per community.")
  }
  labels
}

require_columns <- function(members) {
  for (name in c("community", "member")) {
    if (!name %in% names(members)) {
      stop_data("members: column '", name, "' is missing (", nrow(members), " rows); add it.")
    }
  }
}

network_links <- function(networks, members, labels, mutual) {
  community <- label_text(members$community)
  parts <- lapply(seq_along(networks), function(k) {
    rows <- which(community == labels[k])
    arrows <- network_arrows(networks[[k]], labels[k], length(rows), mutual)
    rows_of <- function(ends) rows[match_vertices(ends, arrows$names, members$member[rows], labels[k])]
    part <- data.frame(
      community = members$community[rep(rows[1L], length(arrows$listener))],
      listener = members$member[rows_of(arrows$listener)],
      speaker = members$member[rows_of(arrows$speaker)]
    )
    part$relay_precision <- arrows$relay_precision
    part
  })
  columns <- unique(lapply(parts, names))
  if (length(columns) > 1L) {
    stop_data(
      "links: some networks carry the edge attribute 'relay_precision' and others do not; ",
      "give it to all or to none."
    )
  }
  do.call(rbind, parts)
}

# Vertices are known by name or, in a network without names, by the order of the members of the community.
match_vertices <- function(ends, names, ids, label) {
  if (is.null(names)) return(ends)
  position <- match(names, label_text(ids))
  fault <- which(is.na(position))
  if (length(fault) > 0L) {
    stop_data(
      "links: network '", label, "', vertex ", named_list(names[fault]),
      ": names an unknown member; add it to members or correct the name."
    )
  }
  position[ends]
}

network_arrows <- function(network, label, size, mutual) {
  arrows <- if (inherits(network, "igraph")) graph_arrows(network, mutual) else matrix_arrows(network, label)
  if (is.null(arrows$names) && arrows$size != size) {
    stop_data(
      "links: network '", label, "' has ", arrows$size, " vertices without names, but the community has ", size,
      " members; name the vertices or give one per member, in the order of members."
    )
  }
  arrows
}

graph_arrows <- function(graph, mutual) {
  need_package("igraph", "an igraph graph")
  ends <- igraph::as_edgelist(graph, names = FALSE)
  relay <- igraph::edge_attr(graph, "relay_precision")
  both <- !igraph::is_directed(graph) && !mutual
  list(
    listener = as.integer(c(ends[, 1L], if (both) ends[, 2L])),
    speaker = as.integer(c(ends[, 2L], if (both) ends[, 1L])),
    relay_precision = if (both && !is.null(relay)) c(relay, relay) else relay,
    names = igraph::vertex_attr(graph, "name"),
    size = igraph::vcount(graph)
  )
}

matrix_arrows <- function(matrix, label) {
  if (nrow(matrix) != ncol(matrix)) {
    stop_data("links: matrix '", label, "' has ", nrow(matrix), " rows and ", ncol(matrix),
      " columns; it must be square.")
  }
  row_names <- rownames(matrix)
  if (!is.null(row_names) && !is.null(colnames(matrix)) && !identical(row_names, colnames(matrix))) {
    stop_data("links: matrix '", label, "' names its rows and its columns differently; give both the same names.")
  }
  entries <- matrix_entries(matrix, label)
  c(entries, list(
    relay_precision = NULL,
    names = if (is.null(row_names)) colnames(matrix) else row_names,
    size = nrow(matrix)
  ))
}

# Non-zero entries, in row order.
matrix_entries <- function(matrix, label) {
  if (inherits(matrix, "Matrix")) {
    need_package("Matrix", "a sparse matrix")
    matrix <- methods::as(methods::as(matrix, "generalMatrix"), "TsparseMatrix")
    i <- matrix@i + 1L
    j <- matrix@j + 1L
    value <- if (methods::.hasSlot(matrix, "x")) matrix@x else rep(TRUE, length(i))
  } else {
    if (!is.numeric(matrix) && !is.logical(matrix)) stop_argument("links",
      "a matrix of numbers or of TRUE and FALSE", matrix)
    at <- which(is.na(matrix) | matrix != 0, arr.ind = TRUE)
    i <- at[, 1L]
    j <- at[, 2L]
    value <- matrix[at]
  }
  if (anyNA(value)) {
    first <- which(is.na(value))[1L]
    stop_data(
      "links: matrix '", label, "', entry [", i[first], ", ", j[first], "] (", sum(is.na(value)),
      " entries): a value is missing; put 0 where there is no link."
    )
  }
  kept <- which(value != 0)
  kept <- kept[order(i[kept], j[kept])]
  list(listener = unname(i[kept]), speaker = unname(j[kept]))
}

need_package <- function(name, what) {
  if (requireNamespace(name, quietly = TRUE)) return(invisible())
  stop(folkmote_condition("folkmote_bad_argument", paste0(
    "'links' is ", what, ", which takes the package ", name,
    "; install it, or give a data frame with community, listener and speaker."
  )))
}

# Ids as text, whole numbers without an exponent.
label_text <- function(ids) {
  if (is.numeric(ids) && !is.factor(ids)) {
    text <- sprintf("%.0f", as.double(ids))
    text[is.na(ids)] <- NA
    return(text)
  }
  as.character(ids)
}

named_list <- function(labels) {
  shown <- paste0("'", utils::head(labels, 5L), "'", collapse = ", ")
  paste0(shown, if (length(labels) > 5L) ", ...", " (", length(labels), " in all)")
}
