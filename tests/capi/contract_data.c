/* Every row of the bad-input paragraph: status, and a sentence that names table, column, first rows and count. */
#include "contract.h"

enum which { members, links, broadcasts, gatherings, communities };

struct bad_case {
  enum which table;       /* the sound table that is replaced */
  const char* columns[7]; /* by this one */
  int mutual;
  const char* where; /* table, column, rows and count as the message has them */
  const char* what;  /* the rule */
};

#define AT_FAULT(table, column, rows) table ": column '" column "', " rows ": "

static const struct bad_case cases[] = {
    /* unknown member or community */
    {links,
     {"community:i 1 1 2", "listener:t a b d", "speaker:t b zz a"},
     0,
     AT_FAULT("links", "speaker", "row 2 (1 row)"),
     "unknown member"},
    {links,
     {"community:i 1 1 2", "listener:t y b z", "speaker:t b c a"},
     0,
     AT_FAULT("links", "listener", "rows 1 and 3 (2 rows)"),
     "unknown member"},
    {links,
     {"community:i 1 7 2", "listener:t a b d", "speaker:t b c a"},
     0,
     AT_FAULT("links", "community", "row 2 (1 row)"),
     "community"},
    {links,
     {"community:i 1 1 1 1 1 1 1", "listener:t q q q q q q q", "speaker:t a a a a a a a"},
     0,
     AT_FAULT("links", "listener", "rows 1, 2, 3, 4, 5, ... (7 rows)"),
     "unknown member"},
    {broadcasts,
     {"community:i 1 1", "broadcast:i 9 9", "member:t a zz", "precision:r 2 2"},
     0,
     AT_FAULT("broadcasts", "member", "row 2 (1 row)"),
     "unknown member"},
    {broadcasts,
     {"community:i 3 1", "broadcast:i 9 9", "member:t a b", "precision:r 2 2"},
     0,
     AT_FAULT("broadcasts", "community", "row 1 (1 row)"),
     "community"},
    {gatherings,
     {"community:i 1 1", "gathering:i 5 5", "member:t zz b"},
     0,
     AT_FAULT("gatherings", "member", "row 1 (1 row)"),
     "unknown member"},
    {gatherings,
     {"community:i 1 0", "gathering:i 5 5", "member:t a b"},
     0,
     AT_FAULT("gatherings", "community", "row 2 (1 row)"),
     "community"},
    /* link to oneself */
    {links,
     {"community:i 1 1 2", "listener:t a b d", "speaker:t a c d"},
     0,
     AT_FAULT("links", "speaker", "rows 1 and 3 (2 rows)"),
     "oneself"},
    /* duplicates */
    {links,
     {"community:i 1 1 1", "listener:t a b a", "speaker:t b c b"},
     0,
     AT_FAULT("links", "speaker", "row 3 (1 row)"),
     "duplicate"},
    {links,
     {"community:i 1 1 1", "listener:t a b b", "speaker:t b c a"},
     1,
     AT_FAULT("links", "speaker", "row 3 (1 row)"),
     "mutual"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a a"},
     0,
     AT_FAULT("members", "member", "row 5 (1 row)"),
     "duplicate"},
    {members,
     {"community:r 1 1 1 2 2", "member:r 1 1 1 2 3"},
     0,
     AT_FAULT("members", "member", "rows 2 and 3 (2 rows)"),
     "duplicate"},
    {broadcasts,
     {"community:i 1 1", "broadcast:i 9 9", "member:t a a", "precision:r 2 2"},
     0,
     AT_FAULT("broadcasts", "member", "row 2 (1 row)"),
     "duplicate"},
    {gatherings,
     {"community:i 1 1", "gathering:i 5 5", "member:t b b"},
     0,
     AT_FAULT("gatherings", "member", "row 2 (1 row)"),
     "duplicate"},
    {communities, {"community:i 1 2 1"}, 0, AT_FAULT("communities", "community", "row 3 (1 row)"), "duplicate"},
    /* across communities */
    {links,
     {"community:i 1 1 2", "listener:t a b d", "speaker:t b c c"},
     0,
     AT_FAULT("links", "speaker", "row 3 (1 row)"),
     "another community"},
    {links,
     {"community:i 1 1 1", "listener:t a b d", "speaker:t b c a"},
     0,
     AT_FAULT("links", "listener", "row 3 (1 row)"),
     "another community"},
    {broadcasts,
     {"community:i 1 1", "broadcast:i 9 9", "member:t a d", "precision:r 2 2"},
     0,
     AT_FAULT("broadcasts", "member", "row 2 (1 row)"),
     "another community"},
    {gatherings,
     {"community:i 1 2", "gathering:i 5 5", "member:t a b"},
     0,
     AT_FAULT("gatherings", "member", "row 2 (1 row)"),
     "another community"},
    /* missing where none may be */
    {members,
     {"community:i 1 NA 1 2 2", "member:t a b c a d"},
     0,
     AT_FAULT("members", "community", "row 2 (1 row)"),
     "missing"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a NA c a NA"},
     0,
     AT_FAULT("members", "member", "rows 2 and 5 (2 rows)"),
     "missing"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "weight:r 1 1 NA 1 1"},
     0,
     AT_FAULT("members", "weight", "row 3 (1 row)"),
     "missing"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "cost:i 0 0 NA NA NA"},
     0,
     AT_FAULT("members", "cost", "rows 3, 4 and 5 (3 rows)"),
     "missing"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "benefit:r NA 1 1 1 1"},
     0,
     AT_FAULT("members", "benefit", "row 1 (1 row)"),
     "missing"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "signal_precision:r 1 1 1 1 NA"},
     0,
     AT_FAULT("members", "signal_precision", "row 5 (1 row)"),
     "missing"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "stake_sd:r 1 1 1 NA 1"},
     0,
     AT_FAULT("members", "stake_sd", "row 4 (1 row)"),
     "missing"},
    {links,
     {"community:i 1 1 2", "listener:t a NA d", "speaker:t b c a"},
     0,
     AT_FAULT("links", "listener", "row 2 (1 row)"),
     "missing"},
    {links,
     {"community:r 1 1 2", "listener:t a b d", "speaker:t NA c a"},
     0,
     AT_FAULT("links", "speaker", "row 1 (1 row)"),
     "missing"},
    {links,
     {"community:i 1 1 2", "listener:t a b d", "speaker:t b c a", "relay_precision:r 1 NA 1"},
     0,
     AT_FAULT("links", "relay_precision", "row 2 (1 row)"),
     "missing"},
    {broadcasts,
     {"community:i 1 1", "broadcast:i 9 NA", "member:t a c", "precision:r 2 2"},
     0,
     AT_FAULT("broadcasts", "broadcast", "row 2 (1 row)"),
     "missing"},
    {broadcasts,
     {"community:i 1 1", "broadcast:i 9 9", "member:t a c", "precision:r NA 2"},
     0,
     AT_FAULT("broadcasts", "precision", "row 1 (1 row)"),
     "missing"},
    {gatherings,
     {"community:i 1 1", "gathering:t NA e", "member:t a b"},
     0,
     AT_FAULT("gatherings", "gathering", "row 1 (1 row)"),
     "missing"},
    {communities, {"community:i 1 2 NA"}, 0, AT_FAULT("communities", "community", "row 3 (1 row)"), "missing"},
    /* weight or precision that is not positive, other values out of range */
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "weight:r 1 0 1 1 1"},
     0,
     AT_FAULT("members", "weight", "row 2 (1 row)"),
     "positive"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "weight:i 1 1 -1 1 0"},
     0,
     AT_FAULT("members", "weight", "rows 3 and 5 (2 rows)"),
     "positive"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "signal_precision:r 1 -1 1 1 1"},
     0,
     AT_FAULT("members", "signal_precision", "row 2 (1 row)"),
     "negative"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "stake_sd:r 1 1 1 1 -0.1"},
     0,
     AT_FAULT("members", "stake_sd", "row 5 (1 row)"),
     "negative"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "benefit:r -1 1 1 1 1"},
     0,
     AT_FAULT("members", "benefit", "row 1 (1 row)"),
     "negative"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "expected_share:r 0 1 NA 1.01 -0.01"},
     0,
     AT_FAULT("members", "expected_share", "rows 4 and 5 (2 rows)"),
     "0 to 1"},
    {links,
     {"community:i 1 1 2", "listener:t a b d", "speaker:t b c a", "relay_precision:r 1 0 1"},
     0,
     AT_FAULT("links", "relay_precision", "row 2 (1 row)"),
     "positive"},
    {links,
     {"community:i 1 1 2", "listener:t a b d", "speaker:t b c a", "relay_precision:r 1 inf -1"},
     0,
     AT_FAULT("links", "relay_precision", "row 3 (1 row)"),
     "positive"},
    {broadcasts,
     {"community:i 1 1", "broadcast:i 9 9", "member:t a c", "precision:r 0 0"},
     0,
     AT_FAULT("broadcasts", "precision", "rows 1 and 2 (2 rows)"),
     "positive"},
    {broadcasts,
     {"community:i 1 1", "broadcast:i 9 9", "member:t a c", "precision:r 2 3"},
     0,
     AT_FAULT("broadcasts", "precision", "row 2 (1 row)"),
     "one precision"},
    /* not finite */
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "weight:r 1 inf 1 1 1"},
     0,
     AT_FAULT("members", "weight", "row 2 (1 row)"),
     "finite"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "cost:r 1 -inf inf 1 1"},
     0,
     AT_FAULT("members", "cost", "rows 2 and 3 (2 rows)"),
     "finite"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "benefit:r 1 1 1 1 inf"},
     0,
     AT_FAULT("members", "benefit", "row 5 (1 row)"),
     "finite"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "signal_precision:r 1 1 1 1 inf"},
     0,
     AT_FAULT("members", "signal_precision", "row 5 (1 row)"),
     "finite"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "stake_sd:r inf 1 1 1 1"},
     0,
     AT_FAULT("members", "stake_sd", "row 1 (1 row)"),
     "finite"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "turnout:r inf 1 1 1 1"},
     0,
     AT_FAULT("members", "turnout", "row 1 (1 row)"),
     "finite"},
    {links,
     {"community:i 1 1 2", "listener:t a b d", "speaker:t b c a", "relay_precision:r 1 -inf 1"},
     0,
     AT_FAULT("links", "relay_precision", "row 2 (1 row)"),
     "finite"},
    {broadcasts,
     {"community:i 1 1", "broadcast:i 9 9", "member:t a c", "precision:r inf inf"},
     0,
     AT_FAULT("broadcasts", "precision", "rows 1 and 2 (2 rows)"),
     "finite"},
    /* turnout that is not binary */
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "turnout:r 0.5 1 NA 0 -1"},
     0,
     AT_FAULT("members", "turnout", "rows 1 and 5 (2 rows)"),
     "neither 0 nor 1"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "turnout:i 0 1 NA 0 2"},
     0,
     AT_FAULT("members", "turnout", "row 5 (1 row)"),
     "neither 0 nor 1"},
    /* wrong type */
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "turnout:t yes no NA no no"},
     0,
     "members: column 'turnout' is of type text in all 5 rows (from row 1)",
     "numeric"},
    {members,
     {"community:i 1 1 1 2 2", "member:t a b c a d", "weight:t 1 1 1 1 1"},
     0,
     "members: column 'weight' is of type text in all 5 rows (from row 1)",
     "numeric"},
    {links,
     {"community:i 1 1 2", "listener:t a b d", "speaker:t b c a", "relay_precision:t x y z"},
     0,
     "links: column 'relay_precision' is of type text in all 3 rows (from row 1)",
     "numeric"},
    {broadcasts,
     {"community:i 1 1", "broadcast:i 9 9", "member:t a c", "precision:t 2 2"},
     0,
     "broadcasts: column 'precision' is of type text in all 2 rows (from row 1)",
     "numeric"},
    /* absent columns */
    {members, {"community:i 1 1 1 2 2"}, 0, "members: column 'member' is missing (5 rows)", "add it"},
    {members, {"member:t a b c d e"}, 0, "members: column 'community' is missing (5 rows)", "add it"},
    {links, {"community:i 1 1 2", "listener:t a b d"}, 0, "links: column 'speaker' is missing (3 rows)", "add it"},
    {links, {"community:i 1 1 2", "speaker:t b c a"}, 0, "links: column 'listener' is missing (3 rows)", "add it"},
    {broadcasts,
     {"community:i 1 1", "broadcast:i 9 9", "member:t a c"},
     0,
     "broadcasts: column 'precision' is missing (2 rows)",
     "add it"},
    {broadcasts,
     {"community:i 1 1", "member:t a c", "precision:r 1 1"},
     0,
     "broadcasts: column 'broadcast' is missing (2 rows)",
     "add it"},
    {gatherings,
     {"community:i 1 1", "member:t a b"},
     0,
     "gatherings: column 'gathering' is missing (2 rows)",
     "add it"},
    {communities, {"size:i 1 2"}, 0, "communities: column 'community' is missing (2 rows)", "add it"},
    /* an empty community, a community left out, nobody at all */
    {communities, {"community:i 1 2 3"}, 0, AT_FAULT("communities", "community", "row 3 (1 row)"), "no member"},
    {communities, {"community:i 1"}, 0, AT_FAULT("members", "community", "rows 4 and 5 (2 rows)"), "communities"},
    {members, {"community:i", "member:t"}, 0, "members: column 'member' has 0 rows", "at least one member"},
};

static void test_case(const struct bad_case* bad) {
  const char* const* const sound[5] = {sound_members, sound_links, sound_broadcasts, sound_gatherings,
                                       sound_communities};
  folkmote_table* tables[5];
  for (int t = 0; t < 5; ++t) tables[t] = build_table(t == (int)bad->table ? bad->columns : sound[t]);
  char message[FOLKMOTE_MESSAGE_BYTES] = "untouched";
  folkmote_study* study = (folkmote_study*)tables; /* must become NULL */
  const folkmote_status status =
      folkmote_study_create(tables[0], tables[1], tables[2], tables[3], tables[4], bad->mutual, &study, message);
  CHECK(study == NULL);
  int passed = CHECK_STATUS(status, FOLKMOTE_BAD_DATA, message);
  passed = CHECK_SAYS(message, bad->where) && passed;
  passed = CHECK_SAYS(message, bad->what) && passed;
  passed = CHECK(message[strlen(message) - 1] == '.') && passed;
  if (!passed) printf("    in case %d\n", (int)(bad - cases));
  for (int t = 0; t < 5; ++t) folkmote_table_destroy(tables[t]);
  CHECK_HEALTHY(0);
}

/* What the paragraph does not forbid is accepted. */
static void test_sound_variants(void) {
  const char* const* const member_tables[] = {
      (const char* const[]){"community:t x x", "member:r 1 2", "turnout:r NA NA", NULL},
      (const char* const[]){"community:i 5 3", "member:i 1 1", "expected_share:r NA 0", "weight:r 1e-300 1e300", NULL},
      (const char* const[]){"community:i 1 2", "member:t a a", "income:t low NA", "note:t NA NA", "x:r NA inf", NULL},
      (const char* const[]){"community:i 1 1", "member:t a b", "signal_precision:i 0 4", "stake_sd:i 0 0",
                            "cost:r -1e9 1e9", "benefit:i 0 2", NULL},
  };
  for (size_t k = 0; k < sizeof member_tables / sizeof *member_tables; ++k) {
    char message[FOLKMOTE_MESSAGE_BYTES];
    folkmote_table* table = build_table(member_tables[k]);
    folkmote_study* study = NULL;
    CHECK_STATUS(folkmote_study_create(table, NULL, NULL, NULL, NULL, 0, &study, message), FOLKMOTE_OK, message);
    CHECK(message[0] == '\0');
    folkmote_study_destroy(study);
    folkmote_table_destroy(table);
  }
}

static folkmote_status edit_status(int edit, folkmote_scenario* scenario, const folkmote_table* table, char* message) {
  if (edit == 0) return folkmote_scenario_add_links(scenario, table, 0, message);
  if (edit == 1) return folkmote_scenario_cut_links(scenario, table, 0, message);
  if (edit == 2) return folkmote_scenario_broadcast(scenario, table, 1.0, message);
  if (edit == 3) return folkmote_scenario_gathering(scenario, table, message);
  return folkmote_scenario_shift_cost(scenario, table, 0.5, message);
}

/* Edits that break a rule leave the scenario as it was. */
static void test_bad_edits(void) {
  const struct {
    int edit;
    const char* columns[4];
    const char* where;
  } edits[] = {
      {0, {"community:i 1", "listener:t a", "speaker:t b"}, AT_FAULT("links", "speaker", "row 1 (1 row)")},
      {0, {"community:i 1", "listener:t c", "speaker:t q"}, AT_FAULT("links", "speaker", "row 1 (1 row)")},
      {1, {"community:i 1 1", "listener:t a c", "speaker:t b a"}, AT_FAULT("links", "speaker", "row 2 (1 row)")},
      {2, {"community:i 4"}, AT_FAULT("broadcast", "community", "row 1 (1 row)")},
      {2, {"community:i 1 1", "member:t a a"}, AT_FAULT("broadcast", "member", "row 2 (1 row)")},
      {3, {"community:i 1 1", "member:t a d"}, AT_FAULT("gathering", "member", "row 2 (1 row)")},
      {3, {"member:t a"}, "gathering: column 'community' is missing (1 rows)"},
      {4, {"community:i 2 NA"}, AT_FAULT("shift_cost", "community", "row 2 (1 row)")},
      {4, {"community:i 2 2"}, AT_FAULT("shift_cost", "community", "row 2 (1 row)")},
  };
  folkmote_study* study = sound_study();
  folkmote_scenario* scenario = NULL;
  folkmote_scenario_create(study, &scenario, NULL);
  const uint64_t before = folkmote_scenario_digest(scenario);
  for (size_t k = 0; k < sizeof edits / sizeof *edits; ++k) {
    char message[FOLKMOTE_MESSAGE_BYTES];
    folkmote_table* table = build_table(edits[k].columns);
    CHECK_STATUS(edit_status(edits[k].edit, scenario, table, message), FOLKMOTE_BAD_DATA, message);
    CHECK_SAYS(message, edits[k].where);
    CHECK(folkmote_scenario_digest(scenario) == before);
    folkmote_table_destroy(table);
  }
  folkmote_scenario_destroy(scenario);
  folkmote_study_destroy(study);
}

void test_bad_data(void) {
  for (size_t k = 0; k < sizeof cases / sizeof *cases; ++k) test_case(&cases[k]);
  test_sound_variants();
  test_bad_edits();
  CHECK_HEALTHY(0);
}
