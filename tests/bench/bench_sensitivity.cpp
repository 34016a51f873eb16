// Derivatives on preferential attachment networks (m = 3, alpha = 1, beta = 2, sigma = 0.1), one thread: seconds, and
// as multiples of solving the equilibrium and of one linear solve of the linearised game. Not a test: prints a table.
//     bench_sensitivity
#include "numerics/strict.hpp"

#include <cstdio>

#include "bench_study.hpp"
#include "equilibrium/dense_slopes.hpp"
#include "turnout/sensitivity_tables.hpp"

using namespace folkmote;

namespace {

double linear_solve_seconds(const Solution& solution) {
  const Knowledge knowledge = make_knowledge(*solution.study, solution.beliefs, 0);
  const SharedInformation shared(knowledge);
  const Stakes stakes = make_stakes(*solution.study, solution.payoff, 0);
  ShareRows game(knowledge, shared, stakes);
  DenseTangent tangent(game, nullptr);
  tangent.set(solution.enclosures[0].greatest);
  const bench::Clock clock;
  tangent.worth(stakes.weight);
  return clock.seconds();
}

/// Result tables carry labels.
Study labelled(Study study) {
  auto roster = std::make_shared<Roster>(*study.roster);
  roster->community_labels = std::vector<std::int64_t>{1};
  roster->community_names = {"1"};
  roster->member_labels = std::vector<std::int64_t>(roster->row_of[0].begin(), roster->row_of[0].end());
  study.roster = roster;
  return study;
}

void measure(const char* name, const Study& study) {
  const auto held = std::make_shared<const Study>(labelled(study));
  const Beliefs beliefs = studies::beliefs(0.4, 1.0, 2.0, 0.1);
  const bench::Clock solving;
  const Solution solution = solve(held, beliefs, Payoff{}, SolveRule{}, {});
  const double solved = solving.seconds();
  const double linear = study.communities[0].size <= most_differentiated ? linear_solve_seconds(solution) : 0.0;
  const std::vector<Sensitive> all{Sensitive::prior_mean,
                                   Sensitive::prior_precision,
                                   Sensitive::signal_precision,
                                   Sensitive::relay_precision,
                                   Sensitive::stake_sd,
                                   Sensitive::benefit,
                                   Sensitive::cost};
  const bench::Clock first;
  sensitivity_table(solution, all, {});
  const double parameters = first.seconds();
  const bench::Clock second;
  member_sensitivity_table(solution, all, {});
  const double members = second.seconds();
  const bench::Clock third;
  if (study.communities[0].size <= most_differentiated) link_sensitivity_table(solution, {});
  const double links = third.seconds();
  std::printf("%-18s %8d %9.3f %11.3f %9.3f", name, study.communities[0].size, solved, parameters, members);
  if (linear > 0.0) std::printf(" %9.3f %9.4f %12.1f %12.1f", links, linear, links / solved, links / linear);
  std::printf("  %s\n", verdict_text(solution.enclosures[0].verdict));
}

}  // namespace

int main() {
  std::setvbuf(stdout, nullptr, _IOLBF, 0);
  std::printf(
      "                    members     solve  parameters   members     links    linear  links/solve links/linear\n");
  for (int size : {300, 1000, 2000, 10000, 100000}) measure("links", bench::bare_study(size, false));
  Study meeting = bench::bare_study(1000, false);
  meeting.communities[0].gatherings.push_back({{}});
  for (int i = 0; i < 1000; ++i) meeting.communities[0].gatherings[0].members.push_back(i);
  measure("and a full meeting", meeting);
}
