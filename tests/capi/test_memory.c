/* Out of memory: requests that cannot be met, a small address space, and every single allocation refused in turn.
 * Always FOLKMOTE_OUT_OF_MEMORY and a sentence, never a crash, and the session goes on. */
#define _DEFAULT_SOURCE
#include <stdlib.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <unistd.h>

#include "build_tables.h"
#include "check.h"

int checks_passed = 0;
int checks_failed = 0;

static uint64_t sound_digest;
static char message[FOLKMOTE_MESSAGE_BYTES];

/* ---- Refusing one allocation ---- */

/* The C++ runtime inside the library takes its memory from malloc, and the program's own malloc comes first. */
extern void* __libc_malloc(size_t size);

static _Atomic long allocations;
static _Atomic long refused = -1; /* the number of the allocation that fails; -1: none */

void* malloc(size_t size) {
  const long number = allocations++;
  return number == refused ? NULL : __libc_malloc(size);
}

static void refuse(long number) {
  allocations = 0;
  refused = number;
}

/* ---- Requests that cannot be met ---- */

static void check_too_much(folkmote_status status, const folkmote_table* table) {
  CHECK_STATUS(status, FOLKMOTE_OUT_OF_MEMORY, message);
  CHECK_SAYS(message, "memory");
  CHECK(table == NULL);
  CHECK(session_digest(NULL) == sound_digest);
}

static void test_too_many_draws(void) {
  folkmote_study* study = sound_study();
  folkmote_equilibrium* e = plain_equilibrium(study, 0.4, 1, 2);
  folkmote_scenario* scenario = NULL;
  folkmote_table* table = NULL;
  /* The products of the last three with 2 communities or 5 members pass 2^63 and 2^64. */
  const int64_t draws[] = {INT64_C(1000000000000), INT64_C(1) << 60, INT64_C(3689348814741910324), INT64_C(1) << 62,
                           INT64_MAX};
  folkmote_scenario_create(study, &scenario, NULL);
  for (size_t k = 0; k < sizeof draws / sizeof *draws; ++k) {
    folkmote_status status = folkmote_simulate(e, 0, draws[k], 1, NULL, FOLKMOTE_BY_MEMBER, NULL, &table, message);
    check_too_much(status, table);
    status = folkmote_simulate(e, 0, draws[k], 1, NULL, FOLKMOTE_BY_COMMUNITY, NULL, &table, message);
    check_too_much(status, table);
    status = folkmote_counterfactual(e, scenario, draws[k], 1, NULL, &table, message);
    check_too_much(status, table);
  }
  folkmote_scenario_destroy(scenario);
  folkmote_equilibrium_destroy(e);
  folkmote_study_destroy(study);
}

static void test_endless_columns(void) {
  folkmote_table* table = NULL;
  const double value = 1;
  CHECK(folkmote_table_create(INT64_MAX, &table, NULL) == FOLKMOTE_OK);
  CHECK_STATUS(folkmote_table_add_real(table, "x", &value, message), FOLKMOTE_OUT_OF_MEMORY, message);
  CHECK(folkmote_table_columns(table) == 0);
  folkmote_table_destroy(table);
}

/* ---- A small address space ---- */

static void limit_memory(size_t bytes) {
  const struct rlimit limit = {bytes, bytes};
  CHECK(setrlimit(RLIMIT_AS, &limit) == 0);
}

/* Pair by pair, 20,000 members ask for gigabytes. A method that needs less may solve; then nothing is out of memory. */
static void many_members_in_little_memory(void) {
  folkmote_study* study = unlinked_study(1, 20000);
  folkmote_beliefs* beliefs = plain_beliefs(0.4, 1, 1);
  folkmote_payoff* payoff = plain_payoff();
  folkmote_equilibrium* equilibrium = NULL;
  limit_memory((size_t)256 << 20);
  const folkmote_status status = folkmote_equilibrium_create(study, beliefs, payoff, NULL, &equilibrium, message);
  CHECK(status == FOLKMOTE_OK || status == FOLKMOTE_OUT_OF_MEMORY);
  CHECK((equilibrium != NULL) == (status == FOLKMOTE_OK));
  if (status == FOLKMOTE_OUT_OF_MEMORY) CHECK_SAYS(message, "memory");
  CHECK(session_digest(NULL) == sound_digest);
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_payoff_destroy(payoff);
  folkmote_beliefs_destroy(beliefs);
  folkmote_study_destroy(study);
}

static void draws_in_little_memory(void) {
  limit_memory((size_t)256 << 20);
  test_too_many_draws();
  folkmote_study* study = sound_study();
  folkmote_equilibrium* e = plain_equilibrium(study, 0.4, 1, 2);
  folkmote_table* table = NULL;
  check_too_much(folkmote_simulate(e, 0, 5000000, 1, NULL, FOLKMOTE_BY_MEMBER, NULL, &table, message), table);
  folkmote_equilibrium_destroy(e);
  folkmote_study_destroy(study);
}

/* No room for the stacks of so many threads: the run goes on with those it gets, or says that memory ran out. */
static void threads_in_little_memory(void) {
  folkmote_study* many = unlinked_study(1024, 2);
  folkmote_beliefs* b = plain_beliefs(0.4, 1, 1);
  folkmote_payoff* p = plain_payoff();
  folkmote_options* o = NULL;
  folkmote_equilibrium *alone = NULL, *together = NULL;
  folkmote_options_create(&o, NULL);
  folkmote_options_set(o, FOLKMOTE_THREADS, 1024, NULL);
  limit_memory((size_t)128 << 20);
  const folkmote_status status = folkmote_equilibrium_create(many, b, p, o, &together, message);
  CHECK(status == FOLKMOTE_OK || status == FOLKMOTE_OUT_OF_MEMORY);
  CHECK_STATUS(folkmote_equilibrium_create(many, b, p, NULL, &alone, message), FOLKMOTE_OK, message);
  folkmote_equilibrium_destroy(alone);
  folkmote_equilibrium_destroy(together);
  folkmote_options_destroy(o);
  folkmote_payoff_destroy(p);
  folkmote_beliefs_destroy(b);
  folkmote_study_destroy(many);
}

/* Runs the test in a child, so that the limit ends with it; its counts come back through a pipe. */
static void in_child(void (*test)(void)) {
  int ends[2], counts[2] = {0, 0}, status = 0;
  if (!CHECK(pipe(ends) == 0)) return;
  fflush(stdout);
  const pid_t child = fork();
  if (child == 0) {
    checks_passed = checks_failed = 0;
    test();
    CHECK(folkmote_live_handles() == 0);
    fflush(stdout);
    counts[0] = checks_passed;
    counts[1] = checks_failed;
    _exit(write(ends[1], counts, sizeof counts) == (ssize_t)sizeof counts ? 0 : 1);
  }
  close(ends[1]);
  CHECK(read(ends[0], counts, sizeof counts) == (ssize_t)sizeof counts);
  close(ends[0]);
  CHECK(waitpid(child, &status, 0) == child && WIFEXITED(status) && WEXITSTATUS(status) == 0);
  checks_passed += counts[0];
  checks_failed += counts[1];
}

/* ---- Every allocation in turn ---- */

static folkmote_study* study;
static folkmote_beliefs* beliefs;
static folkmote_payoff* payoff;
static folkmote_options* options;
static folkmote_equilibrium* equilibrium;
static folkmote_scenario* scenario;
static folkmote_table *members, *links, *broadcasts, *gatherings, *communities, *audience;

/* One call each; an output handle goes back through `made` as a table or is destroyed at once. */
static folkmote_status call_add_text(void) {
  const char* const texts[2] = {"a text too long to be kept inside a string object", NULL};
  folkmote_table* table = NULL;
  folkmote_status status = folkmote_table_create(2, &table, message);
  if (status == FOLKMOTE_OK) {
    status = folkmote_table_add_text(table, "a column name too long to be kept inside", texts, message);
    CHECK(folkmote_table_columns(table) == (status == FOLKMOTE_OK));
  }
  folkmote_table_destroy(table);
  return status;
}

static folkmote_status call_study(void) {
  folkmote_study* made = NULL;
  const folkmote_status status =
      folkmote_study_create(members, links, broadcasts, gatherings, communities, 0, &made, message);
  CHECK((made != NULL) == (status == FOLKMOTE_OK));
  folkmote_study_destroy(made);
  return status;
}

static folkmote_status call_bad_study(void) {
  folkmote_study* made = NULL;
  const folkmote_status status = folkmote_study_create(links, NULL, NULL, NULL, NULL, 0, &made, message);
  CHECK(made == NULL);
  return status == FOLKMOTE_BAD_DATA ? FOLKMOTE_OK : status;
}

static folkmote_status call_settings(void) {
  const double values[2] = {0.4, 0.4};
  folkmote_beliefs* made = NULL;
  folkmote_payoff* made_payoff = NULL;
  folkmote_options* made_options = NULL;
  folkmote_status status = folkmote_beliefs_create(&made, message);
  if (status == FOLKMOTE_OK) status = folkmote_beliefs_set(made, FOLKMOTE_PRIOR_MEAN, 2, values, message);
  if (status == FOLKMOTE_OK) status = folkmote_payoff_create(FOLKMOTE_SHARE_PAYOFF, &made_payoff, message);
  if (status == FOLKMOTE_OK) status = folkmote_options_create(&made_options, message);
  folkmote_beliefs_destroy(made);
  folkmote_payoff_destroy(made_payoff);
  folkmote_options_destroy(made_options);
  return status;
}

static folkmote_status call_equilibrium(void) {
  folkmote_equilibrium* made = NULL;
  const folkmote_status status = folkmote_equilibrium_create(study, beliefs, payoff, options, &made, message);
  CHECK((made != NULL) == (status == FOLKMOTE_OK));
  folkmote_equilibrium_destroy(made);
  return status;
}

static folkmote_status keep(folkmote_status status, folkmote_table* table) {
  CHECK((table != NULL) == (status == FOLKMOTE_OK));
  folkmote_table_destroy(table);
  return status;
}

static folkmote_status call_summary(void) {
  folkmote_table* table = NULL;
  const folkmote_status status = folkmote_study_summary(study, &table, message);
  return keep(status, table);
}

static folkmote_status call_table(void) {
  folkmote_table* table = NULL;
  const folkmote_status status = folkmote_equilibrium_table(equilibrium, FOLKMOTE_BY_MEMBER, &table, message);
  return keep(status, table);
}

static folkmote_status call_turnout(void) {
  const double given[2] = {0, 1}, at_least = 0.5;
  folkmote_table* table = NULL;
  const folkmote_status status = folkmote_turnout(equilibrium, 2, given, 1, &at_least, options, &table, message);
  return keep(status, table);
}

static folkmote_status call_plays(void) {
  folkmote_table* table = NULL;
  const folkmote_status status =
      folkmote_simulate(equilibrium, 0, 3, 1, NULL, FOLKMOTE_BY_COMMUNITY, options, &table, message);
  return keep(status, table);
}

static folkmote_status call_actions(void) {
  folkmote_table* table = NULL;
  const folkmote_status status =
      folkmote_simulate(equilibrium, 0, 3, 1, NULL, FOLKMOTE_BY_MEMBER, options, &table, message);
  return keep(status, table);
}

static folkmote_status call_sensitivity(void) {
  folkmote_table* table = NULL;
  const folkmote_status status =
      folkmote_sensitivity(equilibrium, 0, NULL, FOLKMOTE_BY_MEMBER, options, &table, message);
  return keep(status, table);
}

static folkmote_status call_links(void) {
  folkmote_table* table = NULL;
  const folkmote_status status = folkmote_link_sensitivity(equilibrium, options, &table, message);
  return keep(status, table);
}

static folkmote_status call_counterfactual(void) {
  folkmote_table* table = NULL;
  const folkmote_status status = folkmote_counterfactual(equilibrium, scenario, 3, 1, options, &table, message);
  return keep(status, table);
}

/* Edit number `edit` of a scenario. */
static folkmote_status apply(int edit, folkmote_scenario* to) {
  const double two = 2;
  switch (edit) {
    case 0:
      return folkmote_scenario_cut_links(to, links, 0, message);
    case 1:
      return folkmote_scenario_add_links(to, links, 0, message);
    case 2:
      return folkmote_scenario_thin_links(to, 0.5, 1, message);
    case 3:
      return folkmote_scenario_broadcast(to, audience, 1, message);
    case 4:
      return folkmote_scenario_gathering(to, audience, message);
    case 5:
      return folkmote_scenario_shift_cost(to, audience, 0.1, message);
    case 6:
      return folkmote_scenario_set_beliefs(to, FOLKMOTE_STAKE_SD, 1, &two, message);
    default:
      return folkmote_scenario_forward_reports(to, 2, message);
  }
}

/* An edit that fails leaves the scenario as it was. The digest itself needs memory, which it must get here. */
static folkmote_status call_edits(void) {
  folkmote_scenario* made = NULL;
  folkmote_study* edited = NULL;
  folkmote_status status = folkmote_scenario_create(study, &made, message);
  for (int edit = 0; edit < 8 && status == FOLKMOTE_OK; ++edit) {
    const long stopped = refused, counted = allocations;
    refused = -1;
    const uint64_t before = folkmote_scenario_digest(made);
    allocations = counted;
    refused = stopped;
    status = apply(edit, made);
    if (status == FOLKMOTE_OK) continue;
    refused = -1;
    if (!CHECK(folkmote_scenario_digest(made) == before)) printf("    after edit %d\n", edit);
    refused = stopped;
  }
  if (status == FOLKMOTE_OK) status = folkmote_scenario_study(made, &edited, message);
  folkmote_study_destroy(edited);
  folkmote_scenario_destroy(made);
  return status;
}

/* A digest has no status: out of memory it is 0. */
static folkmote_status call_digests(void) {
  const uint64_t one = folkmote_equilibrium_digest(equilibrium), two = folkmote_scenario_digest(scenario);
  strcpy(message, one != 0 && two != 0 ? "" : "no memory");
  return one != 0 && two != 0 ? FOLKMOTE_OK : FOLKMOTE_OUT_OF_MEMORY;
}

static const struct {
  const char* name;
  folkmote_status (*call)(void);
} calls[] = {{"add text", call_add_text},
             {"study", call_study},
             {"bad study", call_bad_study},
             {"settings", call_settings},
             {"equilibrium", call_equilibrium},
             {"summary", call_summary},
             {"member table", call_table},
             {"turnout", call_turnout},
             {"plays", call_plays},
             {"actions", call_actions},
             {"sensitivity", call_sensitivity},
             {"links", call_links},
             {"edits", call_edits},
             {"counterfactual", call_counterfactual},
             {"digests", call_digests}};

/* Refuses allocation 0, 1, 2, ... of one call until the call no longer reaches the one refused. */
static void refuse_each(const char* name, folkmote_status (*call)(void), int64_t handles) {
  long number = 0;
  for (int more = 1; more && number < 200000; ++number) {
    strcpy(message, "untouched");
    refuse(number);
    const folkmote_status status = call();
    more = allocations > number;
    refuse(-1);
    int passed = CHECK(status == FOLKMOTE_OK || status == FOLKMOTE_OUT_OF_MEMORY);
    if (status == FOLKMOTE_OUT_OF_MEMORY) passed = CHECK_SAYS(message, "memory") && passed;
    if (!more) passed = CHECK(status == FOLKMOTE_OK) && passed;
    passed = CHECK(folkmote_live_handles() == handles) && passed;
    if (!passed) printf("    %s, allocation %ld refused, status %d: %s\n", name, number, (int)status, message);
  }
  /* At least one allocation was there to refuse, or malloc of this program is not the one in use. */
  CHECK(number > 1);
  CHECK(session_digest(NULL) == sound_digest);
}

static void test_every_allocation(int threads) {
  members = build_table(sound_members);
  links = build_table(sound_links);
  broadcasts = build_table(sound_broadcasts);
  gatherings = build_table(sound_gatherings);
  communities = build_table(sound_communities);
  audience = TABLE("community:i 1 1", "member:t a b");
  study = sound_study();
  beliefs = plain_beliefs(0.4, 1, 2);
  payoff = plain_payoff();
  equilibrium = plain_equilibrium(study, 0.4, 1, 2);
  folkmote_scenario_create(study, &scenario, NULL);
  folkmote_options_create(&options, NULL);
  folkmote_options_set(options, FOLKMOTE_THREADS, threads, NULL);
  const int64_t handles = folkmote_live_handles();
  for (size_t k = 0; k < sizeof calls / sizeof *calls; ++k) refuse_each(calls[k].name, calls[k].call, handles);
  folkmote_options_destroy(options);
  folkmote_scenario_destroy(scenario);
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_payoff_destroy(payoff);
  folkmote_beliefs_destroy(beliefs);
  folkmote_study_destroy(study);
  folkmote_table* tables[] = {members, links, broadcasts, gatherings, communities, audience};
  for (int t = 0; t < 6; ++t) folkmote_table_destroy(tables[t]);
}

int main(void) {
  sound_digest = session_digest(NULL);
  CHECK(sound_digest != 0);
  test_endless_columns();
  in_child(draws_in_little_memory);
  in_child(many_members_in_little_memory);
  in_child(threads_in_little_memory);
  test_every_allocation(1);
  test_every_allocation(2);
  CHECK(folkmote_live_handles() == 0);
  CHECK(session_digest(NULL) == sound_digest);
  return check_report("memory");
}
