/* The C interface as a stranger meets it: plain C11, folkmote.h and nothing else of the library. */
#include "contract.h"

int checks_passed = 0;
int checks_failed = 0;
uint64_t sound_digest = 0;

static void test_constants_agree(void) {
  CHECK(strcmp(folkmote_version(), FOLKMOTE_VERSION) == 0);
  CHECK(folkmote_stream_version() == FOLKMOTE_STREAM_VERSION);
  CHECK(folkmote_message_bytes() == FOLKMOTE_MESSAGE_BYTES);
  CHECK(FOLKMOTE_MESSAGE_BYTES >= 256);
}

/* Numbers written out once more: a renumbered enumeration breaks every wrapper that was built before. */
static void test_numbers_are_pinned(void) {
  CHECK(FOLKMOTE_OK == 0 && FOLKMOTE_BAD_ARGUMENT == 1 && FOLKMOTE_BAD_DATA == 2 && FOLKMOTE_OUT_OF_MEMORY == 3 &&
        FOLKMOTE_CANCELLED == 4 && FOLKMOTE_BAD_FILE == 5 && FOLKMOTE_INTERNAL == 9);
  CHECK(FOLKMOTE_TEXT == 1 && FOLKMOTE_INTEGER == 2 && FOLKMOTE_REAL == 3);
  CHECK(FOLKMOTE_PRIOR_MEAN == 1 && FOLKMOTE_PRIOR_PRECISION == 2 && FOLKMOTE_SIGNAL_PRECISION == 3 &&
        FOLKMOTE_RELAY_PRECISION == 4 && FOLKMOTE_STAKE_SD == 5);
  CHECK(FOLKMOTE_BENEFIT == 16 && FOLKMOTE_COST == 17 && FOLKMOTE_REACH == 18);
  CHECK(FOLKMOTE_TOLERANCE == 32 && FOLKMOTE_SWEEPS == 33 && FOLKMOTE_THREADS == 34);
  CHECK(FOLKMOTE_SHARE_PAYOFF == 1 && FOLKMOTE_BY_COMMUNITY == 1 && FOLKMOTE_BY_MEMBER == 2);
}

static void test_status_words(void) {
  const struct {
    int status;
    const char* name;
  } known[] = {{FOLKMOTE_OK, "FOLKMOTE_OK"},
               {FOLKMOTE_BAD_ARGUMENT, "FOLKMOTE_BAD_ARGUMENT"},
               {FOLKMOTE_BAD_DATA, "FOLKMOTE_BAD_DATA"},
               {FOLKMOTE_OUT_OF_MEMORY, "FOLKMOTE_OUT_OF_MEMORY"},
               {FOLKMOTE_CANCELLED, "FOLKMOTE_CANCELLED"},
               {FOLKMOTE_BAD_FILE, "FOLKMOTE_BAD_FILE"},
               {FOLKMOTE_INTERNAL, "FOLKMOTE_INTERNAL"}};
  for (int status = -3; status <= 300; ++status) {
    const char* name = "unknown status";
    for (size_t k = 0; k < sizeof known / sizeof *known; ++k) {
      if (known[k].status == status) name = known[k].name;
    }
    const int is_known = strcmp(name, "unknown status") != 0;
    CHECK(strcmp(folkmote_status_name(status), name) == 0);
    CHECK((strcmp(folkmote_status_text(status), "unknown status") != 0) == is_known);
    CHECK(folkmote_status_text(status)[0] != '\0');
  }
}

void test_constants(void) {
  test_constants_agree();
  test_numbers_are_pinned();
  test_status_words();
}

int main(void) {
  CHECK(folkmote_live_handles() == 0);
  sound_digest = session_digest(NULL);
  CHECK(sound_digest != 0);
  CHECK_HEALTHY(0);
  test_constants();
  test_tables();
  test_labels();
  test_bad_data();
  test_parameters();
  test_options();
  test_nulls();
  test_messages();
  test_runs();
  test_published();
  CHECK_HEALTHY(0);
  return check_report("contract");
}
