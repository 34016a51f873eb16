/* Tables and small studies for the tests, written as text. */
#ifndef FOLKMOTE_BUILD_TABLES_H
#define FOLKMOTE_BUILD_TABLES_H

#include "folkmote.h"

/* A table from column texts such as "member:t a b NA": name, colon, type (t text, i integer, r real), one word
 * per row. NA is missing, '' the empty text. `texts` ends in NULL. */
folkmote_table* build_table(const char* const* texts);

/* The same with the texts as arguments. */
#define TABLE(...) build_table((const char* const[]){__VA_ARGS__, NULL})

/* Column texts of a sound study of two communities and five members, used by every test. */
extern const char* const sound_members[];
extern const char* const sound_links[];
extern const char* const sound_broadcasts[];
extern const char* const sound_gatherings[];
extern const char* const sound_communities[];

/* The study of the tables above. */
folkmote_study* sound_study(void);

/* Communities of `size` members without links, `communities` of them. */
folkmote_study* unlinked_study(int communities, int size);

/* Communities of `size` members in which each hears the next two. */
folkmote_study* ring_study(int communities, int size);

/* Beliefs and payoff with one value per parameter; no stake shocks, benefit 1, cost 0. */
folkmote_beliefs* plain_beliefs(double mean, double prior_precision, double signal_precision);
folkmote_payoff* plain_payoff(void);

/* Solves with a share payoff of benefit 1 and cost 0; the caller destroys the result. */
folkmote_equilibrium* plain_equilibrium(const folkmote_study* study, double mean, double prior_precision,
                                        double signal_precision);

/* One value out of a table of results; NaN where there is no such real column. */
double real_at(const folkmote_table* table, const char* column, int64_t row);
int64_t integer_at(const folkmote_table* table, const char* column, int64_t row);
/* Valid until the table is destroyed. */
const char* text_at(const folkmote_table* table, const char* column, int64_t row);

/* Digest of all that the sound study gives: equilibrium, members, turnout, plays and a counterfactual. Zero when any
 * of it fails, so that "the session still works" is one comparison. */
uint64_t session_digest(const folkmote_options* options);

#endif
