/* The parts of the contract test; test_contract.c runs them in this order. */
#ifndef FOLKMOTE_CONTRACT_H
#define FOLKMOTE_CONTRACT_H

#include "build_tables.h"
#include "check.h"

/* Digest of the sound session on a library in good health; every part compares with it. */
extern uint64_t sound_digest;

/* The session still works, gives the same numbers, and holds no handle more than `handles`. */
#define CHECK_HEALTHY(handles)                            \
  do {                                                    \
    CHECK(session_digest(NULL) == sound_digest);          \
    CHECK(folkmote_live_handles() == (int64_t)(handles)); \
  } while (0)

void test_constants(void);
void test_tables(void);
void test_labels(void);
void test_bad_data(void);
void test_parameters(void);
void test_options(void);
void test_nulls(void);
void test_messages(void);
void test_runs(void);
void test_published(void);

#endif
