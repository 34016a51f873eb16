#pragma once
// What a study holds (MODEL.md, section 1): communities of members, listening links, broadcasts and gatherings.
#include "numerics/strict.hpp"

#include <cstdint>
#include <memory>
#include <string>
#include <unordered_map>
#include <vector>

#include "community/table.hpp"

namespace folkmote {

/// z_q = theta + noise of precision tau_q, heard alike by its audience (sorted member positions).
struct Broadcast {
  double precision;
  std::vector<int> audience;
};

/// Everyone in it hears everyone else exactly (sorted member positions).
struct Gathering {
  std::vector<int> members;
};

/// Listening links by listener: the speakers that member i hears directly are
/// speaker[start[i]] .. speaker[start[i + 1] - 1], in increasing order.
struct Links {
  std::vector<std::int64_t> start;
  std::vector<int> speaker;
  std::vector<double> relay_precision;  // gamma; NaN: take the value of the beliefs
};

/// Values per member; NaN: not given, so that beliefs or payoff decide.
struct MemberValues {
  std::vector<double> weight;
  std::vector<double> signal_precision;
  std::vector<double> stake_sd;
  std::vector<double> benefit;
  std::vector<double> cost;
  std::vector<double> cost_shift;      // added to the cost, whoever decides it
  std::vector<double> benefit_shift;   // likewise; empty: none
  std::vector<double> turnout;         // observed action; NaN: missing
  std::vector<double> expected_share;  // elicited belief; NaN: missing
};

struct Community {
  int size = 0;
  MemberValues values;
  Links links;
  std::vector<Broadcast> broadcasts;
  std::vector<Gathering> gatherings;
  int hops = 1;  // how far reports are forwarded
};

/// Who is called what, and in which row of `members` each stands. Shared by a study and its scenarios.
struct Roster {
  Values community_labels;                   // in the order in which members first names them
  std::vector<std::string> community_names;  // the same as text, for messages
  Values member_labels;                      // in row order
  std::vector<int> community_of_row;
  std::vector<int> position_of_row;               // position within its community
  std::vector<std::vector<std::int64_t>> row_of;  // by community, then position
  std::unordered_map<std::string, int> community_index;
  std::vector<std::unordered_map<std::string, int>> member_index;  // by community

  std::size_t members() const { return community_of_row.size(); }
};

struct Study {
  std::shared_ptr<const Roster> roster;
  std::vector<Community> communities;

  std::uint64_t digest() const;
};

struct StudyTables {
  const Table& members;
  const Table* links = nullptr;
  const Table* broadcasts = nullptr;
  const Table* gatherings = nullptr;
  const Table* communities = nullptr;
  bool mutual = false;
};

/// Checks every rule of the study tables; throws BadData naming table, column, first rows and count.
Study make_study(const StudyTables& tables);

/// One row per community: sizes, listening and observed turnout.
Table summarise(const Study& study);

}  // namespace folkmote
