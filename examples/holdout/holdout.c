/*
 * Holding back the harvest: the three questions of README.md, asked in plain C11.
 *
 * Usage: holdout data-folder results.csv [threads]
 * Build: cc -std=c11 holdout.c -lfolkmote -lm
 *
 * The study is invented. holdout.R and holdout.ipynb ask the same and write the same bytes.
 */
#include "read_csv.h"

enum { DRAWS = 1000, SEED = 7, QUESTIONS = 3 };

static const char* const question_names[QUESTIONS] = {"radio", "meeting", "links lost"};
static const char* const question_texts[QUESTIONS] = {
    "a second radio message reaches everybody", "every village holds a meeting of all", "every tenth contact is lost"};

static char message[FOLKMOTE_MESSAGE_BYTES];

/* Say what went wrong; the callers then leave through their clean-up. */
static int failed(folkmote_status status, const char* doing) {
  if (status == FOLKMOTE_OK) return 0;
  fprintf(stderr, "holdout: %s: %s: %s\n", doing, folkmote_status_text(status), message);
  return 1;
}

/* ---- Data and baseline -------------------------------------------------------------------------------- */

static int read_study(const char* folder, folkmote_study** study) {
  enum { TABLES = 5 };
  static const char* const names[TABLES] = {"members", "links", "broadcasts", "gatherings", "communities"};
  folkmote_table* t[TABLES] = {NULL};
  int bad = 0;
  for (int k = 0; k < TABLES && !bad; ++k) bad = failed(read_csv(folder, names[k], &t[k], message), "reading");
  /* Links are listed in the direction in which they are heard, so that none is added (mutual = 0). */
  if (!bad) bad = failed(folkmote_study_create(t[0], t[1], t[2], t[3], t[4], 0, study, message), "study");
  for (int k = 0; k < TABLES; ++k) folkmote_table_destroy(t[k]);
  return bad;
}

static int set_belief(folkmote_beliefs* beliefs, int parameter, double value) {
  return failed(folkmote_beliefs_set(beliefs, parameter, 1, &value, message), "beliefs");
}

/* Costs come from the column `cost` of members, relay precisions from links, all else from here. */
static int solve(const folkmote_study* study, const folkmote_options* options, folkmote_equilibrium** equilibrium) {
  folkmote_beliefs* beliefs = NULL;
  folkmote_payoff* payoff = NULL;
  int bad = failed(folkmote_beliefs_create(&beliefs, message), "beliefs") ||
            set_belief(beliefs, FOLKMOTE_PRIOR_MEAN, 0.36) || set_belief(beliefs, FOLKMOTE_PRIOR_PRECISION, 6.2) ||
            set_belief(beliefs, FOLKMOTE_SIGNAL_PRECISION, 1.0) || set_belief(beliefs, FOLKMOTE_STAKE_SD, 0.15) ||
            failed(folkmote_payoff_create(FOLKMOTE_SHARE_PAYOFF, &payoff, message), "payoff") ||
            failed(folkmote_equilibrium_create(study, beliefs, payoff, options, equilibrium, message), "equilibrium");
  folkmote_payoff_destroy(payoff);
  folkmote_beliefs_destroy(beliefs);
  return bad;
}

/* ---- Reading results ---------------------------------------------------------------------------------- */

static int64_t column_of(const folkmote_table* table, const char* name) {
  const char* found;
  for (int64_t c = 0; (found = folkmote_table_column_name(table, c)); ++c)
    if (strcmp(found, name) == 0) return c;
  return -1;
}

/* How many rows carry each verdict, counted from row `first`. */
static int print_verdicts(const folkmote_table* table, const char* column, int64_t first) {
  static const char* const verdicts[] = {"proved unique", "bracketed", "several", "not converged"};
  const int64_t rows = folkmote_table_rows(table);
  const char** values = calloc((size_t)rows + 1, sizeof *values);
  int bad = !values || failed(folkmote_table_get_text(table, column_of(table, column), values, message), column);
  const char* comma = "";
  for (int v = 0; v < 4 && !bad; ++v) {
    int count = 0;
    for (int64_t r = first; r < rows; ++r) count += strcmp(values[r], verdicts[v]) == 0;
    if (count > 0) {
      printf("%s%d %s", comma, count, verdicts[v]);
      comma = ", ";
    }
  }
  if (!bad) printf("\n");
  free(values);
  return bad;
}

static int pooled(const folkmote_table* table, double* values, const char* name) {
  return failed(folkmote_table_get_real(table, column_of(table, name), values, message), name);
}

/* The pooled row in one line: both ends of the interval over equilibria where they differ visibly. */
static int print_answer(const folkmote_table* table, int question) {
  static const char* const names[] = {"baseline_least",    "baseline_greatest", "scenario_least",
                                      "scenario_greatest", "difference_low",    "difference_high",
                                      "spread_low",        "spread_high",       "standard_error_greatest"};
  double first[9];
  double* values = calloc((size_t)folkmote_table_rows(table) + 1, sizeof *values);
  int bad = !values;
  for (int k = 0; k < 9 && !bad; ++k)
    if (!(bad = pooled(table, values, names[k]))) first[k] = values[0];
  if (!bad) {
    printf("  %-11s %8.3f %8.3f %+10.3f  %+8.3f to %+.3f %9.4f\n", question_names[question], first[1], first[3],
           first[5], first[6], first[7], first[8]);
    if (first[5] - first[4] > 5e-4)
      printf("  %-11s the answer is an interval: %+.3f to %+.3f\n", "", first[4], first[5]);
  }
  free(values);
  return bad;
}

/* All digits: reading the number back gives the same bits. */
static void write_real(FILE* file, double value) {
  if (isnan(value))
    fputs("NaN", file);
  else if (isinf(value))
    fputs(value > 0 ? "Inf" : "-Inf", file);
  else
    fprintf(file, "%.17g", value);
}

static int get_column(const folkmote_table* table, int64_t c, void* values) {
  switch (folkmote_table_column_type(table, c)) {
    case FOLKMOTE_TEXT:
      return failed(folkmote_table_get_text(table, c, values, message), "results");
    case FOLKMOTE_INTEGER:
      return failed(folkmote_table_get_integer(table, c, values, message), "results");
    default:
      return failed(folkmote_table_get_real(table, c, values, message), "results");
  }
}

/* The rows of a table, each after a label; the header comes first when it is asked for. */
static int write_rows(FILE* file, const folkmote_table* table, const char* label, int header) {
  enum { MOST = 64 };
  union {
    const char** text;
    int64_t* whole;
    double* real;
    void* any;
  } column[MOST];
  const int64_t rows = folkmote_table_rows(table), columns = folkmote_table_columns(table);
  int64_t got = 0;
  int bad = columns > MOST;
  for (; got < columns && !bad; ++got) {
    column[got].any = calloc((size_t)rows + 1, 8);
    bad = !column[got].any || get_column(table, got, column[got].any);
  }
  if (!bad && header) {
    fputs("question", file);
    for (int64_t c = 0; c < columns; ++c) fprintf(file, ",%s", folkmote_table_column_name(table, c));
    fputc('\n', file);
  }
  for (int64_t r = 0; r < rows && !bad; ++r) {
    fputs(label, file);
    for (int64_t c = 0; c < columns; ++c) {
      const int type = folkmote_table_column_type(table, c);
      fputc(',', file);
      if (type == FOLKMOTE_TEXT)
        fputs(column[c].text[r] ? column[c].text[r] : "", file);
      else if (type == FOLKMOTE_INTEGER)
        fprintf(file, "%lld", (long long)column[c].whole[r]);
      else
        write_real(file, column[c].real[r]);
    }
    fputc('\n', file);
  }
  while (got-- > 0) free(column[got].any);
  return bad;
}

/* ---- The three questions ------------------------------------------------------------------------------ */

static int edit(folkmote_scenario* scenario, int question) {
  switch (question) {
    case 0:
      return failed(folkmote_scenario_broadcast(scenario, NULL, 2.0, message), "radio");
    case 1:
      return failed(folkmote_scenario_gathering(scenario, NULL, message), "meeting");
    default:
      return failed(folkmote_scenario_thin_links(scenario, 0.1, SEED, message), "links lost");
  }
}

static int ask(const folkmote_study* study, const folkmote_equilibrium* equilibrium, const folkmote_options* options,
               int question, folkmote_table** answer) {
  folkmote_scenario* scenario = NULL;
  int bad = failed(folkmote_scenario_create(study, &scenario, message), "scenario") || edit(scenario, question) ||
            failed(folkmote_counterfactual(equilibrium, scenario, DRAWS, SEED, options, answer, message), "answer");
  folkmote_scenario_destroy(scenario);
  return bad;
}

static int report(folkmote_table* const* answers, const folkmote_equilibrium* equilibrium) {
  folkmote_table* villages = NULL;
  int bad = failed(folkmote_equilibrium_table(equilibrium, FOLKMOTE_BY_COMMUNITY, &villages, message), "verdicts");
  if (!bad) {
    printf("Holding back the harvest (an invented study), %lld villages\n", (long long)folkmote_table_rows(villages));
    printf("Verdicts:\n  %-11s ", "as it is");
    bad = print_verdicts(villages, "verdict", 0);
  }
  for (int q = 0; q < QUESTIONS && !bad; ++q) {
    printf("  %-11s ", question_names[q]);
    bad = print_verdicts(answers[q], "scenario_verdict", 1);
  }
  if (!bad)
    printf("Share of growers expected to hold back, all villages pooled:\n  %-11s %8s %8s %10s  %-18s %9s\n", "",
           "as it is", "then", "difference", "5 to 95 % of plays", "MC error");
  for (int q = 0; q < QUESTIONS && !bad; ++q) bad = print_answer(answers[q], q);
  for (int q = 0; q < QUESTIONS && !bad; ++q) printf("  %s: %s\n", question_names[q], question_texts[q]);
  folkmote_table_destroy(villages);
  return bad;
}

static int write_results(const char* path, folkmote_table* const* answers) {
  FILE* file = fopen(path, "wb");
  int bad = !file;
  for (int q = 0; q < QUESTIONS && !bad; ++q) bad = write_rows(file, answers[q], question_names[q], q == 0);
  if (file && (ferror(file) | fclose(file))) bad = 1;
  if (bad) fprintf(stderr, "holdout: %s was not written\n", path);
  return bad;
}

int main(int argc, char** argv) {
  folkmote_study* study = NULL;
  folkmote_options* options = NULL;
  folkmote_equilibrium* equilibrium = NULL;
  folkmote_table* answers[QUESTIONS] = {NULL};
  if (argc < 3 || argc > 4) {
    fprintf(stderr, "usage: %s data-folder results.csv [threads]\n", argv[0]);
    return 2;
  }
  int bad =
      failed(folkmote_options_create(&options, message), "options") ||
      failed(folkmote_options_set(options, FOLKMOTE_THREADS, argc > 3 ? atof(argv[3]) : 2.0, message), "threads") ||
      read_study(argv[1], &study) || solve(study, options, &equilibrium);
  for (int q = 0; q < QUESTIONS && !bad; ++q) bad = ask(study, equilibrium, options, q, &answers[q]);
  if (!bad) bad = report(answers, equilibrium) || write_results(argv[2], answers);
  for (int q = 0; q < QUESTIONS; ++q) folkmote_table_destroy(answers[q]);
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_study_destroy(study);
  folkmote_options_destroy(options);
  if (!bad && folkmote_live_handles() != 0) {
    fprintf(stderr, "holdout: a handle was left behind\n");
    return 1;
  }
  return bad;
}
