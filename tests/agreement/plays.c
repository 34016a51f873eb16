/*
 * Prints seeded plays of the example study, so that run.sh can compare ranges of draws that were split differently.
 *
 * Usage: plays data-folder level first-draw draws threads        level: 1 by community, 2 by member
 */
#define main holdout_main /* its reader and its solver are used, its main is not */
#include "holdout.c"
#undef main

int main(int argc, char** argv) {
  folkmote_study* study = NULL;
  folkmote_options* options = NULL;
  folkmote_equilibrium* equilibrium = NULL;
  folkmote_table* plays = NULL;
  if (argc != 6) return 2;
  int bad = failed(folkmote_options_create(&options, message), "options") ||
            failed(folkmote_options_set(options, FOLKMOTE_THREADS, atof(argv[5]), message), "threads") ||
            read_study(argv[1], &study) || solve(study, options, &equilibrium) ||
            failed(folkmote_simulate(equilibrium, atoll(argv[3]), atoll(argv[4]), SEED, NULL, atoi(argv[2]), options,
                                     &plays, message),
                   "simulate") ||
            write_rows(stdout, plays, "play", 0);
  folkmote_table_destroy(plays);
  folkmote_equilibrium_destroy(equilibrium);
  folkmote_study_destroy(study);
  folkmote_options_destroy(options);
  return bad || folkmote_live_handles() != 0;
}
