#include "community/membership.hpp"

#include <algorithm>
#include <limits>
#include <numeric>
#include <tuple>

#include "community/fault.hpp"

namespace folkmote {

namespace {

constexpr double infinity = std::numeric_limits<double>::infinity();

bool known_elsewhere(const Roster& roster, const std::string& label) {
  return std::any_of(roster.member_index.begin(), roster.member_index.end(),
                     [&label](const auto& index) { return index.contains(label); });
}

struct LinkKey {
  int community, listener, speaker;
  std::size_t row;
};

bool same_link(const LinkKey& a, const LinkKey& b) {
  return a.community == b.community && a.listener == b.listener && a.speaker == b.speaker;
}

/// Rows that repeat an earlier link; a mutual link counts in both directions.
void refuse_duplicates(const std::vector<NamedLink>& links, std::size_t rows) {
  std::vector<LinkKey> keys(links.size());
  for (std::size_t k = 0; k < links.size(); ++k) {
    keys[k] = {links[k].community, links[k].listener, links[k].speaker, k % rows};
  }
  std::sort(keys.begin(), keys.end(), [](const LinkKey& a, const LinkKey& b) {
    return std::tie(a.community, a.listener, a.speaker, a.row) < std::tie(b.community, b.listener, b.speaker, b.row);
  });
  std::vector<std::size_t> repeated;
  for (std::size_t k = 1; k < keys.size(); ++k) {
    if (same_link(keys[k - 1], keys[k])) repeated.push_back(keys[k].row);
  }
  std::sort(repeated.begin(), repeated.end());
  repeated.erase(std::unique(repeated.begin(), repeated.end()), repeated.end());
  RowFaults faults("links", "speaker",
                   links.size() > rows
                       ? "the same contact stands in an earlier row (links are mutual, so each pair may stand "
                         "once); remove the repeated rows"
                       : "the same listener and speaker stand in an earlier row; remove the duplicate links");
  for (std::size_t row : repeated) faults.add(row);
  faults.raise_if_any();
}

}  // namespace

std::vector<int> find_communities(const Roster& roster, const NamedTable& source) {
  const std::vector<std::string> labels = read_labels(source, "community");
  RowFaults unknown(source.name, "community", "no member belongs to such a community; correct the label");
  std::vector<int> found(labels.size(), -1);
  for (std::size_t r = 0; r < labels.size(); ++r) {
    const auto entry = roster.community_index.find(labels[r]);
    if (entry == roster.community_index.end())
      unknown.add(r);
    else
      found[r] = entry->second;
  }
  unknown.raise_if_any();
  return found;
}

std::vector<int> find_members(const Roster& roster, const NamedTable& source, const char* column,
                              const std::vector<int>& community_of_row) {
  const std::vector<std::string> labels = read_labels(source, column);
  RowFaults unknown(source.name, column, "names an unknown member; add it to members or correct the id");
  RowFaults across(source.name, column,
                   "names a member of another community; everything here stays within one community");
  std::vector<int> found(labels.size(), -1);
  for (std::size_t r = 0; r < labels.size(); ++r) {
    const auto& index = roster.member_index[static_cast<std::size_t>(community_of_row[r])];
    const auto entry = index.find(labels[r]);
    if (entry != index.end())
      found[r] = entry->second;
    else if (known_elsewhere(roster, labels[r]))
      across.add(r);
    else
      unknown.add(r);
  }
  unknown.raise_if_any();
  across.raise_if_any();
  return found;
}

std::vector<NamedLink> read_links(const Roster& roster, const Table& table, bool mutual) {
  const NamedTable source{table, "links"};
  const std::vector<int> community = find_communities(roster, source);
  const std::vector<int> listener = find_members(roster, source, "listener", community);
  const std::vector<int> speaker = find_members(roster, source, "speaker", community);
  const NumberRule positive{0.0, infinity, true, false, true};
  const std::vector<double> relay =
      read_numbers(source, "relay_precision", positive, std::numeric_limits<double>::quiet_NaN());
  const std::size_t rows = table.rows();
  std::vector<NamedLink> links;
  links.reserve(mutual ? 2 * rows : rows);
  RowFaults oneself("links", "speaker", "is the listener as well; nobody needs a link to oneself, remove the rows");
  for (std::size_t r = 0; r < rows; ++r) {
    if (listener[r] == speaker[r]) oneself.add(r);
    links.push_back({community[r], listener[r], speaker[r], relay[r]});
  }
  oneself.raise_if_any();
  for (std::size_t r = 0; mutual && r < rows; ++r) {
    links.push_back({community[r], speaker[r], listener[r], relay[r]});
  }
  refuse_duplicates(links, std::max<std::size_t>(rows, 1));
  return links;
}

void insert_links(std::vector<Community>& communities, const std::vector<NamedLink>& links) {
  std::vector<std::vector<NamedLink>> by_community(communities.size());
  for (const NamedLink& link : links) by_community[static_cast<std::size_t>(link.community)].push_back(link);
  for (std::size_t c = 0; c < communities.size(); ++c) {
    Links& kept = communities[c].links;
    std::vector<NamedLink>& all = by_community[c];
    const int size = communities[c].size;
    for (int i = 0; !kept.speaker.empty() && i < size; ++i) {
      for (std::int64_t k = kept.start[static_cast<std::size_t>(i)]; k < kept.start[static_cast<std::size_t>(i) + 1];
           ++k) {
        const auto at = static_cast<std::size_t>(k);
        all.push_back({static_cast<int>(c), i, kept.speaker[at], kept.relay_precision[at]});
      }
    }
    std::sort(all.begin(), all.end(), [](const NamedLink& a, const NamedLink& b) {
      return std::tie(a.listener, a.speaker) < std::tie(b.listener, b.speaker);
    });
    Links fresh;
    fresh.start.assign(static_cast<std::size_t>(size) + 1, 0);
    for (const NamedLink& link : all) {
      ++fresh.start[static_cast<std::size_t>(link.listener) + 1];
      fresh.speaker.push_back(link.speaker);
      fresh.relay_precision.push_back(link.relay_precision);
    }
    std::partial_sum(fresh.start.begin(), fresh.start.end(), fresh.start.begin());
    kept = std::move(fresh);
  }
}

std::vector<std::vector<int>> read_audience(const Roster& roster, const Table* audience, const char* name) {
  const std::size_t count = roster.member_index.size();
  std::vector<std::vector<int>> chosen(count);
  const auto choose_all = [&](std::size_t c) {
    chosen[c].resize(roster.row_of[c].size());
    std::iota(chosen[c].begin(), chosen[c].end(), 0);
  };
  if (audience == nullptr) {
    for (std::size_t c = 0; c < count; ++c) choose_all(c);
    return chosen;
  }
  const NamedTable source{*audience, name};
  const std::vector<int> community = find_communities(roster, source);
  const bool by_member = audience->find("member") != nullptr;
  const char* const column = by_member ? "member" : "community";
  std::vector<int> member;
  if (by_member) member = find_members(roster, source, "member", community);
  RowFaults repeated(name, column, "stands in an earlier row already; remove the duplicate rows");
  std::vector<std::vector<bool>> seen(count);
  for (std::size_t r = 0; r < community.size(); ++r) {
    const auto c = static_cast<std::size_t>(community[r]);
    seen[c].resize(by_member ? roster.row_of[c].size() : 1);
    const std::size_t slot = by_member ? static_cast<std::size_t>(member[r]) : 0;
    if (seen[c][slot]) repeated.add(r);
    seen[c][slot] = true;
    if (by_member)
      chosen[c].push_back(member[r]);
    else
      choose_all(c);
  }
  repeated.raise_if_any();
  for (auto& positions : chosen) std::sort(positions.begin(), positions.end());
  return chosen;
}

}  // namespace folkmote
