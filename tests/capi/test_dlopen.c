/* The library as a wrapper meets it: loaded at run time, functions found by name, nothing of it linked.
 * Usage: test_dlopen LIBRARY SYMBOLS   (SYMBOLS: capi/symbols.txt, "name node" in each line) */
#include <dlfcn.h>
#include <stdio.h>
#include <stdlib.h>

#include "check.h"
#include "folkmote.h"

int checks_passed = 0;
int checks_failed = 0;

static void* library;

/* ISO C has no conversion from an object pointer to a function pointer; POSIX promises that the bytes are the same. */
static void find(const char* name, void* function_pointer, size_t size) {
  void* found = dlsym(library, name);
  CHECK(found != NULL && size == sizeof found);
  memcpy(function_pointer, &found, sizeof found);
}

#define FIND(name)                   \
  __typeof__(folkmote_##name)* name; \
  find("folkmote_" #name, &name, sizeof name)

/* Every committed symbol is there, and RTLD_LOCAL kept it out of the program's own names. */
static void test_symbols(const char* file) {
  char line[256], name[128];
  int count = 0;
  FILE* symbols = fopen(file, "r");
  if (!CHECK(symbols != NULL)) return;
  while (fgets(line, sizeof line, symbols) != NULL) {
    if (sscanf(line, "%127s", name) != 1) continue;
    ++count;
    if (!CHECK(dlsym(library, name) != NULL)) printf("    %s\n", name);
    CHECK(dlsym(RTLD_DEFAULT, name) == NULL);
  }
  fclose(symbols);
  CHECK(count > 0);
}

/* Names of the inside must not be found from outside. */
static void test_hidden(void) {
  CHECK(dlsym(library, "_ZN8folkmote12live_handlesEv") == NULL);
  CHECK(dlsym(library, "_ZN8folkmote10make_studyERKNS_11StudyTablesE") == NULL);
}

static void test_constants(void) {
  FIND(version);
  FIND(stream_version);
  FIND(message_bytes);
  CHECK(strcmp(version(), FOLKMOTE_VERSION) == 0);
  CHECK(stream_version() == FOLKMOTE_STREAM_VERSION);
  CHECK(message_bytes() == FOLKMOTE_MESSAGE_BYTES);
}

static folkmote_study* tiny_study(void) {
  FIND(table_create);
  FIND(table_add_integer);
  FIND(table_destroy);
  FIND(study_create);
  const int64_t community[3] = {1, 1, 1}, member[3] = {1, 2, 3};
  folkmote_table* members = NULL;
  folkmote_study* study = NULL;
  CHECK(table_create(3, &members, NULL) == FOLKMOTE_OK);
  CHECK(table_add_integer(members, "community", community, NULL) == FOLKMOTE_OK);
  CHECK(table_add_integer(members, "member", member, NULL) == FOLKMOTE_OK);
  CHECK(study_create(members, NULL, NULL, NULL, NULL, 0, &study, NULL) == FOLKMOTE_OK);
  table_destroy(members);
  return study;
}

static folkmote_equilibrium* tiny_equilibrium(const folkmote_study* study) {
  FIND(beliefs_create);
  FIND(beliefs_set);
  FIND(beliefs_destroy);
  FIND(payoff_create);
  FIND(payoff_destroy);
  FIND(equilibrium_create);
  const double mean = 0.5, one = 1;
  folkmote_beliefs* beliefs = NULL;
  folkmote_payoff* payoff = NULL;
  folkmote_equilibrium* equilibrium = NULL;
  CHECK(beliefs_create(&beliefs, NULL) == FOLKMOTE_OK);
  CHECK(beliefs_set(beliefs, FOLKMOTE_PRIOR_MEAN, 1, &mean, NULL) == FOLKMOTE_OK);
  CHECK(beliefs_set(beliefs, FOLKMOTE_PRIOR_PRECISION, 1, &one, NULL) == FOLKMOTE_OK);
  CHECK(beliefs_set(beliefs, FOLKMOTE_SIGNAL_PRECISION, 1, &one, NULL) == FOLKMOTE_OK);
  CHECK(payoff_create(FOLKMOTE_SHARE_PAYOFF, &payoff, NULL) == FOLKMOTE_OK);
  CHECK(equilibrium_create(study, beliefs, payoff, NULL, &equilibrium, NULL) == FOLKMOTE_OK);
  beliefs_destroy(beliefs);
  payoff_destroy(payoff);
  return equilibrium;
}

static void test_tiny_study(void) {
  FIND(equilibrium_table);
  FIND(equilibrium_destroy);
  FIND(study_destroy);
  FIND(table_rows);
  FIND(table_get_text);
  FIND(table_destroy);
  FIND(live_handles);
  folkmote_study* study = tiny_study();
  folkmote_equilibrium* equilibrium = tiny_equilibrium(study);
  folkmote_table* table = NULL;
  const char* verdict = NULL;
  CHECK(equilibrium_table(equilibrium, FOLKMOTE_BY_COMMUNITY, &table, NULL) == FOLKMOTE_OK);
  CHECK(table_rows(table) == 1);
  CHECK(table_get_text(table, 1, &verdict, NULL) == FOLKMOTE_OK);
  CHECK(verdict != NULL && strcmp(verdict, "proved unique") == 0);
  table_destroy(table);
  equilibrium_destroy(equilibrium);
  study_destroy(study);
  CHECK(live_handles() == 0);
}

int main(int count, char** arguments) {
  if (count != 3) return 2;
  library = dlopen(arguments[1], RTLD_NOW | RTLD_LOCAL);
  if (!CHECK(library != NULL)) {
    printf("    %s\n", dlerror());
    return check_report("dlopen");
  }
  test_symbols(arguments[2]);
  test_hidden();
  test_constants();
  test_tiny_study();
  CHECK(dlclose(library) == 0);
  return check_report("dlopen");
}
