/*
 * Prints the digests of the example study's derivatives, by community, by member and by link, so that run.sh can
 * compare them with those of the wrappers.
 *
 * Usage: derivatives data-folder threads
 */
#include <inttypes.h>
#define main holdout_main /* its reader and its solver are used, its main is not */
#include "holdout.c"
#undef main

static int print_digest(folkmote_status status, folkmote_table* table) {
  const int bad = failed(status, "derivatives");
  if (!bad) printf("%016" PRIx64 "\n", folkmote_table_digest(table));
  folkmote_table_destroy(table);
  return bad;
}

int main(int argc, char** argv) {
  folkmote_study* study = NULL;
  folkmote_options* options = NULL;
  folkmote_equilibrium* equilibrium = NULL;
  folkmote_table* table = NULL;
  if (argc != 3) return 2;
  int bad = failed(folkmote_options_create(&options, message), "options") ||
            failed(folkmote_options_set(options, FOLKMOTE_THREADS, atof(argv[2]), message), "threads") ||
            read_study(argv[1], &study) || solve(study, options, &equilibrium);
  for (int level = FOLKMOTE_BY_COMMUNITY; !bad && level <= FOLKMOTE_BY_MEMBER; ++level) {
    const folkmote_status status = folkmote_sensitivity(equilibrium, 0, NULL, level, options, &table, message);
    bad = print_digest(status, table);
  }
  if (!bad) {
    const folkmote_status status = folkmote_link_sensitivity(equilibrium, options, &table, message);
    bad = print_digest(status, table);
  }
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_study_destroy(study);
  folkmote_options_destroy(options);
  return bad || folkmote_live_handles() != 0;
}
