#include "build_tables.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

enum { most_rows = 64, most_text = 4096 };

const char* const sound_members[] = {"community:i 1 1 1 2 2", "member:t a b c a d", "turnout:r 1 0 NA 1 1",
                                     "weight:r 1 2 1 1 1", NULL};
const char* const sound_links[] = {"community:i 1 1 2", "listener:t a b d", "speaker:t b c a", NULL};
const char* const sound_broadcasts[] = {"community:i 1 1", "broadcast:i 9 9", "member:t a c", "precision:r 2 2", NULL};
const char* const sound_gatherings[] = {"community:i 1 1", "gathering:i 5 5", "member:t a b", NULL};
const char* const sound_communities[] = {"community:i 1 2", NULL};

/* Splits `text` at blanks in place; returns the number of words. Without strtok, which keeps a state of its own. */
static int split(char* text, char** words) {
  int count = 0;
  while (count < most_rows) {
    text += strspn(text, " ");
    if (*text == '\0') break;
    words[count++] = text;
    text += strcspn(text, " ");
    if (*text != '\0') *text++ = '\0';
  }
  return count;
}

static int is_missing(const char* word) { return strcmp(word, "NA") == 0; }

static void add_text(folkmote_table* table, const char* name, char** words, int rows) {
  const char* values[most_rows];
  for (int r = 0; r < rows; ++r) values[r] = is_missing(words[r]) ? NULL : strcmp(words[r], "''") == 0 ? "" : words[r];
  folkmote_table_add_text(table, name, values, NULL);
}

static void add_integers(folkmote_table* table, const char* name, char** words, int rows) {
  int64_t values[most_rows];
  for (int r = 0; r < rows; ++r) values[r] = is_missing(words[r]) ? INT64_MIN : strtoll(words[r], NULL, 10);
  folkmote_table_add_integer(table, name, values, NULL);
}

static void add_reals(folkmote_table* table, const char* name, char** words, int rows) {
  double values[most_rows];
  for (int r = 0; r < rows; ++r) values[r] = is_missing(words[r]) ? (double)NAN : strtod(words[r], NULL);
  folkmote_table_add_real(table, name, values, NULL);
}

folkmote_table* build_table(const char* const* texts) {
  folkmote_table* table = NULL;
  for (; *texts != NULL; ++texts) {
    char copy[most_text];
    char* words[most_rows];
    strncpy(copy, *texts, sizeof copy - 1);
    copy[sizeof copy - 1] = '\0';
    const int rows = split(copy, words) - 1;
    char* colon = strchr(words[0], ':');
    *colon = '\0';
    if (table == NULL) folkmote_table_create(rows, &table, NULL);
    if (colon[1] == 't') add_text(table, words[0], words + 1, rows);
    if (colon[1] == 'i') add_integers(table, words[0], words + 1, rows);
    if (colon[1] == 'r') add_reals(table, words[0], words + 1, rows);
  }
  return table;
}

folkmote_study* sound_study(void) {
  folkmote_table* tables[] = {build_table(sound_members), build_table(sound_links), build_table(sound_broadcasts),
                              build_table(sound_gatherings), build_table(sound_communities)};
  folkmote_study* study = NULL;
  folkmote_study_create(tables[0], tables[1], tables[2], tables[3], tables[4], 0, &study, NULL);
  for (int t = 0; t < 5; ++t) folkmote_table_destroy(tables[t]);
  return study;
}

static folkmote_table* many_members(int communities, int size) {
  const int64_t rows = (int64_t)communities * size;
  int64_t* community = malloc((size_t)rows * sizeof *community);
  int64_t* member = malloc((size_t)rows * sizeof *member);
  folkmote_table* table = NULL;
  for (int64_t r = 0; r < rows; ++r) {
    community[r] = r / size;
    member[r] = r % size;
  }
  folkmote_table_create(rows, &table, NULL);
  folkmote_table_add_integer(table, "community", community, NULL);
  folkmote_table_add_integer(table, "member", member, NULL);
  free(community);
  free(member);
  return table;
}

folkmote_study* unlinked_study(int communities, int size) {
  folkmote_table* members = many_members(communities, size);
  folkmote_study* study = NULL;
  folkmote_study_create(members, NULL, NULL, NULL, NULL, 0, &study, NULL);
  folkmote_table_destroy(members);
  return study;
}

static folkmote_table* ring_links(int communities, int size) {
  const int64_t rows = (int64_t)communities * size * 2;
  int64_t* columns[3];
  const char* const names[3] = {"community", "listener", "speaker"};
  folkmote_table* table = NULL;
  for (int c = 0; c < 3; ++c) columns[c] = malloc((size_t)rows * sizeof(int64_t));
  for (int64_t r = 0; r < rows; ++r) {
    const int64_t member = (r / 2) % size;
    columns[0][r] = r / 2 / size;
    columns[1][r] = member;
    columns[2][r] = (member + 1 + r % 2) % size;
  }
  folkmote_table_create(rows, &table, NULL);
  for (int c = 0; c < 3; ++c) {
    folkmote_table_add_integer(table, names[c], columns[c], NULL);
    free(columns[c]);
  }
  return table;
}

folkmote_study* ring_study(int communities, int size) {
  folkmote_table* members = many_members(communities, size);
  folkmote_table* links = ring_links(communities, size);
  folkmote_study* study = NULL;
  folkmote_study_create(members, links, NULL, NULL, NULL, 0, &study, NULL);
  folkmote_table_destroy(members);
  folkmote_table_destroy(links);
  return study;
}

folkmote_beliefs* plain_beliefs(double mean, double prior_precision, double signal_precision) {
  folkmote_beliefs* beliefs = NULL;
  if (folkmote_beliefs_create(&beliefs, NULL) != FOLKMOTE_OK) return NULL;
  if (folkmote_beliefs_set(beliefs, FOLKMOTE_PRIOR_MEAN, 1, &mean, NULL) != FOLKMOTE_OK ||
      folkmote_beliefs_set(beliefs, FOLKMOTE_PRIOR_PRECISION, 1, &prior_precision, NULL) != FOLKMOTE_OK ||
      folkmote_beliefs_set(beliefs, FOLKMOTE_SIGNAL_PRECISION, 1, &signal_precision, NULL) != FOLKMOTE_OK) {
    folkmote_beliefs_destroy(beliefs);
    return NULL;
  }
  return beliefs;
}

folkmote_payoff* plain_payoff(void) {
  folkmote_payoff* payoff = NULL;
  folkmote_payoff_create(FOLKMOTE_SHARE_PAYOFF, &payoff, NULL);
  return payoff;
}

static folkmote_equilibrium* solve(const folkmote_study* study, const folkmote_beliefs* beliefs,
                                   const folkmote_options* options) {
  folkmote_payoff* payoff = plain_payoff();
  folkmote_equilibrium* equilibrium = NULL;
  folkmote_equilibrium_create(study, beliefs, payoff, options, &equilibrium, NULL);
  folkmote_payoff_destroy(payoff);
  return equilibrium;
}

folkmote_equilibrium* plain_equilibrium(const folkmote_study* study, double mean, double prior_precision,
                                        double signal_precision) {
  folkmote_beliefs* beliefs = plain_beliefs(mean, prior_precision, signal_precision);
  folkmote_equilibrium* equilibrium = solve(study, beliefs, NULL);
  folkmote_beliefs_destroy(beliefs);
  return equilibrium;
}

static int64_t column_of(const folkmote_table* table, const char* column) {
  for (int64_t c = 0; c < folkmote_table_columns(table); ++c) {
    if (strcmp(folkmote_table_column_name(table, c), column) == 0) return c;
  }
  return -1;
}

double real_at(const folkmote_table* table, const char* column, int64_t row) {
  double value = NAN;
  double* values = malloc(((size_t)folkmote_table_rows(table) + 1) * sizeof *values);
  if (folkmote_table_get_real(table, column_of(table, column), values, NULL) == FOLKMOTE_OK) value = values[row];
  free(values);
  return value;
}

int64_t integer_at(const folkmote_table* table, const char* column, int64_t row) {
  int64_t value = INT64_MIN;
  int64_t* values = malloc(((size_t)folkmote_table_rows(table) + 1) * sizeof *values);
  if (folkmote_table_get_integer(table, column_of(table, column), values, NULL) == FOLKMOTE_OK) value = values[row];
  free(values);
  return value;
}

const char* text_at(const folkmote_table* table, const char* column, int64_t row) {
  const char* value = NULL;
  const char** values = malloc(((size_t)folkmote_table_rows(table) + 1) * sizeof *values);
  if (folkmote_table_get_text(table, column_of(table, column), values, NULL) == FOLKMOTE_OK) value = values[row];
  free(values);
  return value;
}

/* Takes the table over: folds its digest into `digest`, which stays 0 once anything was 0. */
static uint64_t fold(uint64_t digest, folkmote_status status, folkmote_table* table) {
  const uint64_t next = status == FOLKMOTE_OK ? folkmote_table_digest(table) : 0;
  folkmote_table_destroy(table);
  return digest == 0 || next == 0 ? 0 : digest * UINT64_C(0x9e3779b97f4a7c15) + next;
}

static uint64_t fold_results(const folkmote_equilibrium* equilibrium, const folkmote_options* options) {
  const double given = 0.25, at_least[2] = {0.5, 1.0};
  folkmote_table* table = NULL;
  uint64_t digest = folkmote_equilibrium_digest(equilibrium);
  folkmote_status status = folkmote_equilibrium_table(equilibrium, FOLKMOTE_BY_COMMUNITY, &table, NULL);
  digest = fold(digest, status, table);
  status = folkmote_equilibrium_table(equilibrium, FOLKMOTE_BY_MEMBER, &table, NULL);
  digest = fold(digest, status, table);
  status = folkmote_turnout(equilibrium, 1, &given, 2, at_least, options, &table, NULL);
  digest = fold(digest, status, table);
  status = folkmote_simulate(equilibrium, 3, 4, 11, NULL, FOLKMOTE_BY_COMMUNITY, options, &table, NULL);
  digest = fold(digest, status, table);
  status = folkmote_simulate(equilibrium, 0, 2, 11, &given, FOLKMOTE_BY_MEMBER, options, &table, NULL);
  return fold(digest, status, table);
}

static uint64_t fold_counterfactual(uint64_t digest, const folkmote_study* study,
                                    const folkmote_equilibrium* equilibrium, const folkmote_options* options) {
  folkmote_scenario* scenario = NULL;
  folkmote_table* table = NULL;
  folkmote_scenario_create(study, &scenario, NULL);
  folkmote_status status = folkmote_scenario_broadcast(scenario, NULL, 2.0, NULL);
  if (status == FOLKMOTE_OK) status = folkmote_counterfactual(equilibrium, scenario, 8, 5, options, &table, NULL);
  folkmote_scenario_destroy(scenario);
  return fold(digest, status, table);
}

uint64_t session_digest(const folkmote_options* options) {
  folkmote_study* study = sound_study();
  folkmote_beliefs* beliefs = plain_beliefs(0.4, 1.0, 2.0);
  folkmote_equilibrium* equilibrium = solve(study, beliefs, options);
  folkmote_table* summary = NULL;
  uint64_t digest = fold_results(equilibrium, options);
  const folkmote_status status = folkmote_study_summary(study, &summary, NULL);
  digest = fold(digest, status, summary);
  digest = fold_counterfactual(digest, study, equilibrium, options);
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_beliefs_destroy(beliefs);
  folkmote_study_destroy(study);
  return digest;
}
