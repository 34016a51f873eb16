// Small studies for tests: one community made from a list of links, and random ones with every feature mixed.
#pragma once

#include "numerics/strict.hpp"

#include <algorithm>
#include <cstdint>
#include <limits>
#include <memory>
#include <string>
#include <utility>
#include <vector>

#include "counterfactual/scenario.hpp"
#include "drawn_numbers.hpp"
#include "equilibrium/solution.hpp"

namespace studies {

using folkmote::Study;
using folkmote::Table;
using Link = std::pair<int, int>;  // listener, speaker

inline Table member_table(int size) {
  Table table(size);
  table.add("community", std::vector<std::int64_t>(size, 1));
  std::vector<std::int64_t> ids(size);
  for (int i = 0; i < size; ++i) ids[i] = i;
  table.add("member", ids);
  return table;
}

inline Table link_table(const std::vector<Link>& links) {
  Table table(links.size());
  std::vector<std::int64_t> listener, speaker;
  for (const auto& [i, j] : links) {
    listener.push_back(i);
    speaker.push_back(j);
  }
  table.add("community", std::vector<std::int64_t>(links.size(), 1));
  table.add("listener", listener);
  table.add("speaker", speaker);
  return table;
}

inline Table group_table(const char* id, const std::vector<std::vector<int>>& groups) {
  std::vector<std::int64_t> group, member;
  for (std::size_t g = 0; g < groups.size(); ++g) {
    for (int i : groups[g]) {
      group.push_back(static_cast<std::int64_t>(g));
      member.push_back(i);
    }
  }
  Table table(member.size());
  table.add("community", std::vector<std::int64_t>(member.size(), 1));
  table.add(id, group);
  table.add("member", member);
  return table;
}

inline std::shared_ptr<const Study> one_community(int size, const std::vector<Link>& links = {}, bool mutual = false) {
  const Table members = member_table(size), table = link_table(links);
  return std::make_shared<const Study>(
      folkmote::make_study({members, links.empty() ? nullptr : &table, nullptr, nullptr, nullptr, mutual}));
}

inline folkmote::Beliefs beliefs(double mu, double alpha, double beta, double sigma = 0.0) {
  folkmote::Beliefs made;
  made.prior_mean = {mu};
  made.prior_precision = {alpha};
  made.signal_precision = {beta};
  made.stake_sd = {sigma};
  return made;
}

inline std::vector<Link> complete(int size) {
  std::vector<Link> links;
  for (int i = 0; i < size; ++i) {
    for (int j = 0; j < size; ++j) {
      if (i != j) links.emplace_back(i, j);
    }
  }
  return links;
}

// Preferential attachment in the textbook law (Barabasi & Albert 1999): each new member links to `m` different earlier
// ones, chosen by an end of a random earlier link.
inline std::vector<Link> preferential(int size, int m, drawn::Numbers& numbers) {
  std::vector<Link> links;
  std::vector<int> ends;
  for (int i = 0; i <= m; ++i) {
    for (int j = 0; j < i; ++j) {
      links.emplace_back(i, j);
      ends.insert(ends.end(), {i, j});
    }
  }
  for (int i = m + 1; i < size; ++i) {
    std::vector<int> chosen;
    while (static_cast<int>(chosen.size()) < m) {
      const int j = ends[numbers.bits() % ends.size()];
      if (std::find(chosen.begin(), chosen.end(), j) == chosen.end()) chosen.push_back(j);
    }
    for (int j : chosen) {
      links.emplace_back(i, j);
      ends.insert(ends.end(), {i, j});
    }
  }
  return links;
}

// A community with every feature mixed: links of any relay precision in one or both directions, broadcasts, gatherings
// that overlap links, unequal weights, costs, benefits, signals (some without one) and stakes.
struct Mixed {
  std::shared_ptr<const Study> study;
  folkmote::Beliefs beliefs;
  folkmote::Payoff payoff;
};

inline std::vector<int> subset(int size, double share, drawn::Numbers& numbers) {
  std::vector<int> chosen;
  for (int i = 0; i < size; ++i) {
    if (numbers.unit() < share) chosen.push_back(i);
  }
  return chosen;
}

inline Table mixed_members(int size, double stakes, drawn::Numbers& numbers) {
  Table members = member_table(size);
  std::vector<double> weight, cost, benefit, signal, stake;
  for (int i = 0; i < size; ++i) {
    weight.push_back(numbers.between(0.5, 3.0));
    cost.push_back(numbers.between(-0.2, 0.3));
    benefit.push_back(numbers.between(0.3, 1.2));
    signal.push_back(numbers.unit() < 0.1 ? 0.0 : numbers.magnitude(-3, 4));
    stake.push_back(stakes * numbers.between(0.05, 0.6));
  }
  members.add("weight", weight);
  members.add("cost", cost);
  members.add("benefit", benefit);
  members.add("signal_precision", signal);
  members.add("stake_sd", stake);
  return members;
}

inline Table mixed_links(int size, drawn::Numbers& numbers) {
  std::vector<Link> links;
  std::vector<double> relay;
  for (const Link& link : complete(size)) {
    if (numbers.unit() > 4.0 / size) continue;
    links.push_back(link);
    relay.push_back(numbers.unit() < 0.4 ? std::numeric_limits<double>::infinity() : numbers.magnitude(-2, 4));
  }
  Table table = link_table(links);
  table.add("relay_precision", relay);
  return table;
}

inline Mixed mixed(std::uint64_t seed, double stakes = 1.0) {
  drawn::Numbers numbers(seed);
  const int size = 3 + static_cast<int>(numbers.bits() % 22);
  const Table members = mixed_members(size, stakes, numbers);
  const Table links = mixed_links(size, numbers);
  Table broadcasts = group_table("broadcast", {subset(size, 0.5, numbers), subset(size, 0.3, numbers)});
  const auto& which = std::get<std::vector<std::int64_t>>(broadcasts.find("broadcast")->values);
  std::vector<double> precision;
  for (std::int64_t q : which) precision.push_back(q == 0 ? 0.7 : 2.5);
  broadcasts.add("precision", precision);
  const Table gatherings = group_table("gathering", {subset(size, 0.3, numbers), subset(size, 0.2, numbers)});
  Mixed made;
  made.study =
      std::make_shared<const Study>(folkmote::make_study({members, &links, &broadcasts, &gatherings, nullptr, false}));
  made.beliefs.prior_mean = {numbers.between(-0.3, 1.2)};
  made.beliefs.prior_precision = {numbers.magnitude(-2, 2)};
  const double reaches[] = {0.0, 1.0, numbers.unit()};
  made.payoff.reach = {reaches[numbers.bits() % 3]};
  return made;
}

inline folkmote::Solution solved(std::shared_ptr<const Study> study, const folkmote::Beliefs& beliefs,
                                 const folkmote::Payoff& payoff = {}, const folkmote::SolveRule& rule = {}) {
  return folkmote::solve(std::move(study), beliefs, payoff, rule, {});
}

}  // namespace studies
