#pragma once
// Finding the members that the rows of a table speak of.
#include "numerics/strict.hpp"

#include <string>
#include <utility>
#include <vector>

#include "community/columns.hpp"
#include "community/study.hpp"

namespace folkmote {

/// The community of each row, by label.
std::vector<int> find_communities(const Roster& roster, const NamedTable& source);

/// The position, within its row's community, of the member that `column` names in each row.
std::vector<int> find_members(const Roster& roster, const NamedTable& source, const char* column,
                              const std::vector<int>& community_of_row);

/// One listening link as a row names it.
struct NamedLink {
  int community;
  int listener;
  int speaker;
  double relay_precision;
};

/// The links of a table, reversed ones appended when mutual; refuses unknown members, links to oneself and
/// duplicates (with mutual, also a contact that stands in both directions).
std::vector<NamedLink> read_links(const Roster& roster, const Table& links, bool mutual);

/// Puts links in order into one CSR per community; `into` may hold links already.
void insert_links(std::vector<Community>& communities, const std::vector<NamedLink>& links);

/// Members of each community that a table names: all of a community where the table has no column
/// `member`, everyone in every community when the table is null. Sorted positions by community.
std::vector<std::vector<int>> read_audience(const Roster& roster, const Table* audience, const char* name);

}  // namespace folkmote
