# Plays in chunks: any split of the replications, over any engine, merges to the very table of the single run.

split_draws <- function(draws, chunks) {
  draws <- one_whole(draws, "draws", 1, 1e9)
  chunks <- one_whole(chunks, "chunks", 1, draws)
  ends <- floor(draws * seq_len(chunks) / chunks)
  Map(function(first, last) seq(first, last), c(1, ends[-chunks] + 1), ends)
}

run_chunk <- function(eq, indices, seed, scenario = NULL, given = NULL, level = "community", file = NULL,
                      threads = 1) {
  of_class(eq, "eq", "folkmote_equilibrium", "equilibrium()")
  if (!is.null(scenario)) of_class(scenario, "scenario", "folkmote_scenario", "scenario()")
  run <- list(
    first = first_of(indices) - 1, draws = length(indices), seed = given_seed(seed), given = resolve_given(given),
    level = one_choice(level, "level", names(level_code))
  )
  if (!is.null(scenario) && run$level == "member") {
    stop_argument("level", "\"community\" with a scenario: its plays go by community", level)
  }
  if (is.null(file)) return(played_chunk(eq, scenario, run, threads))
  file <- path.expand(one_file(file))
  handle <- equilibrium_handle(eq, threads)
  edited <- if (!is.null(scenario)) scenario_handle(scenario)
  computed <- with_options(
    function(options) {
      raw_chunk_run(handle, edited, run$first, run$draws, run$seed, run$given[1L], run$given[2L],
                    level_code[[run$level]], options, file)
    },
    threads = threads
  )
  structure(file, computed = computed)
}

played_chunk <- function(eq, scenario, run, threads) {
  handle <- equilibrium_handle(eq, threads)
  work <- if (is.null(scenario)) {
    function(options) {
      raw_simulate_within(handle, run$first, run$draws, run$seed, run$given[1L], run$given[2L],
                          level_code[[run$level]], options)
    }
  } else {
    edited <- scenario_handle(scenario)
    function(options) {
      raw_counterfactual_plays(handle, edited, run$first, run$draws, run$seed, run$given[1L], run$given[2L], options)
    }
  }
  plays_result(eq, with_options(work, threads = threads), run$seed)
}

# Chunks of a range of plays into files of a folder, on the workers of the future plan that the caller has set, else
# here; files that are there already are not computed again.
run_chunks <- function(eq, draws, seed, folder, chunks = 10, scenario = NULL, given = NULL, level = "community",
                       threads = 1) {
  split <- split_draws(draws, chunks)
  if (!is.character(folder) || length(folder) != 1L || !dir.exists(folder)) {
    stop_argument("folder", "the path of a folder that exists", folder)
  }
  files <- file.path(normalizePath(folder), chunk_names(split))
  # As values: what a worker is sent must not be looked up where it runs.
  run <- list(eq = eq, seed = seed, scenario = scenario, given = given, level = level, threads = threads)
  parts <- Map(function(indices, file) c(run, list(indices = indices, file = file)), split, files)
  if (requireNamespace("future", quietly = TRUE)) on_futures(parts) else lapply(parts, do_chunk)
  merge_chunks(eq, files, draws)
}

chunk_names <- function(split) {
  last <- max(unlist(lapply(split, max)))
  width <- nchar(plain_number(last))
  number <- function(x) formatC(x, width = width, format = "d", flag = "0")
  vapply(split, function(indices) paste0("draws-", number(min(indices)), "-", number(max(indices)), ".chunk"), "")
}

do_chunk <- function(part) do.call(run_chunk, part)

# One future per chunk; nothing is drawn from R's generator in any of them.
on_futures <- function(parts) {
  running <- lapply(parts, function(part) {
    future::future(do_chunk(part), globals = list(part = part, do_chunk = do_chunk), packages = "folkmote", seed = FALSE)
  })
  lapply(running, future::value)
}

merge_chunks <- function(eq, files, draws) {
  of_class(eq, "eq", "folkmote_equilibrium", "equilibrium()")
  if (!is.character(files) || length(files) == 0L || anyNA(files)) {
    stop_argument("files", "the names of chunk files", files)
  }
  draws <- one_whole(draws, "draws", 1, 1e9)
  paths <- path.expand(files)
  seed <- as.double(chunk_table(paths)$seed[1L])
  plays_result(eq, raw_chunk_merge(paths, 0, draws), seed)
}

chunk_table <- function(files) from_table(raw_chunk_table(path.expand(files)), NULL)

plays_result <- function(eq, table, seed) {
  frame <- from_table(table, eq$study$members)
  paired <- "scenario_least" %in% names(frame)
  result <- result_of(eq, frame, if (paired) "paired_plays" else "simulation", seed = seed)
  attr(result, "level") <- if ("member" %in% names(frame)) "member" else "community"
  attr(result, "seed") <- seed
  result
}

first_of <- function(indices) {
  ok <- is.numeric(indices) && length(indices) > 0L && all(is.finite(indices)) && indices[1L] >= 1 &&
    indices[1L] == floor(indices[1L]) && all(diff(indices) == 1)
  if (!ok) stop_argument("indices", "consecutive whole numbers of replications from 1, such as 101:200", indices)
  as.double(indices[1L])
}

# Chunks that are to be merged need one seed, said beforehand.
given_seed <- function(seed) {
  if (is.null(seed)) stop_argument("seed", "one whole number from 0 to 2^53, the same for every chunk", seed)
  resolve_seed(seed)
}

one_file <- function(file) {
  if (!is.character(file) || length(file) != 1L || is.na(file) || !nzchar(file)) {
    stop_argument("file", "NULL or the name of one file", file)
  }
  file
}
