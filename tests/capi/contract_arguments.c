/* Parameters and options against their documented ranges, NULL for every pointer, and the message buffer. */
#include <float.h>
#include <math.h>
#include <stdlib.h>

#include "contract.h"

static char message[FOLKMOTE_MESSAGE_BYTES];

/* ---- Parameters ---- */

/* The header's ranges, once more. `finest`: 1 one value, 2 per community, 3 per member. */
static const struct parameter {
  int number;
  const char* name;
  double low, high;
  int low_open, high_open;
  int finest;
} parameters[] = {
    {FOLKMOTE_PRIOR_MEAN, "prior_mean", -INFINITY, INFINITY, 1, 1, 2},
    {FOLKMOTE_PRIOR_PRECISION, "prior_precision", 0, INFINITY, 1, 1, 2},
    {FOLKMOTE_SIGNAL_PRECISION, "signal_precision", 0, INFINITY, 0, 1, 3},
    {FOLKMOTE_RELAY_PRECISION, "relay_precision", 0, INFINITY, 1, 0, 3},
    {FOLKMOTE_STAKE_SD, "stake_sd", 0, INFINITY, 0, 1, 3},
    {FOLKMOTE_BENEFIT, "benefit", 0, INFINITY, 0, 1, 3},
    {FOLKMOTE_COST, "cost", -INFINITY, INFINITY, 1, 1, 3},
    {FOLKMOTE_REACH, "reach", 0, 1, 0, 0, 1},
};
enum { parameter_count = sizeof parameters / sizeof *parameters };

static folkmote_beliefs* beliefs;
static folkmote_payoff* payoff;

static folkmote_status set_values(int number, int64_t count, const double* values) {
  return number < 16 ? folkmote_beliefs_set(beliefs, number, count, values, message)
                     : folkmote_payoff_set(payoff, number, count, values, message);
}

static void check_set(const struct parameter* p, double value, int accepted) {
  CHECK_STATUS(set_values(p->number, 1, &value), accepted ? FOLKMOTE_OK : FOLKMOTE_BAD_ARGUMENT, message);
  if (!accepted) CHECK_SAYS(message, p->name);
}

/* At each end, just inside and just outside it. */
static void test_ends(const struct parameter* p) {
  double low = 7, high = 7;
  int low_open = 7, high_open = 7;
  CHECK_STATUS(folkmote_parameter_bounds(p->number, &low, &high, &low_open, &high_open, message), FOLKMOTE_OK, message);
  CHECK(low == p->low && high == p->high && low_open == p->low_open && high_open == p->high_open);
  check_set(p, low, !low_open);
  check_set(p, high, !high_open);
  check_set(p, nextafter(low, high), 1);
  check_set(p, nextafter(high, low), 1);
  if (!isinf(low)) check_set(p, nextafter(low, -INFINITY), 0);
  if (!isinf(high)) check_set(p, nextafter(high, INFINITY), 0);
  check_set(p, NAN, 0);
  check_set(p, -INFINITY, 0);
  check_set(p, 0.5, 1);
}

static void test_counts(const struct parameter* p) {
  const double values[3] = {0.5, NAN, 0.5};
  CHECK_STATUS(set_values(p->number, 0, values), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK_STATUS(set_values(p->number, -1, values), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK_STATUS(set_values(p->number, INT64_MIN, values), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK_STATUS(set_values(p->number, 3, values), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK_SAYS(message, "value 2 of 3");
  CHECK_STATUS(set_values(p->number, 1, NULL), FOLKMOTE_BAD_ARGUMENT, message);
}

/* Which lengths a solve takes: 1, the number of communities (2), the number of members (5), never 3. */
static void test_lengths(const struct parameter* p, const folkmote_study* study) {
  const double values[5] = {0.5, 0.5, 0.5, 0.5, 0.5};
  const int64_t counts[4] = {1, 2, 5, 3};
  for (int k = 0; k < 4; ++k) {
    folkmote_equilibrium* equilibrium = (folkmote_equilibrium*)&equilibrium;
    const int accepted = k < p->finest;
    CHECK_STATUS(set_values(p->number, counts[k], values), FOLKMOTE_OK, message);
    CHECK_STATUS(folkmote_equilibrium_create(study, beliefs, payoff, NULL, &equilibrium, message),
                 accepted ? FOLKMOTE_OK : FOLKMOTE_BAD_ARGUMENT, message);
    CHECK((equilibrium != NULL) == accepted);
    if (!accepted) CHECK_SAYS(message, p->name);
    folkmote_equilibrium_destroy(equilibrium);
  }
  CHECK_STATUS(set_values(p->number, 1, values), FOLKMOTE_OK, message);
}

static void test_wrong_numbers(void) {
  const double value = 0.5;
  const int unknown[] = {-1, 0, 6, 15, 19, 32, 1 << 30};
  for (size_t k = 0; k < sizeof unknown / sizeof *unknown; ++k) {
    double low = 7, high = 7;
    int low_open = 7, high_open = 7;
    CHECK_STATUS(folkmote_parameter_bounds(unknown[k], &low, &high, &low_open, &high_open, message),
                 FOLKMOTE_BAD_ARGUMENT, message);
    CHECK(low == 7 && high == 7 && low_open == 7 && high_open == 7);
    CHECK_STATUS(folkmote_beliefs_set(beliefs, unknown[k], 1, &value, message), FOLKMOTE_BAD_ARGUMENT, message);
    CHECK_STATUS(folkmote_payoff_set(payoff, unknown[k], 1, &value, message), FOLKMOTE_BAD_ARGUMENT, message);
  }
  CHECK_STATUS(folkmote_beliefs_set(beliefs, FOLKMOTE_COST, 1, &value, message), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK_STATUS(folkmote_payoff_set(payoff, FOLKMOTE_PRIOR_MEAN, 1, &value, message), FOLKMOTE_BAD_ARGUMENT, message);
  folkmote_payoff* none = payoff;
  CHECK_STATUS(folkmote_payoff_create(0, &none, message), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK(none == NULL);
  CHECK_STATUS(folkmote_payoff_create(2, &none, message), FOLKMOTE_BAD_ARGUMENT, message);
}

/* Solving with beliefs that lack a parameter names it; a column of `members` stands in for the signal precision. */
static void test_unset(const folkmote_study* study) {
  const double value = 0.5;
  const int numbers[3] = {FOLKMOTE_PRIOR_MEAN, FOLKMOTE_PRIOR_PRECISION, FOLKMOTE_SIGNAL_PRECISION};
  const char* const names[3] = {"prior_mean", "prior_precision", "signal_precision"};
  folkmote_beliefs* unset = NULL;
  folkmote_equilibrium* equilibrium = NULL;
  folkmote_beliefs_create(&unset, NULL);
  for (int k = 0; k < 3; ++k) {
    CHECK_STATUS(folkmote_equilibrium_create(study, unset, payoff, NULL, &equilibrium, message), FOLKMOTE_BAD_ARGUMENT,
                 message);
    CHECK_SAYS(message, names[k]);
    if (k < 2) folkmote_beliefs_set(unset, numbers[k], 1, &value, NULL);
  }
  folkmote_table* members = TABLE("community:i 1 1", "member:i 1 2", "signal_precision:r 1 2");
  folkmote_study* own = NULL;
  folkmote_study_create(members, NULL, NULL, NULL, NULL, 0, &own, NULL);
  CHECK_STATUS(folkmote_equilibrium_create(own, unset, payoff, NULL, &equilibrium, message), FOLKMOTE_OK, message);
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_study_destroy(own);
  folkmote_table_destroy(members);
  folkmote_beliefs_destroy(unset);
}

/* The ends of every range at once, far from anything sensible, must give an answer and keep the session sound. */
static void test_extremes(const folkmote_study* study) {
  for (int k = 0; k < parameter_count; ++k) {
    for (int end = 0; end < 2; ++end) {
      const struct parameter* p = &parameters[k];
      const double inside = end == 0 ? nextafter(p->low, p->high) : nextafter(p->high, p->low), usual = 0.5;
      folkmote_equilibrium* equilibrium = NULL;
      folkmote_table* table = NULL;
      set_values(p->number, 1, &inside);
      CHECK_STATUS(folkmote_equilibrium_create(study, beliefs, payoff, NULL, &equilibrium, message), FOLKMOTE_OK,
                   message);
      CHECK_STATUS(folkmote_equilibrium_table(equilibrium, FOLKMOTE_BY_COMMUNITY, &table, message), FOLKMOTE_OK,
                   message);
      for (int c = 0; c < 2; ++c) {
        const double least = real_at(table, "turnout_least", c), greatest = real_at(table, "turnout_greatest", c);
        /* Two cutoffs a rounding apart may cross in the last bits; anything that is no share fails. */
        if (!CHECK(least >= 0 && greatest <= 1 && least <= greatest + 1e-12)) {
          printf("    %s = %g: turnout %g to %g\n", p->name, inside, least, greatest);
        }
      }
      folkmote_table_destroy(table);
      folkmote_equilibrium_destroy(equilibrium);
      set_values(p->number, 1, &usual);
    }
  }
}

void test_parameters(void) {
  folkmote_study* study = sound_study();
  beliefs = plain_beliefs(0.5, 0.5, 0.5);
  payoff = plain_payoff();
  for (int k = 0; k < parameter_count; ++k) {
    test_ends(&parameters[k]);
    test_counts(&parameters[k]);
    test_lengths(&parameters[k], study);
  }
  test_wrong_numbers();
  test_unset(study);
  test_extremes(study);
  folkmote_payoff_destroy(payoff);
  folkmote_beliefs_destroy(beliefs);
  folkmote_study_destroy(study);
  CHECK_HEALTHY(0);
}

/* ---- Options ---- */

void test_options(void) {
  const struct {
    int option;
    double low, high;
    int whole;
  } rules[] = {{FOLKMOTE_TOLERANCE, 1e-13, 1, 0}, {FOLKMOTE_SWEEPS, 1, 1e9, 1}, {FOLKMOTE_THREADS, 1, 1024, 1}};
  folkmote_options* options = NULL;
  CHECK_STATUS(folkmote_options_create(&options, message), FOLKMOTE_OK, message);
  for (int k = 0; k < 3; ++k) {
    const int option = rules[k].option;
    const double low = rules[k].low, high = rules[k].high;
    CHECK_STATUS(folkmote_options_set(options, option, low, message), FOLKMOTE_OK, message);
    CHECK_STATUS(folkmote_options_set(options, option, high, message), FOLKMOTE_OK, message);
    const double refused[] = {nextafter(low, -1), nextafter(high, 1e300), 0, -1, NAN, INFINITY, -INFINITY};
    for (size_t r = 0; r < sizeof refused / sizeof *refused; ++r) {
      CHECK_STATUS(folkmote_options_set(options, option, refused[r], message), FOLKMOTE_BAD_ARGUMENT, message);
    }
    CHECK_STATUS(folkmote_options_set(options, option, 0.5, message),
                 rules[k].whole ? FOLKMOTE_BAD_ARGUMENT : FOLKMOTE_OK, message);
    CHECK_STATUS(folkmote_options_set(options, option, 1.5, message), FOLKMOTE_BAD_ARGUMENT, message);
  }
  const int unknown[] = {0, 1, 31, 35, -1};
  for (size_t k = 0; k < sizeof unknown / sizeof *unknown; ++k) {
    CHECK_STATUS(folkmote_options_set(options, unknown[k], 1, message), FOLKMOTE_BAD_ARGUMENT, message);
  }
  folkmote_options_destroy(options);
  CHECK_HEALTHY(0);
}

/* ---- NULL for every pointer ---- */

#define REFUSED(call) CHECK_STATUS(call, FOLKMOTE_BAD_ARGUMENT, message)

static void test_null_tables(void) {
  folkmote_table* table = TABLE("a:t x", "b:i 1", "c:r 1");
  const char* text[1] = {"x"};
  int64_t integer[1] = {1};
  double real[1] = {1};
  REFUSED(folkmote_table_create(1, NULL, message));
  REFUSED(folkmote_table_add_text(NULL, "d", text, message));
  REFUSED(folkmote_table_add_text(table, NULL, text, message));
  REFUSED(folkmote_table_add_text(table, "d", NULL, message));
  REFUSED(folkmote_table_add_integer(NULL, "d", integer, message));
  REFUSED(folkmote_table_add_integer(table, NULL, integer, message));
  REFUSED(folkmote_table_add_integer(table, "d", NULL, message));
  REFUSED(folkmote_table_add_real(NULL, "d", real, message));
  REFUSED(folkmote_table_add_real(table, NULL, real, message));
  REFUSED(folkmote_table_add_real(table, "d", NULL, message));
  REFUSED(folkmote_table_get_text(NULL, 0, text, message));
  REFUSED(folkmote_table_get_text(table, 0, NULL, message));
  REFUSED(folkmote_table_get_integer(NULL, 1, integer, message));
  REFUSED(folkmote_table_get_integer(table, 1, NULL, message));
  REFUSED(folkmote_table_get_real(NULL, 2, real, message));
  REFUSED(folkmote_table_get_real(table, 2, NULL, message));
  CHECK(folkmote_table_columns(table) == 3);
  CHECK(folkmote_table_rows(NULL) == 0 && folkmote_table_columns(NULL) == 0);
  CHECK(folkmote_table_column_name(NULL, 0) == NULL && folkmote_table_column_type(NULL, 0) == 0);
  folkmote_table_destroy(table);
}

static void test_null_settings(void) {
  folkmote_beliefs* b = plain_beliefs(0, 1, 1);
  folkmote_payoff* p = plain_payoff();
  folkmote_options* o = NULL;
  folkmote_options_create(&o, NULL);
  const double value = 1;
  double low = 7, high = 7;
  int low_open = 7, high_open = 7;
  REFUSED(folkmote_parameter_bounds(1, NULL, &high, &low_open, &high_open, message));
  REFUSED(folkmote_parameter_bounds(1, &low, NULL, &low_open, &high_open, message));
  REFUSED(folkmote_parameter_bounds(1, &low, &high, NULL, &high_open, message));
  REFUSED(folkmote_parameter_bounds(1, &low, &high, &low_open, NULL, message));
  CHECK(low == 7 && high == 7 && low_open == 7 && high_open == 7);
  REFUSED(folkmote_beliefs_create(NULL, message));
  REFUSED(folkmote_beliefs_set(NULL, 1, 1, &value, message));
  REFUSED(folkmote_beliefs_set(b, 1, 1, NULL, message));
  REFUSED(folkmote_payoff_create(1, NULL, message));
  REFUSED(folkmote_payoff_set(NULL, 16, 1, &value, message));
  REFUSED(folkmote_payoff_set(p, 16, 1, NULL, message));
  REFUSED(folkmote_options_create(NULL, message));
  REFUSED(folkmote_options_set(NULL, 32, 1, message));
  REFUSED(folkmote_options_progress(NULL, NULL, NULL, message));
  CHECK_STATUS(folkmote_options_progress(o, NULL, NULL, message), FOLKMOTE_OK, message);
  folkmote_options_destroy(o);
  folkmote_payoff_destroy(p);
  folkmote_beliefs_destroy(b);
}

static void test_null_results(const folkmote_study* study, const folkmote_equilibrium* e, const folkmote_scenario* s) {
  folkmote_beliefs* b = plain_beliefs(0, 1, 1);
  folkmote_payoff* p = plain_payoff();
  folkmote_equilibrium* made = (folkmote_equilibrium*)&made;
  folkmote_table* table = (folkmote_table*)&table;
  const double values[1] = {0.5};
  REFUSED(folkmote_equilibrium_create(NULL, b, p, NULL, &made, message));
  CHECK(made == NULL);
  REFUSED(folkmote_equilibrium_create(study, NULL, p, NULL, &made, message));
  REFUSED(folkmote_equilibrium_create(study, b, NULL, NULL, &made, message));
  REFUSED(folkmote_equilibrium_create(study, b, p, NULL, NULL, message));
  REFUSED(folkmote_equilibrium_table(NULL, FOLKMOTE_BY_MEMBER, &table, message));
  CHECK(table == NULL);
  REFUSED(folkmote_equilibrium_table(e, FOLKMOTE_BY_MEMBER, NULL, message));
  CHECK(folkmote_equilibrium_digest(NULL) == 0);
  REFUSED(folkmote_turnout(NULL, 0, NULL, 0, NULL, NULL, &table, message));
  REFUSED(folkmote_turnout(e, 1, NULL, 0, NULL, NULL, &table, message));
  REFUSED(folkmote_turnout(e, 0, NULL, 1, NULL, NULL, &table, message));
  REFUSED(folkmote_turnout(e, 1, values, 1, values, NULL, NULL, message));
  REFUSED(folkmote_simulate(NULL, 0, 1, 1, NULL, FOLKMOTE_BY_MEMBER, NULL, &table, message));
  REFUSED(folkmote_simulate(e, 0, 1, 1, NULL, FOLKMOTE_BY_MEMBER, NULL, NULL, message));
  REFUSED(folkmote_sensitivity(NULL, 0, NULL, FOLKMOTE_BY_MEMBER, NULL, &table, message));
  REFUSED(folkmote_sensitivity(e, 1, NULL, FOLKMOTE_BY_MEMBER, NULL, &table, message));
  REFUSED(folkmote_sensitivity(e, 0, NULL, FOLKMOTE_BY_MEMBER, NULL, NULL, message));
  REFUSED(folkmote_link_sensitivity(NULL, NULL, &table, message));
  REFUSED(folkmote_link_sensitivity(e, NULL, NULL, message));
  REFUSED(folkmote_counterfactual(NULL, s, 0, 1, NULL, &table, message));
  REFUSED(folkmote_counterfactual(e, NULL, 0, 1, NULL, &table, message));
  REFUSED(folkmote_counterfactual(e, s, 0, 1, NULL, NULL, message));
  const int by_community = FOLKMOTE_BY_COMMUNITY;
  REFUSED(folkmote_simulate_within(NULL, 0, 1, 1, 0, 1, by_community, NULL, &table, message));
  REFUSED(folkmote_simulate_within(e, 0, 1, 1, 0, 1, by_community, NULL, NULL, message));
  REFUSED(folkmote_counterfactual_within(NULL, s, 0, 1, 0, 1, NULL, &table, message));
  REFUSED(folkmote_counterfactual_within(e, NULL, 0, 1, 0, 1, NULL, &table, message));
  REFUSED(folkmote_counterfactual_within(e, s, 0, 1, 0, 1, NULL, NULL, message));
  REFUSED(folkmote_counterfactual_plays(NULL, s, 0, 1, 1, 0, 1, NULL, &table, message));
  REFUSED(folkmote_counterfactual_plays(e, NULL, 0, 1, 1, 0, 1, NULL, &table, message));
  REFUSED(folkmote_counterfactual_plays(e, s, 0, 1, 1, 0, 1, NULL, NULL, message));
  const char *path = "chunk", *no_path = NULL;
  REFUSED(folkmote_chunk_run(NULL, NULL, 0, 1, 1, 0, 1, by_community, NULL, path, NULL, message));
  REFUSED(folkmote_chunk_run(e, NULL, 0, 1, 1, 0, 1, by_community, NULL, NULL, NULL, message));
  REFUSED(folkmote_chunk_merge(1, NULL, 0, 1, &table, message));
  REFUSED(folkmote_chunk_merge(1, &no_path, 0, 1, &table, message));
  REFUSED(folkmote_chunk_merge(1, &path, 0, 1, NULL, message));
  REFUSED(folkmote_chunk_table(1, NULL, &table, message));
  REFUSED(folkmote_chunk_table(1, &no_path, &table, message));
  REFUSED(folkmote_chunk_table(1, &path, NULL, message));
  CHECK(folkmote_study_digest(NULL) == 0);
  CHECK(table == NULL);
  folkmote_payoff_destroy(p);
  folkmote_beliefs_destroy(b);
}

static void test_null_studies(const folkmote_study* study, folkmote_scenario* s) {
  folkmote_table* members = build_table(sound_members);
  folkmote_study* made = (folkmote_study*)&made;
  folkmote_scenario* scenario = (folkmote_scenario*)&scenario;
  folkmote_table* table = (folkmote_table*)&table;
  const double value = 1;
  REFUSED(folkmote_study_create(NULL, NULL, NULL, NULL, NULL, 0, &made, message));
  CHECK(made == NULL);
  REFUSED(folkmote_study_create(members, NULL, NULL, NULL, NULL, 0, NULL, message));
  REFUSED(folkmote_study_summary(NULL, &table, message));
  CHECK(table == NULL);
  REFUSED(folkmote_study_summary(study, NULL, message));
  REFUSED(folkmote_scenario_create(NULL, &scenario, message));
  CHECK(scenario == NULL);
  REFUSED(folkmote_scenario_create(study, NULL, message));
  REFUSED(folkmote_scenario_add_links(NULL, members, 0, message));
  REFUSED(folkmote_scenario_add_links(s, NULL, 0, message));
  REFUSED(folkmote_scenario_cut_links(NULL, NULL, 0, message));
  REFUSED(folkmote_scenario_thin_links(NULL, 0.5, 1, message));
  REFUSED(folkmote_scenario_rewire_links(NULL, 0.5, 1, message));
  REFUSED(folkmote_scenario_broadcast(NULL, NULL, 1, message));
  REFUSED(folkmote_scenario_gathering(NULL, NULL, message));
  REFUSED(folkmote_scenario_shift_cost(NULL, NULL, 1, message));
  REFUSED(folkmote_scenario_shift_benefit(NULL, NULL, 1, message));
  REFUSED(folkmote_scenario_set_beliefs(NULL, 1, 1, &value, message));
  REFUSED(folkmote_scenario_set_beliefs(s, 1, 1, NULL, message));
  REFUSED(folkmote_scenario_forward_reports(NULL, 1, message));
  made = (folkmote_study*)&made;
  REFUSED(folkmote_scenario_study(NULL, &made, message));
  CHECK(made == NULL);
  REFUSED(folkmote_scenario_study(s, NULL, message));
  CHECK(folkmote_scenario_digest(NULL) == 0);
  folkmote_table_destroy(members);
}

static void test_null_defaults(void) {
  folkmote_study* study = sound_study();
  folkmote_scenario* scenario = NULL;
  folkmote_scenario_create(study, &scenario, NULL);
  CHECK_STATUS(folkmote_scenario_broadcast(scenario, NULL, 1, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_scenario_gathering(scenario, NULL, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_scenario_shift_cost(scenario, NULL, 0.1, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_scenario_shift_benefit(scenario, NULL, 0.1, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_scenario_rewire_links(scenario, 0.5, 1, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_scenario_cut_links(scenario, NULL, 0, message), FOLKMOTE_OK, message);
  folkmote_study* edited = NULL;
  folkmote_table* summary = NULL;
  folkmote_scenario_study(scenario, &edited, NULL);
  folkmote_study_summary(edited, &summary, NULL);
  CHECK(integer_at(summary, "links", 0) == 0 && integer_at(summary, "links", 1) == 0);
  CHECK(integer_at(summary, "broadcasts", 1) == 1 && integer_at(summary, "gatherings", 1) == 1);
  folkmote_table_destroy(summary);
  folkmote_study_destroy(edited);
  folkmote_scenario_destroy(scenario);
  folkmote_study_destroy(study);
}

static void test_destroy_null(void) {
  folkmote_table_destroy(NULL);
  folkmote_study_destroy(NULL);
  folkmote_beliefs_destroy(NULL);
  folkmote_payoff_destroy(NULL);
  folkmote_options_destroy(NULL);
  folkmote_equilibrium_destroy(NULL);
  folkmote_scenario_destroy(NULL);
  CHECK(folkmote_live_handles() == 0);
}

void test_nulls(void) {
  folkmote_study* study = sound_study();
  folkmote_scenario* scenario = NULL;
  folkmote_scenario_create(study, &scenario, NULL);
  const uint64_t before = folkmote_scenario_digest(scenario);
  folkmote_equilibrium* equilibrium = plain_equilibrium(study, 0.4, 1, 1);
  test_null_tables();
  test_null_settings();
  test_null_results(study, equilibrium, scenario);
  test_null_studies(study, scenario);
  CHECK(folkmote_scenario_digest(scenario) == before);
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_scenario_destroy(scenario);
  folkmote_study_destroy(study);
  test_null_defaults();
  test_destroy_null();
  CHECK_HEALTHY(0);
}

/* ---- The message buffer ---- */

enum { canary = 0x5A, spare = 256, long_name = 5000 };

static int whole_utf8(const char* text) {
  while (*text != '\0') {
    const unsigned char lead = (unsigned char)*text++;
    int more = lead < 0x80 ? 0 : lead >= 0xF0 ? 3 : lead >= 0xE0 ? 2 : lead >= 0xC0 ? 1 : -1;
    if (more < 0) return 0;
    for (; more > 0; --more) {
      if (((unsigned char)*text++ & 0xC0U) != 0x80U) return 0;
    }
  }
  return 1;
}

/* A column whose name fills the message and more, added twice; `letter` is repeated, `shift` moves the cut. */
static void test_long_name(const char* letter, int shift) {
  char name[long_name + 8];
  size_t length = 0;
  for (; (int)length < shift; ++length) name[length] = 'a';
  while (length + strlen(letter) < long_name) {
    memcpy(name + length, letter, strlen(letter));
    length += strlen(letter);
  }
  name[length] = '\0';
  unsigned char buffer[FOLKMOTE_MESSAGE_BYTES + spare];
  memset(buffer, canary, sizeof buffer);
  folkmote_table* table = NULL;
  const double value = 1;
  folkmote_table_create(1, &table, NULL);
  folkmote_table_add_real(table, name, &value, NULL);
  CHECK(folkmote_table_add_real(table, name, &value, (char*)buffer) == FOLKMOTE_BAD_ARGUMENT);
  int untouched = 1;
  for (int k = 0; k < spare; ++k) untouched = untouched && buffer[FOLKMOTE_MESSAGE_BYTES + k] == canary;
  CHECK(untouched);
  CHECK(memchr(buffer, 0, FOLKMOTE_MESSAGE_BYTES) != NULL);
  CHECK(strlen((const char*)buffer) >= FOLKMOTE_MESSAGE_BYTES - 4);
  CHECK(whole_utf8((const char*)buffer));
  folkmote_table_destroy(table);
}

/* Messages fit and keep what matters however long the labels are. */
static void test_long_labels_in_messages(void) {
  char* label = malloc(long_name + 1);
  memset(label, 'L', long_name);
  label[long_name] = '\0';
  const char* ids[2] = {label, label};
  const int64_t community[2] = {1, 1};
  unsigned char buffer[FOLKMOTE_MESSAGE_BYTES + spare];
  memset(buffer, canary, sizeof buffer);
  folkmote_table* members = NULL;
  folkmote_study* study = NULL;
  folkmote_table_create(2, &members, NULL);
  folkmote_table_add_integer(members, "community", community, NULL);
  folkmote_table_add_text(members, "member", ids, NULL);
  CHECK(folkmote_study_create(members, NULL, NULL, NULL, NULL, 0, &study, (char*)buffer) == FOLKMOTE_BAD_DATA);
  CHECK_SAYS((const char*)buffer, "members: column 'member', row 2 (1 row): ");
  CHECK(buffer[FOLKMOTE_MESSAGE_BYTES] == canary && buffer[FOLKMOTE_MESSAGE_BYTES + spare - 1] == canary);
  folkmote_table_destroy(members);
  free(label);
}

/* NULL for the message changes nothing but the message; success clears it. */
static void test_message_is_optional(void) {
  folkmote_table* table = NULL;
  CHECK(folkmote_table_create(-1, &table, NULL) == FOLKMOTE_BAD_ARGUMENT);
  CHECK(folkmote_study_create(NULL, NULL, NULL, NULL, NULL, 0, NULL, NULL) == FOLKMOTE_BAD_ARGUMENT);
  CHECK(folkmote_parameter_bounds(99, NULL, NULL, NULL, NULL, NULL) == FOLKMOTE_BAD_ARGUMENT);
  strcpy(message, "left over");
  CHECK(folkmote_table_create(1, &table, message) == FOLKMOTE_OK);
  CHECK(message[0] == '\0');
  folkmote_table_destroy(table);
}

void test_messages(void) {
  for (int shift = 0; shift < 4; ++shift) {
    test_long_name("n", shift);
    test_long_name("\xc3\xa9", shift);
    test_long_name("\xf0\x9f\x93\xa3", shift);
  }
  test_long_labels_in_messages();
  test_message_is_optional();
  CHECK_HEALTHY(0);
}
