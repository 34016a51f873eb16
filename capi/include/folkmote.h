/*
 * folkmote: turnout in a collective action on a listening network.
 *
 * This header is the whole contract between the kernel and its callers. It compiles as C99 and as C++.
 *
 * THE MODEL IN ONE PARAGRAPH.  Members of a community face an obstacle theta ~ N(mu, 1/alpha). Each member
 * holds an own signal of precision beta, hears the signals of those it listens to (relay precision gamma),
 * broadcasts (precision tau) and gatherings (everyone in one hears everyone, exactly), and a private stake
 * shock of standard deviation sigma. Acting pays benefit * (share of its reach that acts) - cost - (theta +
 * stake). Members act when their index (pooled estimate + stake shock) is at most a cutoff. The game is
 * supermodular in cutoffs, so that a least and a greatest equilibrium exist; the kernel encloses both and
 * says whether they are proved to be one.
 *
 * HOW TO USE IT.  Put data into tables, tables into a study, a study with beliefs and a payoff into an
 * equilibrium; then ask for tables of results:
 *
 *     folkmote_table_create -> folkmote_table_add_* -> folkmote_study_create
 *     folkmote_beliefs_create -> folkmote_beliefs_set;  folkmote_payoff_create -> folkmote_payoff_set
 *     folkmote_equilibrium_create -> folkmote_equilibrium_table, folkmote_turnout, folkmote_simulate,
 *                                    folkmote_sensitivity
 *     folkmote_scenario_create -> folkmote_scenario_<edit> ... -> folkmote_counterfactual
 *
 * IN FULL.  Three members who listen to nobody; the expected turnout (status checks left out):
 *
 *     const int64_t community[3] = {1, 1, 1}, member[3] = {1, 2, 3};
 *     const double mean = 0.5, precision = 1.0;
 *     char message[FOLKMOTE_MESSAGE_BYTES];
 *     double least[1];
 *     folkmote_table_create(3, &members, message);
 *     folkmote_table_add_integer(members, "community", community, message);
 *     folkmote_table_add_integer(members, "member", member, message);
 *     folkmote_study_create(members, NULL, NULL, NULL, NULL, 0, &study, message);
 *     folkmote_beliefs_create(&beliefs, message);
 *     folkmote_beliefs_set(beliefs, FOLKMOTE_PRIOR_MEAN, 1, &mean, message);
 *     folkmote_beliefs_set(beliefs, FOLKMOTE_PRIOR_PRECISION, 1, &precision, message);
 *     folkmote_beliefs_set(beliefs, FOLKMOTE_SIGNAL_PRECISION, 1, &precision, message);
 *     folkmote_payoff_create(FOLKMOTE_SHARE_PAYOFF, &payoff, message);
 *     folkmote_equilibrium_create(study, beliefs, payoff, NULL, &equilibrium, message);
 *     folkmote_equilibrium_table(equilibrium, FOLKMOTE_BY_COMMUNITY, &table, message);
 *     folkmote_table_get_real(table, 3, least, message);            (turnout_least of the community: near 0.5)
 *
 * and every handle goes to its _destroy function.
 *
 * RULES THAT HOLD FOR EVERY FUNCTION
 *  - A function that can fail returns a folkmote_status and takes `char *message` last: NULL, or room for
 *    FOLKMOTE_MESSAGE_BYTES bytes, owned by the caller. On success the message is the empty string; on failure
 *    one sentence that names what is wrong, where, and what to do.
 *  - On failure nothing is written to the outputs, except that an output handle is set to NULL.
 *  - Handles are created here and destroyed by the matching _destroy function; destroying NULL does nothing.
 *    A handle keeps what it needs of its inputs: inputs may be destroyed, in any order, right after the call.
 *  - Arrays passed in are read during the call only. Arrays passed out are allocated by the caller.
 *  - Strings are UTF-8 and end in a zero byte. A returned `const char *` belongs to the library and lives
 *    as long as the handle it came from (for ever when there is none).
 *  - No function prints, exits, installs a signal handler, or keeps state between calls apart from a counter
 *    of live handles. Different handles may be used from different threads; one handle that is being changed
 *    must not be used by another thread at the same time.
 *  - Rows and positions count from 0 in this interface; row numbers inside messages count from 1.
 *
 * DETERMINISM.  Same library version, inputs and seed give the same bytes for every number of threads, caller
 * language, compiler and processor. folkmote_stream_version() changes whenever any draw changes.
 *
 * STABILITY.  Numbers in the enumerations below are never reused or changed; new ones are appended in gaps.
 * Functions are never removed or changed within a major version.
 *
 * ETHICS.  Listening data describe people who may not have agreed to be in them. Obtain consent and ethics
 * approval, keep member-level tables private, report by community. Results are no list of whom to press.
 */
#ifndef FOLKMOTE_H
#define FOLKMOTE_H

#include <stddef.h>
#include <stdint.h>

#if defined(_WIN32)
#define FOLKMOTE_API
#elif defined(__GNUC__)
#define FOLKMOTE_API __attribute__((visibility("default")))
#else
#define FOLKMOTE_API
#endif

#ifdef __cplusplus
extern "C" {
#endif

/* ---- Version ------------------------------------------------------------------------------------------ */

#define FOLKMOTE_VERSION "0.1.0"
#define FOLKMOTE_STREAM_VERSION 1
#define FOLKMOTE_MESSAGE_BYTES 1024

/* The three constants above as the loaded library has them. A wrapper compares them on load with those that it was
 * built with: other versions of the header and of the library may have been paired by the machine's loader.
 *   version         "major.minor.patch"; the soname carries the major version
 *   stream version  goes up whenever any seeded draw changes: results of different stream versions are not to be merged
 *   message bytes   what every `message` below must have room for, the final zero byte included */
FOLKMOTE_API const char* folkmote_version(void);
FOLKMOTE_API int folkmote_stream_version(void);
FOLKMOTE_API size_t folkmote_message_bytes(void);

/* Handles of every kind created and not yet destroyed in this process; for leak tests. It is 0 when the library is
 * loaded, and the only thing that the library remembers between calls. May be called from any thread. */
FOLKMOTE_API int64_t folkmote_live_handles(void);

/* ---- Status ------------------------------------------------------------------------------------------- */

typedef enum folkmote_status {
  FOLKMOTE_OK = 0,
  FOLKMOTE_BAD_ARGUMENT = 1,  /* an argument is NULL, out of range, or of the wrong length */
  FOLKMOTE_BAD_DATA = 2,      /* a table breaks a rule; the message names table, column, rows and count */
  FOLKMOTE_OUT_OF_MEMORY = 3, /* nothing was changed; the session goes on */
  FOLKMOTE_CANCELLED = 4,     /* the progress callback asked to stop */
  FOLKMOTE_BAD_FILE = 5,      /* a file cannot be read or written, or is not what it should be */
  FOLKMOTE_INTERNAL = 9       /* a defect of the library: please report the message */
} folkmote_status;

/* Name ("FOLKMOTE_BAD_DATA") and plain text ("a table breaks a rule of the study data") of a status; "unknown status"
 * for every other number. Wrappers build the class of their conditions from the name. The texts are for people and may
 * be reworded; the names and numbers never change. */
FOLKMOTE_API const char* folkmote_status_name(int status);
FOLKMOTE_API const char* folkmote_status_text(int status);

/* ---- Tables: every input and every result -------------------------------------------------------------- */

/* Named columns of equal length. A column is of one of three types, and keeps the bits that were put in. */
typedef struct folkmote_table folkmote_table;

typedef enum folkmote_type {
  FOLKMOTE_TEXT = 1,    /* missing: NULL */
  FOLKMOTE_INTEGER = 2, /* int64_t; missing: INT64_MIN */
  FOLKMOTE_REAL = 3     /* double; missing: NaN */
} folkmote_type;

/* A table of `rows` >= 0 rows and no columns yet.
 *   rows   every column that is added must have this many values
 *   table  out: the new table; the caller destroys it. NULL on failure. */
FOLKMOTE_API folkmote_status folkmote_table_create(int64_t rows, folkmote_table** table, char* message);
FOLKMOTE_API void folkmote_table_destroy(folkmote_table* table);

/* Add a column at the end.
 *   name    not empty, not yet in the table (names differ by case); copied
 *   values  one per row, in row order; copied. NULL is allowed when the table has no rows.
 * Missing values are those of folkmote_type. Text may hold any bytes but zero; none of them is changed.
 * FOLKMOTE_BAD_ARGUMENT, and the table as it was, for a name that is empty or taken.
 * Ids (community, member, listener, speaker, broadcast, gathering) may be of any type: they are matched by
 * label, so that 7 and "7" are one member; a REAL id must be a whole number of size at most 2^53. */
FOLKMOTE_API folkmote_status folkmote_table_add_text(folkmote_table* table, const char* name, const char* const* values,
                                                     char* message);
FOLKMOTE_API folkmote_status folkmote_table_add_integer(folkmote_table* table, const char* name, const int64_t* values,
                                                        char* message);
FOLKMOTE_API folkmote_status folkmote_table_add_real(folkmote_table* table, const char* name, const double* values,
                                                     char* message);

/* Shape and columns. `column` runs from 0 to columns - 1, in the order in which columns were added; outside it, the
 * name is NULL and the type (a folkmote_type) is 0. A NULL table has neither rows nor columns. Result tables name their
 * columns as written with the function that makes them; read them by name, since later versions may add columns. */
FOLKMOTE_API int64_t folkmote_table_rows(const folkmote_table* table);
FOLKMOTE_API int64_t folkmote_table_columns(const folkmote_table* table);
FOLKMOTE_API const char* folkmote_table_column_name(const folkmote_table* table, int64_t column);
FOLKMOTE_API int folkmote_table_column_type(const folkmote_table* table, int64_t column);

/* Copy one column out.
 *   column  from 0; FOLKMOTE_BAD_ARGUMENT when there is none, or when it is of another type: nothing is converted
 *   values  out: room for one element per row, in row order. NULL is allowed when the table has no rows.
 * Text pointers belong to the table and stay valid until it is destroyed, also when columns are added. */
FOLKMOTE_API folkmote_status folkmote_table_get_text(const folkmote_table* table, int64_t column, const char** values,
                                                     char* message);
FOLKMOTE_API folkmote_status folkmote_table_get_integer(const folkmote_table* table, int64_t column, int64_t* values,
                                                        char* message);
FOLKMOTE_API folkmote_status folkmote_table_get_real(const folkmote_table* table, int64_t column, double* values,
                                                     char* message);

/* 64-bit digest of rows, names, types and values (FNV-1a over a canonical little-endian form), equal in every
 * language and on every machine for equal tables. Order of columns and rows counts; -0 equals 0, and all NaN are
 * one. It finds accidental differences and is no protection against intent. NULL gives 0. */
FOLKMOTE_API uint64_t folkmote_table_digest(const folkmote_table* table);

/* ---- Study: who listens to whom ------------------------------------------------------------------------ */

/* Checked and indexed data; never changed once made, so that any number of threads may use it. */
typedef struct folkmote_study folkmote_study;

/* Check the tables and index them. `links`, `broadcasts`, `gatherings` and `communities` may be NULL.
 *   members      community, member (unique in its community); optional turnout (0/1/missing), expected_share
 *                (0..1/missing), weight (> 0), cost, benefit (>= 0), signal_precision (>= 0), stake_sd (>= 0)
 *   links        community, listener, speaker; optional relay_precision (> 0, infinite = exact)
 *   broadcasts   community, broadcast, member, precision (> 0, finite, one value per broadcast)
 *   gatherings   community, gathering, member
 *   communities  community (exactly the communities of `members`)
 * An id is a label of at least one character; 0 rows are allowed in every table but `members`. Where an optional
 * column is absent, weight is 1, turnout and expected_share are missing, and beliefs or payoff give the rest.
 * Other columns are ignored. `mutual` non-zero adds the reverse of every link. Communities are numbered
 * in the order in which `members` first names them.
 * FOLKMOTE_BAD_DATA with table, column, first rows and count for: unknown member or community, link to oneself,
 * duplicate link or member (with `mutual`, also a contact listed in both directions), a member of another community,
 * a missing value where none may be, a value out of range or not finite, a wrong type, an empty community.
 *   study  out: the new study; the caller destroys it. NULL on failure. It keeps nothing of the tables' memory. */
FOLKMOTE_API folkmote_status folkmote_study_create(const folkmote_table* members, const folkmote_table* links,
                                                   const folkmote_table* broadcasts, const folkmote_table* gatherings,
                                                   const folkmote_table* communities, int mutual,
                                                   folkmote_study** study, char* message);
FOLKMOTE_API void folkmote_study_destroy(folkmote_study* study);

/* One row per community, in study order: community (as `members` has it), members, links, broadcasts, gatherings,
 * hears_mean and hears_most (members heard, gatherings included), turnout_observed (weighted share of those observed;
 * NaN: none), turnout_missing.
 *   table  out: the caller destroys it. NULL on failure. */
FOLKMOTE_API folkmote_status folkmote_study_summary(const folkmote_study* study, folkmote_table** table, char* message);

/* Digest of the checked study: equal for equal members (their ids by value and type, their order, their
 * columns), links, broadcasts and gatherings, in every language. 0 for NULL, and when there is not enough memory to
 * compute it. */
FOLKMOTE_API uint64_t folkmote_study_digest(const folkmote_study* study);

/* ---- Parameters of beliefs and payoff ------------------------------------------------------------------ */

/* Precisions are inverse variances, in 1 / (units of the obstacle)^2. Obstacle, benefit, cost and stakes share
 * one unit. Numbers 1 to 5 belong to beliefs, 16 to 18 to the payoff. */
typedef enum folkmote_parameter {
  FOLKMOTE_PRIOR_MEAN = 1,       /* mu; finite; one, or one per community */
  FOLKMOTE_PRIOR_PRECISION = 2,  /* alpha > 0; one, or one per community */
  FOLKMOTE_SIGNAL_PRECISION = 3, /* beta >= 0; one, one per community, or one per member */
  FOLKMOTE_RELAY_PRECISION = 4,  /* gamma > 0, infinite = exact (default); per member means per listener */
  FOLKMOTE_STAKE_SD = 5,         /* sigma >= 0; default 0 */
  FOLKMOTE_BENEFIT = 16,         /* b >= 0; default 1 */
  FOLKMOTE_COST = 17,            /* c, finite; default 0 */
  FOLKMOTE_REACH = 18            /* mix in [0, 1]: 0 community (default), 1 contacts; one value */
} folkmote_parameter;

/* Range of a parameter, for messages and forms of a caller; the _set functions check it themselves.
 *   low, high            out: the ends; infinite where there is none
 *   low_open, high_open  out: 1 where the end itself is not allowed, else 0
 * FOLKMOTE_BAD_ARGUMENT for an unknown parameter. */
FOLKMOTE_API folkmote_status folkmote_parameter_bounds(int parameter, double* low, double* high, int* low_open,
                                                       int* high_open, char* message);

/* What members believe before and learn from their signals: parameters 1 to 5. */
typedef struct folkmote_beliefs folkmote_beliefs;

/* Empty beliefs: prior mean and precision must be set before solving, signal precision too unless `members`
 * has that column. A member or link column, where present, overrides these values.
 *   beliefs  out: the new beliefs; the caller destroys them. They fit any study. NULL on failure. */
FOLKMOTE_API folkmote_status folkmote_beliefs_create(folkmote_beliefs** beliefs, char* message);
FOLKMOTE_API void folkmote_beliefs_destroy(folkmote_beliefs* beliefs);

/* Set a parameter numbered 1 to 5, or set it anew.
 *   count   1, the number of communities, or the number of members: as fine as folkmote_parameter allows. Whether
 *           it fits the study is checked when solving (FOLKMOTE_BAD_ARGUMENT, with the numbers that would fit).
 *   values  `count` of them, in study order for communities, in the order of `members` for members; copied
 * FOLKMOTE_BAD_ARGUMENT, and the old values kept, when a value is NaN or out of range: the message says which. */
FOLKMOTE_API folkmote_status folkmote_beliefs_set(folkmote_beliefs* beliefs, int parameter, int64_t count,
                                                  const double* values, char* message);

/* What acting pays: a kind, and parameters 16 to 18. */
typedef struct folkmote_payoff folkmote_payoff;

/* The kinds of payoff. The stake is the member's private shock, drawn with FOLKMOTE_STAKE_SD. */
typedef enum folkmote_payoff_kind {
  FOLKMOTE_SHARE_PAYOFF = 1 /* b * (share of the reach that acts) - c - (theta + stake) */
} folkmote_payoff_kind;

/* A payoff with benefit 1, cost 0 and the community as reach.
 *   kind    a folkmote_payoff_kind; FOLKMOTE_BAD_ARGUMENT for other numbers
 *   payoff  out: the new payoff; the caller destroys it. It fits any study. NULL on failure. */
FOLKMOTE_API folkmote_status folkmote_payoff_create(int kind, folkmote_payoff** payoff, char* message);
FOLKMOTE_API void folkmote_payoff_destroy(folkmote_payoff* payoff);

/* Set a parameter numbered 16 to 18; `count` and `values` as in folkmote_beliefs_set. A member column `benefit` or
 * `cost`, where present, overrides these values. */
FOLKMOTE_API folkmote_status folkmote_payoff_set(folkmote_payoff* payoff, int parameter, int64_t count,
                                                 const double* values, char* message);

/* ---- Options of a run ---------------------------------------------------------------------------------- */

/* How to compute, as opposed to what. Every function that takes options takes NULL for the defaults. */
typedef struct folkmote_options folkmote_options;

/* Tolerance and sweeps are part of an equilibrium's digest, and are read when solving only. The number of threads
 * counts in every function that takes options; fewer are used when the machine does not give as many. */
typedef enum folkmote_option {
  FOLKMOTE_TOLERANCE = 32, /* widest enclosure of a cutoff that counts as found (64 roundings of the largest
                              cutoff, where that is wider); 1e-13..1, default 1e-10 */
  FOLKMOTE_SWEEPS = 33,    /* cap on sweeps and leaps per end; 1..1e9, default 100000 */
  FOLKMOTE_THREADS = 34,   /* worker threads; 1..1024, default 1; never changes a result */
  /* How the simulated mean difference of a counterfactual and its standard error are found; 1 (default) or 0 each.
   * They change the numbers, not what is estimated. */
  FOLKMOTE_COMMON_DRAWS = 40, /* baseline and scenario share every draw */
  FOLKMOTE_OVER_STAKES = 41,  /* chances over the stakes in place of actions (conditional Monte Carlo) */
  FOLKMOTE_CONTROL = 42       /* the analytic turnout curve as control variate */
} folkmote_option;

/* Options at their defaults, without progress.
 *   options  out: the new options; the caller destroys them. NULL on failure. */
FOLKMOTE_API folkmote_status folkmote_options_create(folkmote_options** options, char* message);
FOLKMOTE_API void folkmote_options_destroy(folkmote_options* options);
/* Set one option.
 *   option  a folkmote_option; FOLKMOTE_BAD_ARGUMENT for other numbers
 *   value   within the range given with the option, ends included; whole for sweeps and threads
 * FOLKMOTE_BAD_ARGUMENT, and the old value kept, otherwise. */
FOLKMOTE_API folkmote_status folkmote_options_set(folkmote_options* options, int option, double value, char* message);

/* Progress and cancel. The callback runs on the thread that called the library, about ten times a second and
 * at the end, with `done` of `total` units of work and the caller's `user`. Non-zero cancels: the call
 * returns FOLKMOTE_CANCELLED and makes nothing. It must return normally: no exception, no long jump.
 *   done, total  0 <= done <= total. A unit is a community, or a piece of its plays; a call of several stages counts
 * each of them from 0. user         as given to folkmote_options_progress It must not destroy the options, nor start a
 * run with them. It is not called again once it has cancelled. */
typedef int (*folkmote_progress)(int64_t done, int64_t total, void* user);

/* Set or replace the callback.
 *   callback  NULL: none any more
 *   user      handed to the callback untouched; may be NULL; must live as long as runs with these options */
FOLKMOTE_API folkmote_status folkmote_options_progress(folkmote_options* options, folkmote_progress callback,
                                                       void* user, char* message);

/* ---- Equilibrium --------------------------------------------------------------------------------------- */

/* Both ends of the set of cutoff equilibria of every community, with what they were solved from; never changed once
 * made, so that any number of threads may use it. */
typedef struct folkmote_equilibrium folkmote_equilibrium;

/* Rows of a result: one per community, or one per member. Member-level results of real people are private. */
typedef enum folkmote_level { FOLKMOTE_BY_COMMUNITY = 1, FOLKMOTE_BY_MEMBER = 2 } folkmote_level;

/* Enclose the least and the greatest cutoff equilibrium of every community (monotone best replies from both
 * ends; Milgrom & Roberts 1990, Vives 1990, Van Zandt & Vives 2007).
 *   study, beliefs, payoff  what is solved; copied or shared, and free to be destroyed or changed afterwards
 *   options                 NULL: the defaults
 *   equilibrium             out: the caller destroys it. NULL on failure.
 * FOLKMOTE_BAD_ARGUMENT when a needed belief is not set or has a number of values that does not fit the study. That a
 * community is not solved within the tolerance is no failure: its verdict says so. */
FOLKMOTE_API folkmote_status folkmote_equilibrium_create(const folkmote_study* study, const folkmote_beliefs* beliefs,
                                                         const folkmote_payoff* payoff, const folkmote_options* options,
                                                         folkmote_equilibrium** equilibrium, char* message);
FOLKMOTE_API void folkmote_equilibrium_destroy(folkmote_equilibrium* equilibrium);

/* BY_COMMUNITY: community, verdict, contraction_bound, turnout_least, turnout_greatest, width, iterations.
 * BY_MEMBER, in the order of `members`: community, member, cutoff_least, cutoff_greatest, chance_least,
 * chance_greatest (chance of acting before anything is known), information_held (K, the precision of all that the
 * member holds beside the prior).
 * Verdicts: "proved unique" (contraction_bound < 1), "bracketed" (both ends agree within the tolerance, not
 * proved), "several" (the ends are proved to differ), "not converged" (width tells the enclosure reached).
 * `contraction_bound`, rounded outward: max_i b_i sum_j w_ij (1 - rho_ij) / (s_ij sqrt(2 pi)); where that is 1 or more
 * and the ends agree, the weighted sup-norm bound on the finished enclosure, if smaller. Below 1 it proves one
 * equilibrium. `turnout_least` goes with the least cutoffs and `turnout_greatest` with the greatest; `width` is the
 * largest distance between the two cutoffs of a member; `iterations` are those of the slower end. Turnout and chances
 * are shares in 0..1, weighted by the column `weight`; cutoffs are in the units of the obstacle. level  a
 * folkmote_level; FOLKMOTE_BAD_ARGUMENT for other numbers table  out: the caller destroys it. NULL on failure. */
FOLKMOTE_API folkmote_status folkmote_equilibrium_table(const folkmote_equilibrium* equilibrium, int level,
                                                        folkmote_table** table, char* message);

/* Digest of everything the equilibrium was solved from: study, beliefs, payoff, tolerance, sweeps. For provenance
 * records and for merging shards: equal digests, seeds and stream versions mean equal draws. 0 for NULL, and when
 * there is not enough memory to compute it. */
FOLKMOTE_API uint64_t folkmote_equilibrium_digest(const folkmote_equilibrium* equilibrium);

/* Analytic turnout. Without `given`: one row per community (and value of `at_least`): community, [at_least,]
 * turnout_least, turnout_greatest, sd_least, sd_greatest [, chance_least, chance_greatest, chance_method].
 * With `given_count` values of the obstacle theta: one row per community and theta (and at_least), with the
 * column given after community. `at_least_count` thresholds in [0, 1] of turnout. chance_method is "exact" (no shared
 * information, equal weights, at most 500 members) or "normal approximation" (given theta, shared information
 * included). given     `given_count` finite values, in the units of the obstacle; NULL when there are none at_least
 * `at_least_count` values; NULL when there are none. A chance is that of turnout >= the threshold. options   threads
 * and progress; NULL: the defaults table     out: rows by community in study order, then `given`, then `at_least`, as
 * the caller ordered them; the caller destroys it. NULL on failure. */
FOLKMOTE_API folkmote_status folkmote_turnout(const folkmote_equilibrium* equilibrium, int64_t given_count,
                                              const double* given, int64_t at_least_count, const double* at_least,
                                              const folkmote_options* options, folkmote_table** table, char* message);

/* Seeded plays, replications first_draw .. first_draw + draws - 1, `first_draw` >= 0 counting from 0 and `draws` >= 1;
 * any split of the range gives the same rows. `given`:
 * NULL, or one value of theta. BY_COMMUNITY: community, replication (from 1), obstacle, turnout_least,
 * turnout_greatest. BY_MEMBER: community, member, replication, index, action_least, action_greatest.
 *   first_draw  >= 0, and draws >= 1; their sum at most 2^63 - 1
 *   seed        any 64 bits; draws depend on seed, community and replication only, never on the shard
 *   given       NULL: theta is drawn from the prior anew in every play; else one finite value for all of them
 *   level       a folkmote_level; rows run community by community, or play by play over the members in order
 *   options     threads and progress; NULL: the defaults
 *   table       out: actions are 1 (acts) and 0; the caller destroys it. NULL on failure.
 * FOLKMOTE_OUT_OF_MEMORY when the rows do not fit: ask for fewer draws at a time, in shards. */
FOLKMOTE_API folkmote_status folkmote_simulate(const folkmote_equilibrium* equilibrium, int64_t first_draw,
                                               int64_t draws, uint64_t seed, const double* given, int level,
                                               const folkmote_options* options, folkmote_table** table, char* message);

/* The same for plays whose obstacle lies in [low, high]: equal ends give its value, infinite ends leave a side open.
 * The obstacle follows its prior truncated to the range, drawn from the uniform that draws it without a range.
 * FOLKMOTE_BAD_ARGUMENT where low > high, an end is NaN, or the range has a prior chance below 1e-12. */
FOLKMOTE_API folkmote_status folkmote_simulate_within(const folkmote_equilibrium* equilibrium, int64_t first_draw,
                                                      int64_t draws, uint64_t seed, double low, double high, int level,
                                                      const folkmote_options* options, folkmote_table** table,
                                                      char* message);

/* ---- Sensitivity --------------------------------------------------------------------------------------- */

/* What derivatives are taken in, beside FOLKMOTE_PRIOR_MEAN, FOLKMOTE_PRIOR_PRECISION, FOLKMOTE_SIGNAL_PRECISION,
 * FOLKMOTE_RELAY_PRECISION, FOLKMOTE_STAKE_SD, FOLKMOTE_BENEFIT and FOLKMOTE_COST. */
typedef enum folkmote_sensitive {
  FOLKMOTE_BROADCAST_PRECISION = 24 /* of each broadcast of the study by itself; not settable */
} folkmote_sensitive;

/* Derivatives of the equilibrium at both ends, by the implicit function theorem: one row per community and parameter,
 * and one per broadcast for its precision (`broadcast`: its number in the community, from 1, in the order in which it
 * was added; missing in other rows). All values of the parameter in a community move alike, those of columns too;
 * exact relays stay exact; who is in a member's reach stays.
 * BY_COMMUNITY: community, parameter (its name), broadcast, turnout_least, turnout_greatest (of expected turnout),
 * status_least, status_greatest.
 * BY_MEMBER, the members of a community in the order of `members` for each parameter: community, member, parameter,
 * broadcast, cutoff_least, cutoff_greatest, chance_least, chance_greatest (of the member's cutoff and chance when all
 * move alike), turnout_own_least, turnout_own_greatest (of expected turnout when the member's own value alone moves;
 * for the relay precision, that of all reports that it hears; NaN where members have no value of their own),
 * status_least, status_greatest.
 * A status is "solved", or says why there are only NaN at that end: "near a tangency" (two equilibria meet there or
 * have just parted), "a gain jumps" (an index is certain, given another), "not converged", "too many pairs" (above
 * 2,000 members, of whom more than 5e7 ordered pairs share information; an audience counts with its square). parameters
 * `parameter_count` different numbers; with count 0 all of the above, and NULL is allowed level       a folkmote_level
 *   options     threads and progress; NULL: the defaults
 *   table       out: in units of turnout (0..1), chance or cutoff per unit of the parameter; the caller destroys it.
 *               NULL on failure. */
FOLKMOTE_API folkmote_status folkmote_sensitivity(const folkmote_equilibrium* equilibrium, int64_t parameter_count,
                                                  const int* parameters, int level, const folkmote_options* options,
                                                  folkmote_table** table, char* message);

/* The derivative of expected turnout in every candidate link: in the precision with which a listener hears a speaker's
 * signal, at what it is now, 0 where it does not hear it. Everybody's reach stays as it is, and nobody forwards the
 * report. One row per ordered pair of a community: community, listener, speaker, precision (that of the report now, at
 * most the speaker's signal precision, which it has when exact), turnout_least, turnout_greatest, status_least,
 * status_greatest (as above). 0 where the speaker has no signal to report. Rows are pairs of people: keep them private;
 * they are no list of whom to press.
 *   options  threads and progress; NULL: the defaults
 *   table    out: the caller destroys it. NULL on failure.
 * FOLKMOTE_BAD_ARGUMENT for a community above 2,000 members, or more than 5,000,000 pairs in all. */
FOLKMOTE_API folkmote_status folkmote_link_sensitivity(const folkmote_equilibrium* equilibrium,
                                                       const folkmote_options* options, folkmote_table** table,
                                                       char* message);

/* ---- Scenarios and counterfactuals --------------------------------------------------------------------- */

/* Edits of a study, and the edited study. An edit that fails changes nothing, and the scenario goes on. */
typedef struct folkmote_scenario folkmote_scenario;

/* A scenario is a list of edits of a study, applied in the order in which they are added. Each edit is checked
 * against the study as the edits before it left it.
 *   study     the baseline; it is not changed, and may be destroyed
 *   scenario  out: no edits yet; the caller destroys it. NULL on failure. */
FOLKMOTE_API folkmote_status folkmote_scenario_create(const folkmote_study* study, folkmote_scenario** scenario,
                                                      char* message);
FOLKMOTE_API void folkmote_scenario_destroy(folkmote_scenario* scenario);

/* Add or cut the links of a table as in folkmote_study_create. Cutting a link that is not there, or adding one that is,
 * is FOLKMOTE_BAD_DATA. `links` NULL in cut_links cuts every link.
 *   links   community, listener, speaker; add_links takes relay_precision too
 *   mutual  non-zero: each row stands for both directions, and both must be there to cut, or absent to add
 * A table with one row at fault is refused as a whole. */
FOLKMOTE_API folkmote_status folkmote_scenario_add_links(folkmote_scenario* scenario, const folkmote_table* links,
                                                         int mutual, char* message);
FOLKMOTE_API folkmote_status folkmote_scenario_cut_links(folkmote_scenario* scenario, const folkmote_table* links,
                                                         int mutual, char* message);

/* Lose a random `share` in [0, 1] of the contacts of each community: the nearest whole number of them, chosen by the
 * seed. A contact is a pair with a link in either direction; both directions go together. share  FOLKMOTE_BAD_ARGUMENT
 * outside [0, 1]; 0 changes nothing, 1 cuts every link seed   any 64 bits; every set of that many contacts of a
 * community is equally likely */
FOLKMOTE_API folkmote_status folkmote_scenario_thin_links(folkmote_scenario* scenario, double share, uint64_t seed,
                                                          char* message);

/* Rewire a random `share` in [0, 1] of the contacts of each community: the nearest whole number of them. Each drawn
 * contact exchanges partners with another one of its kind (heard in both directions, or in one): a-b and c-d become
 * a-d and c-b, so that everybody hears as many, and is heard by as many, as before. Each link keeps its listener and
 * relay precision. Where a hundred draws find no exchange without a double contact, the contact stays as it is.
 * Gatherings stay. share, seed  as in folkmote_scenario_thin_links */
FOLKMOTE_API folkmote_status folkmote_scenario_rewire_links(folkmote_scenario* scenario, double share, uint64_t seed,
                                                            char* message);

/* One more broadcast per community with the given precision (> 0, finite), or one more gathering. `audience`: NULL for
 * everyone, or a table with community (all of its members), or with community and member.
 * A community that the audience leaves out gets none. A row that stands twice is FOLKMOTE_BAD_DATA. Members of a
 * gathering hear each other exactly, whatever links they have. */
FOLKMOTE_API folkmote_status folkmote_scenario_broadcast(folkmote_scenario* scenario, const folkmote_table* audience,
                                                         double precision, char* message);
FOLKMOTE_API folkmote_status folkmote_scenario_gathering(folkmote_scenario* scenario, const folkmote_table* audience,
                                                         char* message);

/* Add `by` (finite; in units of the benefit) to the cost of the `audience` (as above), on top of what the payoff or a
 * column gives. A negative number makes acting cheaper. Shifts add up. */
FOLKMOTE_API folkmote_status folkmote_scenario_shift_cost(folkmote_scenario* scenario, const folkmote_table* audience,
                                                          double by, char* message);

/* The same for the benefit. A benefit that ends below 0 is FOLKMOTE_BAD_ARGUMENT when the scenario is solved, and names
 * the community. */
FOLKMOTE_API folkmote_status folkmote_scenario_shift_benefit(folkmote_scenario* scenario,
                                                             const folkmote_table* audience, double by, char* message);

/* Replace a belief parameter (1 to 5), overriding any member or link column of that name. `count` and `values` as in
 * folkmote_beliefs_set, but the number is checked against the study at once. */
FOLKMOTE_API folkmote_status folkmote_scenario_set_beliefs(folkmote_scenario* scenario, int parameter, int64_t count,
                                                           const double* values, char* message);

/* Extend hearing to `hops` (1..64) links: original reports are forwarded, each along the most precise path
 * (relay variances add along it), and nobody is counted twice. A gathering is one exact hop. 1 is hearing as the
 * study has it; of several such edits the last one counts. */
FOLKMOTE_API folkmote_status folkmote_scenario_forward_reports(folkmote_scenario* scenario, int hops, char* message);

/* The edited study, as one of its own, and a digest of baseline and edits (0 for NULL, and when there is not enough
 * memory to compute it). Belief overrides of folkmote_scenario_set_beliefs are no part of the study.
 *   study  out: the caller destroys it. NULL on failure. */
FOLKMOTE_API folkmote_status folkmote_scenario_study(const folkmote_scenario* scenario, folkmote_study** study,
                                                     char* message);
FOLKMOTE_API uint64_t folkmote_scenario_digest(const folkmote_scenario* scenario);

/* Prospective counterfactual: the scenario's equilibrium beside the baseline's, analytic means at both ends and `draws`
 * (0, or >= 2) seeded plays on common random numbers. The scenario must come from the equilibrium's study.
 * First row: scope "pooled" (weighted over all members); then one row "community" each:
 *   scope, community, members, baseline_verdict, scenario_verdict, baseline_least, baseline_greatest,
 *   scenario_least, scenario_greatest, difference_least, difference_greatest (end against same end), difference_low,
 *   difference_high (the whole interval over equilibria), simulated_least, simulated_greatest (mean difference in
 *   the plays), standard_error_least, standard_error_greatest (Monte Carlo), spread_low, spread_high (5 % and 95 %
 *   points of the difference over plays: lowest of both ends, highest of both). Without draws these are NaN.
 * The pooled verdict is the weakest one. `community` is missing in the first row. All are shares in 0..1 or their
 * differences, scenario less baseline.
 *   equilibrium  of the baseline; the scenario is solved with its beliefs, payoff, tolerance and sweeps
 *   scenario     may come from another study handle of equal content; FOLKMOTE_BAD_ARGUMENT when it differs
 *   draws, seed  the plays are those of folkmote_simulate from replication 0: both sides share every draw
 *   options      threads and progress; NULL: the defaults. Its stages are solving, then comparing block by block.
 *   table        out: the caller destroys it. NULL on failure. */
FOLKMOTE_API folkmote_status folkmote_counterfactual(const folkmote_equilibrium* equilibrium,
                                                     const folkmote_scenario* scenario, int64_t draws, uint64_t seed,
                                                     const folkmote_options* options, folkmote_table** table,
                                                     char* message);

/* The same given that the obstacle lies in [low, high], as in folkmote_simulate_within: the analytic means too are
 * those given the range (by quadrature to about 1e-12). Where a scenario changes the prior, each side follows its own.
 */
FOLKMOTE_API folkmote_status folkmote_counterfactual_within(const folkmote_equilibrium* equilibrium,
                                                            const folkmote_scenario* scenario, int64_t draws,
                                                            uint64_t seed, double low, double high,
                                                            const folkmote_options* options, folkmote_table** table,
                                                            char* message);

/* The plays of a counterfactual, replications first_draw .. first_draw + draws - 1 (any split gives the same rows):
 * community, replication (from 1), obstacle (of the baseline), baseline_least, baseline_greatest, scenario_least,
 * scenario_greatest (turnout of that play). Range, condition and errors as in folkmote_simulate_within. */
FOLKMOTE_API folkmote_status folkmote_counterfactual_plays(const folkmote_equilibrium* equilibrium,
                                                           const folkmote_scenario* scenario, int64_t first_draw,
                                                           int64_t draws, uint64_t seed, double low, double high,
                                                           const folkmote_options* options, folkmote_table** table,
                                                           char* message);

/* ---- Chunks: plays over processes and machines --------------------------------------------------------- */

/* Any split of the replications merges to the bytes of the single run. A chunk file carries library and stream version,
 * seed, range of draws and a digest of its inputs (equilibrium, scenario, condition, level); it is written under
 * another name, flushed and renamed, so that a file of its name is whole or absent. */

/* Play replications first_draw .. first_draw + draws - 1 into the file `path`: as folkmote_simulate_within, or, with a
 * scenario, as folkmote_counterfactual_plays (level FOLKMOTE_BY_COMMUNITY only). A whole file of these very inputs,
 * draws, seed and versions is left as it is and nothing is computed: run again what was killed.
 *   scenario  NULL: plays of the equilibrium
 *   path      of a file in a folder that exists
 *   computed  out: 1, or 0 when the file was there; may be NULL
 * FOLKMOTE_BAD_FILE when it cannot be written, or when another file stands there. */
FOLKMOTE_API folkmote_status folkmote_chunk_run(const folkmote_equilibrium* equilibrium,
                                                const folkmote_scenario* scenario, int64_t first_draw, int64_t draws,
                                                uint64_t seed, double low, double high, int level,
                                                const folkmote_options* options, const char* path, int* computed,
                                                char* message);

/* Merge the files, in any order, into the table of draws first_draw .. first_draw + draws - 1.
 * FOLKMOTE_BAD_FILE for a file that is absent or damaged, draws that are missing, stand twice or are not in the range,
 * and for files that differ in version, stream version, inputs or seed: the message names the file or the draws. paths
 * `count` >= 1 of them table  out: the very table of the single run, digest included; the caller destroys it. NULL on
 * failure. */
FOLKMOTE_API folkmote_status folkmote_chunk_merge(int64_t count, const char* const* paths, int64_t first_draw,
                                                  int64_t draws, folkmote_table** table, char* message);

/* What stands in the headers, one row per file: file, version, stream_version, inputs (hexadecimal), seed (decimal),
 * first_draw (from 0), draws, rows. Arguments and errors as above. */
FOLKMOTE_API folkmote_status folkmote_chunk_table(int64_t count, const char* const* paths, folkmote_table** table,
                                                  char* message);

#ifdef __cplusplus
}
#endif

#endif /* FOLKMOTE_H */
