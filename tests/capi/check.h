/* Counting checks; a failure prints file and line and the run goes on. */
#ifndef FOLKMOTE_CHECK_H
#define FOLKMOTE_CHECK_H

#include <stdio.h>
#include <string.h>

extern int checks_passed;
extern int checks_failed;

static inline int check_(int passed, const char* file, int line, const char* what) {
  if (passed) {
    ++checks_passed;
  } else {
    ++checks_failed;
    printf("%s:%d: failed: %s\n", file, line, what);
  }
  return passed;
}

static inline int check_says_(const char* have, const char* wanted, const char* file, int line) {
  int passed = have != NULL && strstr(have, wanted) != NULL;
  check_(passed, file, line, "the message names what it must");
  if (!passed) printf("    wanted \"%s\"\n    in     \"%s\"\n", wanted, have == NULL ? "(null)" : have);
  return passed;
}

/* `status` as a number, wanted status, and on failure what the library said. */
static inline int check_status_(int have, int wanted, const char* message, const char* file, int line,
                                const char* what) {
  int passed = check_(have == wanted, file, line, what);
  if (!passed) printf("    status %d, wanted %d: %s\n", have, wanted, message == NULL ? "" : message);
  return passed;
}

#define CHECK(condition) check_((condition) != 0, __FILE__, __LINE__, #condition)
#define CHECK_SAYS(have, wanted) check_says_((have), (wanted), __FILE__, __LINE__)
#define CHECK_STATUS(call, wanted, message) check_status_((int)(call), (wanted), (message), __FILE__, __LINE__, #call)

/* Last line of every test program, read by run.sh; gives the exit code. */
static inline int check_report(const char* program) {
  printf("%s: %d passed, %d failed\n", program, checks_passed, checks_failed);
  return checks_failed == 0 ? 0 : 1;
}

#endif
