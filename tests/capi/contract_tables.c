/* Tables on their own, and ids: types, missing values, refusals, digests, labels of every kind. */
#include <float.h>
#include <math.h>
#include <stdlib.h>

#include "contract.h"

static char message[FOLKMOTE_MESSAGE_BYTES];

static folkmote_table* three_columns(void) {
  const char* texts[3] = {"x", NULL, ""};
  const int64_t integers[3] = {-7, INT64_MIN, INT64_MAX};
  const double reals[3] = {0.1, NAN, -INFINITY};
  folkmote_table* table = NULL;
  CHECK_STATUS(folkmote_table_create(3, &table, message), FOLKMOTE_OK, message);
  CHECK(message[0] == '\0');
  CHECK_STATUS(folkmote_table_add_text(table, "words", texts, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_table_add_integer(table, "wholes", integers, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_table_add_real(table, "numbers", reals, message), FOLKMOTE_OK, message);
  return table;
}

static void test_round_trip(void) {
  folkmote_table* table = three_columns();
  const char* texts[3];
  int64_t integers[3];
  double reals[3];
  CHECK(folkmote_table_rows(table) == 3 && folkmote_table_columns(table) == 3);
  CHECK(strcmp(folkmote_table_column_name(table, 0), "words") == 0);
  CHECK(folkmote_table_column_type(table, 0) == FOLKMOTE_TEXT);
  CHECK(folkmote_table_column_type(table, 1) == FOLKMOTE_INTEGER);
  CHECK(folkmote_table_column_type(table, 2) == FOLKMOTE_REAL);
  CHECK_STATUS(folkmote_table_get_text(table, 0, texts, message), FOLKMOTE_OK, message);
  CHECK(strcmp(texts[0], "x") == 0 && texts[1] == NULL && texts[2][0] == '\0');
  CHECK_STATUS(folkmote_table_get_integer(table, 1, integers, message), FOLKMOTE_OK, message);
  CHECK(integers[0] == -7 && integers[1] == INT64_MIN && integers[2] == INT64_MAX);
  CHECK_STATUS(folkmote_table_get_real(table, 2, reals, message), FOLKMOTE_OK, message);
  CHECK(reals[0] == 0.1 && isnan(reals[1]) && reals[2] == -INFINITY);
  folkmote_table_destroy(table);
}

static void test_wrong_column(void) {
  folkmote_table* table = three_columns();
  const char* texts[3] = {"kept", "kept", "kept"};
  int64_t integers[3] = {1, 1, 1};
  double reals[3] = {1, 1, 1};
  CHECK_STATUS(folkmote_table_get_text(table, 1, texts, message), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK_SAYS(message, "'wholes'");
  CHECK_STATUS(folkmote_table_get_integer(table, 2, integers, message), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK_STATUS(folkmote_table_get_real(table, 0, reals, message), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK_STATUS(folkmote_table_get_real(table, 3, reals, message), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK_STATUS(folkmote_table_get_real(table, -1, reals, message), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK_STATUS(folkmote_table_get_real(table, INT64_MAX, reals, message), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK(strcmp(texts[0], "kept") == 0 && integers[0] == 1 && reals[0] == 1);
  for (int64_t column = -1; column <= 3; column += 4) {
    CHECK(folkmote_table_column_name(table, column) == NULL);
    CHECK(folkmote_table_column_type(table, column) == 0);
  }
  folkmote_table_destroy(table);
}

static void test_names(void) {
  folkmote_table* table = three_columns();
  const double reals[3] = {1, 2, 3};
  const uint64_t before = folkmote_table_digest(table);
  CHECK_STATUS(folkmote_table_add_real(table, "words", reals, message), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK_SAYS(message, "'words'");
  CHECK_STATUS(folkmote_table_add_real(table, "", reals, message), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK_SAYS(message, "empty");
  CHECK(folkmote_table_columns(table) == 3 && folkmote_table_digest(table) == before);
  CHECK_STATUS(folkmote_table_add_real(table, "Words", reals, message), FOLKMOTE_OK, message);
  folkmote_table_destroy(table);
}

static void test_shapes(void) {
  folkmote_table* table = (folkmote_table*)&table;
  CHECK_STATUS(folkmote_table_create(-1, &table, message), FOLKMOTE_BAD_ARGUMENT, message);
  CHECK(table == NULL);
  CHECK_SAYS(message, "-1");
  CHECK_STATUS(folkmote_table_create(0, &table, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_table_add_text(table, "a", NULL, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_table_add_integer(table, "b", NULL, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_table_add_real(table, "c", NULL, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_table_get_text(table, 0, NULL, message), FOLKMOTE_OK, message);
  CHECK_STATUS(folkmote_table_get_real(table, 2, NULL, message), FOLKMOTE_OK, message);
  CHECK(folkmote_table_rows(table) == 0 && folkmote_table_columns(table) == 3);
  folkmote_table_destroy(table);
}

static uint64_t digest_of(folkmote_table* table) {
  const uint64_t digest = folkmote_table_digest(table);
  folkmote_table_destroy(table);
  return digest;
}

static void test_digests(void) {
  const uint64_t digest = digest_of(TABLE("a:i 1 2", "b:t x NA"));
  CHECK(digest == digest_of(TABLE("a:i 1 2", "b:t x NA")));
  CHECK(digest != digest_of(TABLE("a:i 1 3", "b:t x NA")));
  CHECK(digest != digest_of(TABLE("a:r 1 2", "b:t x NA")));
  CHECK(digest != digest_of(TABLE("A:i 1 2", "b:t x NA")));
  CHECK(digest != digest_of(TABLE("b:t x NA", "a:i 1 2")));
  CHECK(digest != digest_of(TABLE("a:i 1 2", "b:t x ''")));
  CHECK(digest_of(TABLE("a:t ab c")) != digest_of(TABLE("a:t a bc")));
  CHECK(digest_of(TABLE("a:r 0.0 NA")) == digest_of(TABLE("a:r -0.0 NA")));
  CHECK(folkmote_table_digest(NULL) == 0);
}

static void test_values_are_copied(void) {
  folkmote_table* table = NULL;
  double reals[2] = {1, 2};
  char text[2][2] = {"p", "q"};
  const char* texts[2] = {text[0], text[1]};
  folkmote_table_create(2, &table, NULL);
  folkmote_table_add_real(table, "a", reals, NULL);
  folkmote_table_add_text(table, "b", texts, NULL);
  reals[0] = 9;
  text[0][0] = 'z';
  CHECK(real_at(table, "a", 0) == 1);
  CHECK(strcmp(text_at(table, "b", 0), "p") == 0);
  folkmote_table_destroy(table);
}

/* "A returned `const char *` lives as long as the handle it came from": adding columns must not move names or texts. */
static void test_strings_stay(void) {
  folkmote_table* table = TABLE("a:t short");
  const char* const name = folkmote_table_column_name(table, 0);
  const char* const text = text_at(table, "a", 0);
  const double value = 1;
  char more[16];
  for (int k = 0; k < 100; ++k) {
    snprintf(more, sizeof more, "b%d", k);
    folkmote_table_add_real(table, more, &value, NULL);
  }
  CHECK(folkmote_table_column_name(table, 0) == name);
  CHECK(text_at(table, "a", 0) == text);
  folkmote_table_destroy(table);
}

void test_tables(void) {
  test_strings_stay();
  test_round_trip();
  test_wrong_column();
  test_names();
  test_shapes();
  test_digests();
  test_values_are_copied();
  CHECK_HEALTHY(0);
}

/* ---- Ids ---- */

/* Status of a study of one community in which two members are linked; the tables are taken over. */
static folkmote_status link_status(folkmote_table* members, folkmote_table* links) {
  folkmote_study* study = NULL;
  const folkmote_status status = folkmote_study_create(members, links, NULL, NULL, NULL, 0, &study, message);
  CHECK((study != NULL) == (status == FOLKMOTE_OK));
  folkmote_table_destroy(members);
  folkmote_table_destroy(links);
  folkmote_study_destroy(study);
  return status;
}

/* Whether `link` (type and value, "t 7") names the first of two members (type and both values, "i 7 0"). */
static folkmote_status match_status(const char* member, const char* link) {
  char members[256], speakers[256];
  const char* listener = member[0] == 't' ? "listener:t other" : "listener:i 0";
  snprintf(members, sizeof members, "member:%s", member);
  snprintf(speakers, sizeof speakers, "speaker:%s", link);
  return link_status(TABLE("community:i 1 1", members), TABLE("community:i 1", listener, speakers));
}

static void test_labels_match(void) {
  CHECK_STATUS(match_status("i 7 0", "t 7"), FOLKMOTE_OK, message);
  CHECK_STATUS(match_status("i 7 0", "r 7"), FOLKMOTE_OK, message);
  CHECK_STATUS(match_status("r 7 0", "i 7"), FOLKMOTE_OK, message);
  CHECK_STATUS(match_status("t 7 other", "r 7.0"), FOLKMOTE_OK, message);
  CHECK_STATUS(match_status("i 100000 0", "r 1e5"), FOLKMOTE_OK, message);
  CHECK_STATUS(match_status("t 100000 other", "r 1e5"), FOLKMOTE_OK, message);
  CHECK_STATUS(match_status("i -3 0", "r -3"), FOLKMOTE_OK, message);
  CHECK_STATUS(match_status("t 0 other", "r -0.0"), FOLKMOTE_OK, message);
  CHECK_STATUS(match_status("i 9007199254740992 0", "r 9007199254740992"), FOLKMOTE_OK, message);
  CHECK_STATUS(match_status("r -9007199254740992 0", "t -9007199254740992"), FOLKMOTE_OK, message);
  CHECK_STATUS(match_status("i 9223372036854775807 0", "t 9223372036854775807"), FOLKMOTE_OK, message);
  CHECK_STATUS(match_status("i 9007199254740993 0", "i 9007199254740993"), FOLKMOTE_OK, message);
}

/* Text that only looks like a number is another label. */
static void test_labels_differ(void) {
  CHECK_STATUS(match_status("i 7 0", "t 07"), FOLKMOTE_BAD_DATA, message);
  CHECK_STATUS(match_status("i 7 0", "t 7.0"), FOLKMOTE_BAD_DATA, message);
  CHECK_STATUS(match_status("i 7 0", "t +7"), FOLKMOTE_BAD_DATA, message);
  CHECK_STATUS(match_status("i 100000 0", "t 1e5"), FOLKMOTE_BAD_DATA, message);
  CHECK_STATUS(match_status("t Ann other", "t ann"), FOLKMOTE_BAD_DATA, message);
  CHECK_STATUS(match_status("i 9007199254740993 0", "r 9007199254740992"), FOLKMOTE_BAD_DATA, message);
}

static void test_real_ids_must_be_whole(void) {
  CHECK_STATUS(match_status("r 7.5 0", "i 0"), FOLKMOTE_BAD_DATA, message);
  CHECK_SAYS(message, "members: column 'member', row 1 (1 row): ");
  CHECK_STATUS(match_status("r 9007199254740994 0", "i 0"), FOLKMOTE_BAD_DATA, message);
  CHECK_STATUS(match_status("r 7 0", "r inf"), FOLKMOTE_BAD_DATA, message);
  CHECK_SAYS(message, "links: column 'speaker', row 1 (1 row): ");
  CHECK_STATUS(match_status("r 1e300 0", "i 0"), FOLKMOTE_BAD_DATA, message);
}

/* A blank id is a missing one that a spreadsheet wrote down. */
static void test_empty_ids(void) {
  CHECK_STATUS(link_status(TABLE("community:i 1 1", "member:t '' other"), NULL), FOLKMOTE_BAD_DATA, message);
  CHECK_SAYS(message, "members: column 'member', row 1 (1 row): ");
  CHECK_STATUS(link_status(TABLE("community:t '' ''", "member:i 1 2"), NULL), FOLKMOTE_BAD_DATA, message);
  CHECK_SAYS(message, "members: column 'community', rows 1 and 2 (2 rows): ");
}

/* Ids come back byte for byte, whatever the bytes. */
static void test_odd_ids(void) {
  const char* ids[] = {" ",
                       "a b",
                       "tab\t",
                       "line\nbreak",
                       "quote'\"",
                       "\x01",
                       "\xc3\xa9t\xc3\xa9",
                       "\xf0\x9f\x93\xa3",
                       "\xff\xfe not UTF-8",
                       "NaN",
                       "NA",
                       "%s%n",
                       "a,b;c",
                       "<b>&amp;",
                       "-",
                       "1e400"};
  enum { count = sizeof ids / sizeof *ids };
  int64_t community[count] = {0};
  folkmote_table *members = NULL, *table = NULL;
  folkmote_study* study = NULL;
  folkmote_table_create(count, &members, NULL);
  folkmote_table_add_integer(members, "community", community, NULL);
  folkmote_table_add_text(members, "member", ids, NULL);
  CHECK_STATUS(folkmote_study_create(members, NULL, NULL, NULL, NULL, 0, &study, message), FOLKMOTE_OK, message);
  folkmote_equilibrium* equilibrium = plain_equilibrium(study, 0.4, 1, 1);
  CHECK_STATUS(folkmote_equilibrium_table(equilibrium, FOLKMOTE_BY_MEMBER, &table, message), FOLKMOTE_OK, message);
  for (int r = 0; r < count; ++r) CHECK(strcmp(text_at(table, "member", r), ids[r]) == 0);
  CHECK(integer_at(table, "community", 0) == 0);
  folkmote_table_destroy(table);
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_study_destroy(study);
  folkmote_table_destroy(members);
}

static void test_long_ids(void) {
  enum { length = 100000 };
  char* ids[2] = {malloc(length + 1), malloc(length + 1)};
  for (int k = 0; k < 2; ++k) {
    memset(ids[k], 'x', length);
    ids[k][length] = '\0';
  }
  ids[1][length - 1] = 'y';
  const int64_t community[2] = {1, 1};
  folkmote_table* members = NULL;
  folkmote_study* study = NULL;
  folkmote_table_create(2, &members, NULL);
  folkmote_table_add_integer(members, "community", community, NULL);
  folkmote_table_add_text(members, "member", (const char* const*)ids, NULL);
  CHECK_STATUS(folkmote_study_create(members, NULL, NULL, NULL, NULL, 0, &study, message), FOLKMOTE_OK, message);
  folkmote_study_destroy(study);
  folkmote_table_destroy(members);
  for (int k = 0; k < 2; ++k) free(ids[k]);
}

void test_labels(void) {
  test_labels_match();
  test_labels_differ();
  test_real_ids_must_be_whole();
  test_empty_ids();
  test_odd_ids();
  test_long_ids();
  CHECK_HEALTHY(0);
}
