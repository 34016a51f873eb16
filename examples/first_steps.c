/*
 * First steps: one community of four, and what it would take for them to act.
 *
 * Build: cc -std=c11 first_steps.c -lfolkmote
 */
#include <stdio.h>

#include "folkmote.h"

static char message[FOLKMOTE_MESSAGE_BYTES];
static int failed(folkmote_status status) {
  if (status != FOLKMOTE_OK) fprintf(stderr, "%s: %s\n", folkmote_status_text(status), message);
  return status != FOLKMOTE_OK;
}

int main(void) {
  /* Tables in: four members, of whom Ada and Ben hear each other, and Cem and Dot both hear Ben. */
  const char* home[] = {"north", "north", "north", "north"};
  const char* who[] = {"Ada", "Ben", "Cem", "Dot"};
  const char* listener[] = {"Ada", "Ben", "Cem", "Dot"};
  const char* speaker[] = {"Ben", "Ada", "Ben", "Ben"};
  const double prior_mean = 0.4, prior_precision = 1.0, signal_precision = 4.0, stake_sd = 0.2;
  folkmote_table *members = NULL, *links = NULL, *result = NULL;
  folkmote_study* study = NULL;
  folkmote_beliefs* beliefs = NULL;
  folkmote_payoff* payoff = NULL;
  folkmote_equilibrium* equilibrium = NULL;

  int bad = failed(folkmote_table_create(4, &members, message)) ||
            failed(folkmote_table_add_text(members, "community", home, message)) ||
            failed(folkmote_table_add_text(members, "member", who, message)) ||
            failed(folkmote_table_create(4, &links, message)) ||
            failed(folkmote_table_add_text(links, "community", home, message)) ||
            failed(folkmote_table_add_text(links, "listener", listener, message)) ||
            failed(folkmote_table_add_text(links, "speaker", speaker, message)) ||
            failed(folkmote_study_create(members, links, NULL, NULL, NULL, 0, &study, message));

  /* What they believe before they hear anything, and what acting pays: the share of the others who act. */
  bad = bad || failed(folkmote_beliefs_create(&beliefs, message)) ||
        failed(folkmote_beliefs_set(beliefs, FOLKMOTE_PRIOR_MEAN, 1, &prior_mean, message)) ||
        failed(folkmote_beliefs_set(beliefs, FOLKMOTE_PRIOR_PRECISION, 1, &prior_precision, message)) ||
        failed(folkmote_beliefs_set(beliefs, FOLKMOTE_SIGNAL_PRECISION, 1, &signal_precision, message)) ||
        failed(folkmote_beliefs_set(beliefs, FOLKMOTE_STAKE_SD, 1, &stake_sd, message)) ||
        failed(folkmote_payoff_create(FOLKMOTE_SHARE_PAYOFF, &payoff, message));

  /* Solve, and take a table out: community, verdict, contraction_bound, turnout_least, turnout_greatest, ... */
  bad = bad || failed(folkmote_equilibrium_create(study, beliefs, payoff, NULL, &equilibrium, message)) ||
        failed(folkmote_equilibrium_table(equilibrium, FOLKMOTE_BY_COMMUNITY, &result, message));
  const char* verdict = NULL;
  double least = 0, greatest = 0;
  bad = bad || failed(folkmote_table_get_text(result, 1, &verdict, message)) ||
        failed(folkmote_table_get_real(result, 3, &least, message)) ||
        failed(folkmote_table_get_real(result, 4, &greatest, message));
  if (!bad) printf("%s: expected turnout from %.4f to %.4f\n", verdict, least, greatest);

  folkmote_equilibrium_destroy(equilibrium);
  folkmote_payoff_destroy(payoff);
  folkmote_beliefs_destroy(beliefs);
  folkmote_study_destroy(study);
  folkmote_table_destroy(result);
  folkmote_table_destroy(links);
  folkmote_table_destroy(members);
  return bad;
}
