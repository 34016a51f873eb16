#include "community/study.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <span>
#include <unordered_set>

#include "community/columns.hpp"
#include "community/fault.hpp"
#include "community/membership.hpp"
#include "random/digest.hpp"

namespace folkmote {

namespace {

constexpr double infinity = std::numeric_limits<double>::infinity();
constexpr double not_given = std::numeric_limits<double>::quiet_NaN();

Roster make_roster(const NamedTable& members) {
  Roster roster;
  const std::vector<std::string> communities = read_labels(members, "community");
  const std::vector<std::string> labels = read_labels(members, "member");
  RowFaults repeated("members", "member",
                     "the same member stands in an earlier row of its community; remove the "
                     "duplicate rows or rename the member");
  std::vector<std::int64_t> first_rows;
  for (std::size_t r = 0; r < labels.size(); ++r) {
    const int next = static_cast<int>(first_rows.size());
    const auto [community, fresh] = roster.community_index.try_emplace(communities[r], next);
    if (fresh) {
      first_rows.push_back(static_cast<std::int64_t>(r));
      roster.member_index.emplace_back();
      roster.row_of.emplace_back();
      roster.community_names.push_back(communities[r]);
    }
    const int c = community->second;
    const int position = static_cast<int>(roster.row_of[c].size());
    if (!roster.member_index[c].try_emplace(labels[r], position).second) repeated.add(r);
    roster.row_of[c].push_back(static_cast<std::int64_t>(r));
    roster.community_of_row.push_back(c);
    roster.position_of_row.push_back(position);
  }
  repeated.raise_if_any();
  roster.community_labels = take_rows(required(members, "community").values, first_rows);
  roster.member_labels = required(members, "member").values;
  return roster;
}

/// The column of `members` that fills each field of MemberValues.
struct MemberColumn {
  const char* name;
  std::vector<double> MemberValues::*field;
  NumberRule rule;
  double absent;
};

const MemberColumn member_columns[] = {
    {"weight", &MemberValues::weight, {0.0, infinity, true}, 1.0},
    {"signal_precision", &MemberValues::signal_precision, {0.0, infinity}, not_given},
    {"stake_sd", &MemberValues::stake_sd, {0.0, infinity}, not_given},
    {"benefit", &MemberValues::benefit, {0.0, infinity}, not_given},
    {"cost", &MemberValues::cost, {-infinity, infinity}, not_given},
    {"turnout", &MemberValues::turnout, {0.0, 1.0, false, true, false, true}, not_given},
    {"expected_share", &MemberValues::expected_share, {0.0, 1.0, false, true}, not_given},
};

std::vector<Community> make_communities(const NamedTable& members, const Roster& roster) {
  std::vector<Community> communities(roster.row_of.size());
  for (std::size_t c = 0; c < communities.size(); ++c) {
    communities[c].size = static_cast<int>(roster.row_of[c].size());
    communities[c].values.cost_shift.assign(roster.row_of[c].size(), 0.0);
    communities[c].links.start.assign(roster.row_of[c].size() + 1, 0);
  }
  for (const MemberColumn& column : member_columns) {
    const std::vector<double> by_row = read_numbers(members, column.name, column.rule, column.absent);
    for (std::size_t c = 0; c < communities.size(); ++c) {
      std::vector<double>& field = communities[c].values.*column.field;
      field.reserve(roster.row_of[c].size());
      for (std::int64_t row : roster.row_of[c]) field.push_back(by_row[row]);
    }
  }
  return communities;
}

/// Rows of one group table (broadcasts or gatherings) put together by community and group label.
struct Group {
  std::vector<int> members;
  std::unordered_set<int> known;
  std::size_t first_row;
};

std::vector<std::vector<Group>> read_groups(const Roster& roster, const NamedTable& source, const char* id) {
  const std::vector<int> community = find_communities(roster, source);
  const std::vector<std::string> labels = read_labels(source, id);
  const std::vector<int> member = find_members(roster, source, "member", community);
  std::vector<std::vector<Group>> groups(roster.row_of.size());
  std::vector<std::unordered_map<std::string, std::size_t>> index(roster.row_of.size());
  RowFaults repeated(source.name, "member",
                     "stands in an earlier row of the same " + std::string(id) + "; remove the duplicate rows");
  for (std::size_t r = 0; r < member.size(); ++r) {
    const int c = community[r];
    const auto [entry, fresh] = index[c].try_emplace(labels[r], groups[c].size());
    if (fresh) groups[c].push_back({{}, {}, r});
    Group& group = groups[c][entry->second];
    if (!group.known.insert(member[r]).second) repeated.add(r);
    group.members.push_back(member[r]);
  }
  repeated.raise_if_any();
  for (auto& of_community : groups) {
    for (Group& group : of_community) std::sort(group.members.begin(), group.members.end());
  }
  return groups;
}

/// One precision per broadcast of a community: rows that differ from its first row are refused.
void refuse_mixed_precisions(const Roster& roster, const NamedTable& source, const std::vector<double>& precision) {
  const std::vector<int> community = find_communities(roster, source);
  const std::vector<std::string> labels = read_labels(source, "broadcast");
  std::vector<std::unordered_map<std::string, double>> first(roster.row_of.size());
  RowFaults mixed(source.name, "precision",
                  "differs from an earlier row of the same broadcast; give each one precision");
  for (std::size_t r = 0; r < labels.size(); ++r) {
    const auto [entry, fresh] = first[community[r]].try_emplace(labels[r], precision[r]);
    if (!fresh && entry->second != precision[r]) mixed.add(r);
  }
  mixed.raise_if_any();
}

void add_broadcasts(std::vector<Community>& communities, const Roster& roster, const Table& table) {
  const NamedTable source{table, "broadcasts"};
  auto groups = read_groups(roster, source, "broadcast");
  required(source, "precision");
  const std::vector<double> precision = read_numbers(source, "precision", {0.0, infinity, true}, not_given);
  refuse_mixed_precisions(roster, source, precision);
  for (std::size_t c = 0; c < communities.size(); ++c) {
    for (Group& group : groups[c]) {
      communities[c].broadcasts.push_back({precision[group.first_row], std::move(group.members)});
    }
  }
}

void add_gatherings(std::vector<Community>& communities, const Roster& roster, const Table& table) {
  auto groups = read_groups(roster, {table, "gatherings"}, "gathering");
  for (std::size_t c = 0; c < communities.size(); ++c) {
    for (Group& group : groups[c]) communities[c].gatherings.push_back({std::move(group.members)});
  }
}

void check_community_table(const Roster& roster, const Table& table) {
  const NamedTable source{table, "communities"};
  const std::vector<std::string> labels = read_labels(source, "community");
  RowFaults empty("communities", "community", "has no member; add its members or remove the community");
  RowFaults repeated("communities", "community", "stands in an earlier row; remove the duplicate rows");
  std::unordered_map<std::string, bool> seen;
  for (std::size_t r = 0; r < labels.size(); ++r) {
    if (!roster.community_index.contains(labels[r])) empty.add(r);
    if (!seen.try_emplace(labels[r], true).second) repeated.add(r);
  }
  empty.raise_if_any();
  repeated.raise_if_any();
  RowFaults absent("members", "community", "is not listed in communities; add it there");
  for (std::size_t c = 0; c < roster.row_of.size(); ++c) {
    if (seen.contains(roster.community_names[c])) continue;
    for (std::int64_t row : roster.row_of[c]) absent.add(static_cast<std::size_t>(row));
  }
  absent.raise_if_any();
}

void add_links(Digest& digest, const Links& links) {
  digest.add(std::span<const std::int64_t>(links.start));
  digest.add(std::span<const int>(links.speaker));
  digest.add(std::span<const double>(links.relay_precision));
}

}  // namespace

Study make_study(const StudyTables& tables) {
  const NamedTable members{tables.members, "members"};
  required(members, "community");
  required(members, "member");
  if (tables.members.rows() == 0)
    throw BadData("members: column 'member' has 0 rows; a study needs at least one member.");
  auto roster = std::make_shared<const Roster>(make_roster(members));
  Study study{roster, make_communities(members, *roster)};
  if (tables.communities != nullptr) check_community_table(*roster, *tables.communities);
  if (tables.links != nullptr) insert_links(study.communities, read_links(*roster, *tables.links, tables.mutual));
  if (tables.broadcasts != nullptr) add_broadcasts(study.communities, *roster, *tables.broadcasts);
  if (tables.gatherings != nullptr) add_gatherings(study.communities, *roster, *tables.gatherings);
  return study;
}

std::uint64_t Study::digest() const {
  Digest digest;
  Table labels(roster->members());
  labels.add("member", roster->member_labels);
  digest.add(labels.digest());
  for (const std::string& name : roster->community_names) digest.add(std::string_view(name));
  digest.add(std::span<const int>(roster->community_of_row));
  for (const Community& community : communities) {
    digest.add(community.size).add(community.hops);
    for (const MemberColumn& column : member_columns) {
      digest.add(std::span<const double>(community.values.*column.field));
    }
    digest.add(std::span<const double>(community.values.cost_shift));
    if (!community.values.benefit_shift.empty()) digest.add(std::span<const double>(community.values.benefit_shift));
    add_links(digest, community.links);
    for (const Broadcast& broadcast : community.broadcasts) {
      digest.add(broadcast.precision).add(std::span<const int>(broadcast.audience));
    }
    for (const Gathering& gathering : community.gatherings) digest.add(std::span<const int>(gathering.members));
  }
  return digest.value();
}

}  // namespace folkmote
