/* Runs: threads, progress and cancel, shards, lifetimes, arguments of results, and published values. */
#include <math.h>
#include <pthread.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#include "contract.h"

static char message[FOLKMOTE_MESSAGE_BYTES];

/* ---- Threads ---- */

static folkmote_options* options_with_threads(int threads) {
  folkmote_options* options = NULL;
  folkmote_options_create(&options, NULL);
  CHECK_STATUS(folkmote_options_set(options, FOLKMOTE_THREADS, threads, message), FOLKMOTE_OK, message);
  return options;
}

/* Digest of every kind of result of nine communities. */
static uint64_t results_digest(int threads) {
  folkmote_options* options = options_with_threads(threads);
  folkmote_study* study = ring_study(9, 12);
  folkmote_beliefs* beliefs = plain_beliefs(0.4, 1, 2);
  folkmote_payoff* payoff = plain_payoff();
  folkmote_equilibrium* equilibrium = NULL;
  folkmote_scenario* scenario = NULL;
  const double given[2] = {0.1, 0.6}, at_least[2] = {0.25, 0.75};
  folkmote_table* tables[7] = {NULL};
  folkmote_scenario_create(study, &scenario, NULL);
  folkmote_scenario_thin_links(scenario, 0.5, 3, NULL);
  CHECK_STATUS(folkmote_equilibrium_create(study, beliefs, payoff, options, &equilibrium, message), FOLKMOTE_OK,
               message);
  folkmote_equilibrium_table(equilibrium, FOLKMOTE_BY_MEMBER, &tables[0], NULL);
  folkmote_turnout(equilibrium, 2, given, 2, at_least, options, &tables[1], NULL);
  folkmote_simulate(equilibrium, 0, 20, 1, NULL, FOLKMOTE_BY_COMMUNITY, options, &tables[2], NULL);
  folkmote_simulate(equilibrium, 0, 20, 1, given, FOLKMOTE_BY_MEMBER, options, &tables[3], NULL);
  folkmote_counterfactual(equilibrium, scenario, 20, 1, options, &tables[4], NULL);
  folkmote_sensitivity(equilibrium, 0, NULL, FOLKMOTE_BY_MEMBER, options, &tables[5], NULL);
  folkmote_link_sensitivity(equilibrium, options, &tables[6], NULL);
  uint64_t digest = folkmote_equilibrium_digest(equilibrium);
  for (int t = 0; t < 7; ++t) {
    CHECK(tables[t] != NULL);
    digest = digest * UINT64_C(0x9e3779b97f4a7c15) + folkmote_table_digest(tables[t]);
    folkmote_table_destroy(tables[t]);
  }
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_scenario_destroy(scenario);
  folkmote_payoff_destroy(payoff);
  folkmote_beliefs_destroy(beliefs);
  folkmote_study_destroy(study);
  folkmote_options_destroy(options);
  return digest;
}

static void test_threads_change_nothing(void) {
  const uint64_t one = results_digest(1);
  CHECK(results_digest(1) == one);
  CHECK(results_digest(2) == one);
  CHECK(results_digest(8) == one);
}

/* Different handles in different threads at the same time. Threads of POSIX, not of C11: thread sanitizers know no
 * others. */
static void* session_in_thread(void* wrong) {
  for (int k = 0; k < 5; ++k) *(int*)wrong += session_digest(NULL) != sound_digest;
  return NULL;
}

static void test_concurrent_sessions(void) {
  pthread_t threads[4];
  int wrong[4] = {0, 0, 0, 0};
  for (int t = 0; t < 4; ++t) CHECK(pthread_create(&threads[t], NULL, session_in_thread, &wrong[t]) == 0);
  for (int t = 0; t < 4; ++t) {
    pthread_join(threads[t], NULL);
    CHECK(wrong[t] == 0);
  }
}

/* ---- Progress and cancel ---- */

struct watch {
  pthread_t caller;
  int calls, strangers, backwards, cancel_at;
  int64_t done, total;
};

static int watch_progress(int64_t done, int64_t total, void* user) {
  struct watch* watch = user;
  ++watch->calls;
  if (!pthread_equal(pthread_self(), watch->caller)) ++watch->strangers;
  if (done < watch->done || done > total) ++watch->backwards;
  watch->done = done;
  watch->total = total;
  return watch->cancel_at > 0 && watch->calls >= watch->cancel_at;
}

enum run {
  run_equilibrium,
  run_turnout,
  run_simulate,
  run_actions,
  run_sensitivity,
  run_links,
  run_counterfactual,
  run_count
};

static folkmote_status start_equilibrium(const folkmote_study* study, const folkmote_options* options,
                                         const void** made) {
  folkmote_beliefs* beliefs = plain_beliefs(0.4, 1, 2);
  folkmote_payoff* payoff = plain_payoff();
  folkmote_equilibrium* solved = (folkmote_equilibrium*)&solved;
  const folkmote_status status = folkmote_equilibrium_create(study, beliefs, payoff, options, &solved, message);
  folkmote_payoff_destroy(payoff);
  folkmote_beliefs_destroy(beliefs);
  if (status == FOLKMOTE_OK) folkmote_equilibrium_destroy(solved);
  *made = solved;
  return status;
}

static folkmote_status start_table(enum run run, const folkmote_study* study, const folkmote_equilibrium* equilibrium,
                                   const folkmote_options* options, int64_t draws, folkmote_table** table) {
  const int level = run == run_actions ? FOLKMOTE_BY_MEMBER : FOLKMOTE_BY_COMMUNITY;
  if (run == run_turnout) return folkmote_turnout(equilibrium, 0, NULL, 0, NULL, options, table, message);
  if (run == run_sensitivity) return folkmote_sensitivity(equilibrium, 0, NULL, level, options, table, message);
  if (run == run_links) return folkmote_link_sensitivity(equilibrium, options, table, message);
  if (run != run_counterfactual)
    return folkmote_simulate(equilibrium, 0, draws, 1, NULL, level, options, table, message);
  folkmote_scenario* scenario = NULL;
  folkmote_scenario_create(study, &scenario, NULL);
  const folkmote_status status = folkmote_counterfactual(equilibrium, scenario, draws, 1, options, table, message);
  folkmote_scenario_destroy(scenario);
  return status;
}

/* One run of each kind that takes options; what became of the output handle comes back through `made`. */
static folkmote_status start(enum run run, const folkmote_study* study, const folkmote_equilibrium* equilibrium,
                             const folkmote_options* options, int64_t draws, const void** made) {
  if (run == run_equilibrium) return start_equilibrium(study, options, made);
  folkmote_table* table = (folkmote_table*)&table;
  const folkmote_status status = start_table(run, study, equilibrium, options, draws, &table);
  if (status == FOLKMOTE_OK) folkmote_table_destroy(table);
  *made = table;
  return status;
}

static void check_watched(const struct watch* watch) {
  CHECK(watch->calls > 0);
  CHECK(watch->strangers == 0);
  CHECK(watch->backwards == 0);
}

static void test_progress(void) {
  folkmote_study* study = ring_study(5, 10);
  folkmote_equilibrium* equilibrium = plain_equilibrium(study, 0.4, 1, 2);
  for (int threads = 1; threads <= 4; threads += 3) {
    folkmote_options* options = options_with_threads(threads);
    for (int run = 0; run < run_count; ++run) {
      const void* made = NULL;
      struct watch watch = {.caller = pthread_self()};
      folkmote_options_progress(options, watch_progress, &watch, NULL);
      CHECK_STATUS(start((enum run)run, study, equilibrium, options, 10, &made), FOLKMOTE_OK, message);
      /* A counterfactual counts twice: it solves, then plays. */
      if (run == run_counterfactual && watch.backwards == 1) watch.backwards = 0;
      check_watched(&watch);
      CHECK(watch.done == watch.total);
      struct watch cancel = {.caller = pthread_self(), .cancel_at = 1};
      folkmote_options_progress(options, watch_progress, &cancel, NULL);
      CHECK_STATUS(start((enum run)run, study, equilibrium, options, 10, &made), FOLKMOTE_CANCELLED, message);
      CHECK(made == NULL);
      CHECK_SAYS(message, "cancelled");
      check_watched(&cancel);
      CHECK(cancel.calls == 1);
      folkmote_options_progress(options, NULL, NULL, NULL);
      CHECK_STATUS(start((enum run)run, study, equilibrium, options, 10, &made), FOLKMOTE_OK, message);
    }
    folkmote_options_destroy(options);
  }
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_study_destroy(study);
}

/* A run that would take far longer than the test stops within moments of being asked. */
static void test_cancel_in_the_middle(void) {
  folkmote_study* study = ring_study(2, 400);
  folkmote_equilibrium* equilibrium = plain_equilibrium(study, 0.4, 1, 2);
  folkmote_options* options = options_with_threads(2);
  const enum run runs[3] = {run_simulate, run_counterfactual, run_actions};
  const int64_t draws[3] = {4000000, 4000000, 20000};
  for (int k = 0; k < 3; ++k) {
    const void* made = NULL;
    struct watch watch = {.caller = pthread_self(), .cancel_at = 2};
    struct timespec before, after;
    folkmote_options_progress(options, watch_progress, &watch, NULL);
    timespec_get(&before, TIME_UTC);
    CHECK_STATUS(start(runs[k], study, equilibrium, options, draws[k], &made), FOLKMOTE_CANCELLED, message);
    timespec_get(&after, TIME_UTC);
    CHECK(made == NULL);
    CHECK(after.tv_sec - before.tv_sec < 20);
    CHECK(watch.strangers == 0);
  }
  folkmote_options_destroy(options);
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_study_destroy(study);
}

/* ---- Shards ---- */

static void check_same_row(const folkmote_table* whole, int64_t at, const folkmote_table* part, int64_t row,
                           const char* const* reals, const char* const* integers) {
  for (; *reals != NULL; ++reals) CHECK(real_at(whole, *reals, at) == real_at(part, *reals, row));
  for (; *integers != NULL; ++integers) CHECK(integer_at(whole, *integers, at) == integer_at(part, *integers, row));
}

/* Plays 0..9 at once and as 0..3 and 4..9. Rows run community by community, or play by play for members. */
static void test_shards(void) {
  const char* const plays[] = {"obstacle", "turnout_least", "turnout_greatest", NULL};
  const char* const play_ids[] = {"community", "replication", NULL};
  const char* const actions[] = {"index", NULL};
  const char* const action_ids[] = {"community", "member", "replication", "action_least", "action_greatest", NULL};
  enum { communities = 3, size = 4, draws = 10, first = 4 };
  folkmote_study* study = ring_study(communities, size);
  folkmote_equilibrium* equilibrium = plain_equilibrium(study, 0.4, 1, 2);
  for (int level = FOLKMOTE_BY_COMMUNITY; level <= FOLKMOTE_BY_MEMBER; ++level) {
    folkmote_table *whole = NULL, *parts[2] = {NULL, NULL};
    folkmote_simulate(equilibrium, 0, draws, 77, NULL, level, NULL, &whole, NULL);
    folkmote_simulate(equilibrium, 0, first, 77, NULL, level, NULL, &parts[0], NULL);
    folkmote_simulate(equilibrium, first, draws - first, 77, NULL, level, NULL, &parts[1], NULL);
    const int units = level == FOLKMOTE_BY_MEMBER ? communities * size : communities;
    CHECK(folkmote_table_rows(whole) == units * draws);
    for (int play = 0; play < draws; ++play) {
      const int part = play < first ? 0 : 1;
      const int local = play - (part == 1 ? first : 0), length = part == 0 ? first : draws - first;
      for (int unit = 0; unit < units; ++unit) {
        if (level == FOLKMOTE_BY_MEMBER) {
          check_same_row(whole, play * units + unit, parts[part], local * units + unit, actions, action_ids);
        } else {
          check_same_row(whole, unit * draws + play, parts[part], unit * length + local, plays, play_ids);
        }
      }
    }
    CHECK(integer_at(parts[1], "replication", 0) == first + 1);
    folkmote_table_destroy(whole);
    for (int part = 0; part < 2; ++part) folkmote_table_destroy(parts[part]);
  }
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_study_destroy(study);
}

/* ---- Lifetimes ---- */

/* Every input is destroyed, in an unkind order, before its product is used. */
static void test_inputs_may_go(void) {
  folkmote_study* study = sound_study(); /* its tables are gone already */
  folkmote_scenario* scenario = NULL;
  folkmote_table* links = TABLE("community:i 1", "listener:t c", "speaker:t a");
  folkmote_scenario_create(study, &scenario, NULL);
  CHECK_STATUS(folkmote_scenario_add_links(scenario, links, 0, message), FOLKMOTE_OK, message);
  folkmote_table_destroy(links);
  folkmote_equilibrium* equilibrium = plain_equilibrium(study, 0.4, 1, 2); /* so are beliefs and payoff */
  folkmote_study_destroy(study);
  folkmote_table *compared = NULL, *members = NULL;
  CHECK_STATUS(folkmote_counterfactual(equilibrium, scenario, 4, 1, NULL, &compared, message), FOLKMOTE_OK, message);
  folkmote_study* edited = NULL;
  CHECK_STATUS(folkmote_scenario_study(scenario, &edited, message), FOLKMOTE_OK, message);
  folkmote_scenario_destroy(scenario);
  CHECK_STATUS(folkmote_equilibrium_table(equilibrium, FOLKMOTE_BY_MEMBER, &members, message), FOLKMOTE_OK, message);
  folkmote_equilibrium_destroy(equilibrium);
  CHECK(strcmp(text_at(members, "member", 4), "d") == 0);
  CHECK(strcmp(text_at(compared, "scope", 0), "pooled") == 0);
  CHECK(folkmote_live_handles() == 3);
  folkmote_table_destroy(members);
  folkmote_table_destroy(compared);
  folkmote_study_destroy(edited);
}

/* ---- Arguments of results ---- */

#define REFUSED(call) CHECK_STATUS(call, FOLKMOTE_BAD_ARGUMENT, message)

static void test_result_arguments(void) {
  folkmote_study* study = sound_study();
  folkmote_equilibrium* e = plain_equilibrium(study, 0.4, 1, 2);
  folkmote_table* table = NULL;
  const double bad[] = {NAN, INFINITY, -INFINITY}, shares[] = {-0.001, 1.001, NAN};
  for (int k = 0; k < 3; ++k) {
    REFUSED(folkmote_turnout(e, 1, &bad[k], 0, NULL, NULL, &table, message));
    REFUSED(folkmote_turnout(e, 0, NULL, 1, &shares[k], NULL, &table, message));
    REFUSED(folkmote_simulate(e, 0, 1, 1, &bad[k], FOLKMOTE_BY_COMMUNITY, NULL, &table, message));
  }
  REFUSED(folkmote_turnout(e, -1, bad, 0, NULL, NULL, &table, message));
  REFUSED(folkmote_turnout(e, 0, NULL, -1, shares, NULL, &table, message));
  REFUSED(folkmote_equilibrium_table(e, 0, &table, message));
  REFUSED(folkmote_equilibrium_table(e, 3, &table, message));
  REFUSED(folkmote_simulate(e, 0, 1, 1, NULL, 0, NULL, &table, message));
  REFUSED(folkmote_simulate(e, -1, 1, 1, NULL, FOLKMOTE_BY_MEMBER, NULL, &table, message));
  REFUSED(folkmote_simulate(e, 0, 0, 1, NULL, FOLKMOTE_BY_MEMBER, NULL, &table, message));
  REFUSED(folkmote_simulate(e, INT64_MAX, 1, 1, NULL, FOLKMOTE_BY_MEMBER, NULL, &table, message));
  CHECK_STATUS(folkmote_simulate(e, INT64_MAX - 1, 1, UINT64_MAX, NULL, FOLKMOTE_BY_MEMBER, NULL, &table, message),
               FOLKMOTE_OK, message);
  CHECK(integer_at(table, "replication", 0) == INT64_MAX);
  folkmote_table_destroy(table);
  folkmote_equilibrium_destroy(e);
  folkmote_study_destroy(study);
}

static void test_sensitivity_arguments(void) {
  folkmote_study* study = sound_study();
  folkmote_equilibrium* e = plain_equilibrium(study, 0.4, 1, 2);
  folkmote_table* table = NULL;
  const int unknown[] = {0, -1, 6, FOLKMOTE_REACH, 25, 1 << 30}, twice[] = {FOLKMOTE_COST, FOLKMOTE_COST};
  for (size_t k = 0; k < sizeof unknown / sizeof *unknown; ++k) {
    REFUSED(folkmote_sensitivity(e, 1, &unknown[k], FOLKMOTE_BY_COMMUNITY, NULL, &table, message));
    CHECK_SAYS(message, "parameter number");
  }
  REFUSED(folkmote_sensitivity(e, 2, twice, FOLKMOTE_BY_COMMUNITY, NULL, &table, message));
  CHECK_SAYS(message, "cost is asked for twice");
  REFUSED(folkmote_sensitivity(e, -1, twice, FOLKMOTE_BY_COMMUNITY, NULL, &table, message));
  REFUSED(folkmote_sensitivity(e, 0, NULL, 3, NULL, &table, message));
  CHECK(table == NULL);
  /* The order asked for is the order given. */
  const int asked[] = {FOLKMOTE_COST, FOLKMOTE_PRIOR_MEAN};
  CHECK_STATUS(folkmote_sensitivity(e, 2, asked, FOLKMOTE_BY_COMMUNITY, NULL, &table, message), FOLKMOTE_OK, message);
  CHECK(folkmote_table_rows(table) == 4);
  CHECK(strcmp(text_at(table, "parameter", 0), "cost") == 0);
  CHECK(strcmp(text_at(table, "parameter", 3), "prior_mean") == 0);
  CHECK(integer_at(table, "broadcast", 0) == INT64_MIN);
  CHECK(strcmp(text_at(table, "status_greatest", 2), "solved") == 0);
  CHECK(real_at(table, "turnout_greatest", 0) < 0); /* a cost deters */
  folkmote_table_destroy(table);
  /* Five members, three and two: 3 * 2 + 2 * 1 ordered pairs. */
  CHECK_STATUS(folkmote_link_sensitivity(e, NULL, &table, message), FOLKMOTE_OK, message);
  CHECK(folkmote_table_rows(table) == 8);
  folkmote_table_destroy(table);
  folkmote_equilibrium_destroy(e);
  folkmote_study_destroy(study);
}

static void test_conditions(void) {
  folkmote_study* study = sound_study();
  folkmote_equilibrium* e = plain_equilibrium(study, 0.4, 1, 2);
  folkmote_scenario* s = NULL;
  folkmote_table *table = NULL, *given = NULL;
  const double ranges[][2] = {{NAN, 1}, {0, NAN}, {1, 0}, {INFINITY, INFINITY}, {-INFINITY, -INFINITY}, {30, INFINITY}};
  const int level = FOLKMOTE_BY_COMMUNITY;
  const double theta = 0.7;
  folkmote_scenario_create(study, &s, NULL);
  for (int k = 0; k < 6; ++k) {
    const double low = ranges[k][0], high = ranges[k][1];
    REFUSED(folkmote_simulate_within(e, 0, 1, 1, low, high, level, NULL, &table, message));
    REFUSED(folkmote_counterfactual_within(e, s, 2, 1, low, high, NULL, &table, message));
    REFUSED(folkmote_counterfactual_plays(e, s, 0, 1, 1, low, high, NULL, &table, message));
    REFUSED(folkmote_chunk_run(e, NULL, 0, 1, 1, low, high, level, NULL, "chunk", NULL, message));
  }
  REFUSED(folkmote_counterfactual_within(e, s, 1, 1, 0, 1, NULL, &table, message));
  REFUSED(folkmote_counterfactual_plays(e, s, -1, 1, 1, 0, 1, NULL, &table, message));
  REFUSED(folkmote_counterfactual_plays(e, s, 0, 0, 1, 0, 1, NULL, &table, message));
  folkmote_simulate_within(e, 3, 5, 1, theta, theta, level, NULL, &table, message);
  folkmote_simulate(e, 3, 5, 1, &theta, level, NULL, &given, message);
  CHECK(folkmote_table_digest(table) != 0 && folkmote_table_digest(table) == folkmote_table_digest(given));
  folkmote_table_destroy(table);
  folkmote_table_destroy(given);
  folkmote_counterfactual_within(e, s, 4, 1, -INFINITY, INFINITY, NULL, &table, message);
  folkmote_counterfactual(e, s, 4, 1, NULL, &given, message);
  CHECK(folkmote_table_digest(table) != 0 && folkmote_table_digest(table) == folkmote_table_digest(given));
  folkmote_table_destroy(table);
  folkmote_table_destroy(given);
  folkmote_scenario_destroy(s);
  folkmote_equilibrium_destroy(e);
  folkmote_study_destroy(study);
}

static void test_chunks(void) {
  folkmote_study *study = sound_study(), *same = sound_study(), *other = ring_study(2, 3);
  folkmote_equilibrium* e = plain_equilibrium(study, 0.4, 1, 2);
  folkmote_scenario* s = NULL;
  folkmote_table *whole = NULL, *merged = NULL;
  const char* paths[2] = {"contract-b.chunk", "contract-a.chunk"};
  const int level = FOLKMOTE_BY_COMMUNITY;
  int computed = -1;
  folkmote_scenario_create(study, &s, NULL);
  CHECK(folkmote_study_digest(study) != 0 && folkmote_study_digest(study) == folkmote_study_digest(same));
  CHECK(folkmote_study_digest(study) != folkmote_study_digest(other));
  CHECK_STATUS(folkmote_chunk_run(e, NULL, 0, 3, 9, 0, 1, level, NULL, paths[1], &computed, message), FOLKMOTE_OK,
               message);
  CHECK(computed == 1);
  CHECK_STATUS(folkmote_chunk_run(e, NULL, 3, 8, 9, 0, 1, level, NULL, paths[0], NULL, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_chunk_run(e, NULL, 0, 3, 9, 0, 1, level, NULL, paths[1], &computed, message), FOLKMOTE_OK,
               message);
  CHECK(computed == 0);
  CHECK_STATUS(folkmote_chunk_run(e, NULL, 0, 3, 10, 0, 1, level, NULL, paths[1], NULL, message), FOLKMOTE_BAD_FILE,
               message);
  CHECK_STATUS(folkmote_chunk_run(e, NULL, 0, 3, 9, 0, 1, level, NULL, "no/folder/here", NULL, message),
               FOLKMOTE_BAD_FILE, message);
  REFUSED(folkmote_chunk_run(e, s, 0, 3, 9, 0, 1, FOLKMOTE_BY_MEMBER, NULL, paths[1], NULL, message));
  REFUSED(folkmote_chunk_run(e, NULL, 0, 3, 9, 0, 1, 0, NULL, paths[1], NULL, message));
  CHECK_STATUS(folkmote_chunk_merge(2, paths, 0, 11, &merged, message), FOLKMOTE_OK, message);
  folkmote_simulate_within(e, 0, 11, 9, 0, 1, level, NULL, &whole, NULL);
  CHECK(folkmote_table_digest(merged) != 0 && folkmote_table_digest(merged) == folkmote_table_digest(whole));
  folkmote_table_destroy(merged);
  CHECK_STATUS(folkmote_chunk_merge(1, paths, 0, 11, &merged, message), FOLKMOTE_BAD_FILE, message);
  CHECK(merged == NULL);
  REFUSED(folkmote_chunk_merge(0, paths, 0, 11, &merged, message));
  REFUSED(folkmote_chunk_merge(2, paths, -1, 11, &merged, message));
  REFUSED(folkmote_chunk_table(0, paths, &merged, message));
  CHECK_STATUS(folkmote_chunk_table(2, paths, &merged, message), FOLKMOTE_OK, message);
  CHECK(integer_at(merged, "first_draw", 0) == 3 && integer_at(merged, "draws", 0) == 8);
  folkmote_table_destroy(merged);
  folkmote_table_destroy(whole);
  remove(paths[0]);
  remove(paths[1]);
  folkmote_scenario_destroy(s);
  folkmote_equilibrium_destroy(e);
  folkmote_study_destroy(study);
  folkmote_study_destroy(same);
  folkmote_study_destroy(other);
}

static void test_scenario_arguments(void) {
  folkmote_study *study = sound_study(), *other = ring_study(2, 3);
  folkmote_equilibrium* e = plain_equilibrium(study, 0.4, 1, 2);
  folkmote_scenario *s = NULL, *stranger = NULL;
  folkmote_table* table = NULL;
  const double values[3] = {1, 1, 1}, zero = 0;
  folkmote_scenario_create(study, &s, NULL);
  folkmote_scenario_create(other, &stranger, NULL);
  const uint64_t before = folkmote_scenario_digest(s);
  REFUSED(folkmote_counterfactual(e, s, 1, 1, NULL, &table, message));
  REFUSED(folkmote_counterfactual(e, s, -1, 1, NULL, &table, message));
  REFUSED(folkmote_counterfactual(e, stranger, 0, 1, NULL, &table, message));
  CHECK_SAYS(message, "another study");
  const double shares[] = {-1e-9, 1 + 1e-9, NAN}, precisions[] = {0, -1, NAN, INFINITY};
  for (int k = 0; k < 3; ++k) REFUSED(folkmote_scenario_thin_links(s, shares[k], 1, message));
  for (int k = 0; k < 3; ++k) REFUSED(folkmote_scenario_rewire_links(s, shares[k], 1, message));
  for (int k = 0; k < 4; ++k) REFUSED(folkmote_scenario_broadcast(s, NULL, precisions[k], message));
  REFUSED(folkmote_scenario_shift_cost(s, NULL, NAN, message));
  REFUSED(folkmote_scenario_shift_benefit(s, NULL, NAN, message));
  REFUSED(folkmote_scenario_shift_cost(s, NULL, -INFINITY, message));
  REFUSED(folkmote_scenario_forward_reports(s, 0, message));
  REFUSED(folkmote_scenario_forward_reports(s, 65, message));
  REFUSED(folkmote_scenario_set_beliefs(s, FOLKMOTE_COST, 1, values, message));
  REFUSED(folkmote_scenario_set_beliefs(s, FOLKMOTE_SIGNAL_PRECISION, 3, values, message));
  REFUSED(folkmote_scenario_set_beliefs(s, FOLKMOTE_SIGNAL_PRECISION, 0, values, message));
  REFUSED(folkmote_scenario_set_beliefs(s, FOLKMOTE_PRIOR_PRECISION, 1, &zero, message));
  REFUSED(folkmote_scenario_set_beliefs(s, 99, 1, values, message));
  CHECK(folkmote_scenario_digest(s) == before);
  CHECK_STATUS(folkmote_scenario_thin_links(s, 0, 1, message), FOLKMOTE_OK, message);
  CHECK(folkmote_scenario_digest(s) == before);
  CHECK_STATUS(folkmote_scenario_forward_reports(s, 64, message), FOLKMOTE_OK, message);
  CHECK(folkmote_scenario_digest(s) != before);
  folkmote_scenario_destroy(stranger);
  folkmote_scenario_destroy(s);
  folkmote_equilibrium_destroy(e);
  folkmote_study_destroy(other);
  folkmote_study_destroy(study);
}

void test_runs(void) {
  test_threads_change_nothing();
  test_concurrent_sessions();
  test_progress();
  test_cancel_in_the_middle();
  test_shards();
  test_inputs_may_go();
  test_result_arguments();
  test_sensitivity_arguments();
  test_conditions();
  test_chunks();
  test_scenario_arguments();
  CHECK_HEALTHY(0);
}

/* ---- Published values ---- */

/* The linear global game with a normal prior: kappa = Phi(sqrt(gamma) (kappa - mu)), gamma = (alpha^2 / beta)
 * (alpha + beta) / (alpha + 2 beta). The equation is Morris & Shin (2003), "Global games: theory and applications", in
 * Advances in Economics and Econometrics, section 3; its roots were computed with 160 digits. There a member invests
 * above the cutoff when theta - 1 + share is positive, here it acts below the cutoff when share - theta is: with
 * theta -> 1 - theta, mu -> 1 - mu and kappa -> 1 - kappa the equation keeps its form, so that rows carry over as they
 * are. Members without links and of equal weight face that game for every size of the community. */
static const struct published {
  double mu, alpha, beta, least, greatest;
  const char* verdict;
} rows[] = {
    {0, 1, 1, 0.722331260252985, 0.722331260252985, "proved unique"},
    {0.5, 1, 1, 0.5, 0.5, "proved unique"},
    {-1, 1, 4, 0.741882991072854, 0.741882991072854, "proved unique"},
    {2, 3, 10, 0.0861211931943665, 0.0861211931943665, "proved unique"},
    {0.5, 20, 30, 0.171458300790623, 0.828541699209377, "several"},
};

static void test_row(const struct published* row, int size) {
  const double tolerance = 1e-10;
  folkmote_study* study = unlinked_study(1, size);
  folkmote_equilibrium* equilibrium = plain_equilibrium(study, row->mu, row->alpha, row->beta);
  folkmote_table *members = NULL, *communities = NULL;
  folkmote_equilibrium_table(equilibrium, FOLKMOTE_BY_MEMBER, &members, NULL);
  folkmote_equilibrium_table(equilibrium, FOLKMOTE_BY_COMMUNITY, &communities, NULL);
  CHECK(strcmp(text_at(communities, "verdict", 0), row->verdict) == 0);
  for (int i = 0; i < size; ++i) {
    const double least = real_at(members, "cutoff_least", i), greatest = real_at(members, "cutoff_greatest", i);
    CHECK(fabs(least - row->least) <= tolerance);
    CHECK(fabs(greatest - row->greatest) <= tolerance);
    /* Both ends lie outside their equilibrium, up to the digits of the source. */
    CHECK(least <= row->least + 1e-14 && greatest >= row->greatest - 1e-14);
  }
  folkmote_table_destroy(communities);
  folkmote_table_destroy(members);
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_study_destroy(study);
}

void test_published(void) {
  for (size_t k = 0; k < sizeof rows / sizeof *rows; ++k) {
    test_row(&rows[k], 2);
    test_row(&rows[k], 9);
  }
  CHECK_HEALTHY(0);
}
