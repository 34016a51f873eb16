#include "counterfactual/scenario.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <span>
#include <string>

#include "community/columns.hpp"
#include "community/fault.hpp"
#include "community/membership.hpp"
#include "counterfactual/rewire.hpp"
#include "random/digest.hpp"
#include "random/streams.hpp"

namespace folkmote {

namespace {

constexpr double not_given = std::numeric_limits<double>::quiet_NaN();

/// The position of the link in the community's arrays, or -1.
std::int64_t find_link(const Links& links, int listener, int speaker) {
  const auto first = links.speaker.begin() + links.start[listener];
  const auto last = links.speaker.begin() + links.start[listener + 1];
  const auto found = std::lower_bound(first, last, speaker);
  return found != last && *found == speaker ? found - links.speaker.begin() : -1;
}

/// Keeps the links whose entry in `keep` is true.
void keep_links(Community& community, const std::vector<bool>& keep) {
  Links kept;
  kept.start.push_back(0);
  for (int i = 0; i < community.size; ++i) {
    for (std::int64_t k = community.links.start[i]; k < community.links.start[i + 1]; ++k) {
      if (!keep[k]) continue;
      kept.speaker.push_back(community.links.speaker[k]);
      kept.relay_precision.push_back(community.links.relay_precision[k]);
    }
    kept.start.push_back(static_cast<std::int64_t>(kept.speaker.size()));
  }
  community.links = std::move(kept);
}

/// Rows of the table whose link is in the study (`present`) or is not: those an edit cannot serve.
void refuse_links(const Study& study, const std::vector<NamedLink>& links, std::size_t rows, bool present,
                  const char* rule) {
  std::vector<bool> at_fault(rows, false);
  for (std::size_t k = 0; k < links.size(); ++k) {
    const Links& of_community = study.communities[links[k].community].links;
    const bool found = find_link(of_community, links[k].listener, links[k].speaker) >= 0;
    if (found == present) at_fault[k % rows] = true;
  }
  RowFaults faults("links", "speaker", rule);
  for (std::size_t r = 0; r < rows; ++r) {
    if (at_fault[r]) faults.add(r);
  }
  faults.raise_if_any();
}

struct Contact {
  int low, high;
};

/// Pairs with a link in either direction, in order.
std::vector<Contact> contacts_of(const Community& community) {
  std::vector<Contact> contacts;
  for (int i = 0; i < community.size; ++i) {
    for (std::int64_t k = community.links.start[i]; k < community.links.start[i + 1]; ++k) {
      const int j = community.links.speaker[k];
      if (i < j || find_link(community.links, j, i) < 0) contacts.push_back({std::min(i, j), std::max(i, j)});
    }
  }
  return contacts;
}

/// Cuts the nearest whole number of `share` times the contacts, each set equally likely (partial Fisher-Yates shuffle).
void thin(Community& community, double share, Stream stream) {
  std::vector<Contact> contacts = contacts_of(community);
  const auto lost = static_cast<std::size_t>(std::floor(share * static_cast<double>(contacts.size()) + 0.5));
  std::vector<bool> keep(community.links.speaker.size(), true);
  for (std::size_t k = 0; k < lost; ++k) {
    std::swap(contacts[k], contacts[k + stream.below(contacts.size() - k)]);
    const auto [low, high] = contacts[k];
    for (const std::int64_t link : {find_link(community.links, low, high), find_link(community.links, high, low)}) {
      if (link >= 0) keep[link] = false;
    }
  }
  keep_links(community, keep);
}

void forget_column(Study& study, Parameter parameter) {
  for (Community& community : study.communities) {
    std::vector<double>* column = nullptr;
    if (parameter == Parameter::signal_precision) column = &community.values.signal_precision;
    if (parameter == Parameter::stake_sd) column = &community.values.stake_sd;
    if (parameter == Parameter::relay_precision) column = &community.links.relay_precision;
    if (column != nullptr) std::fill(column->begin(), column->end(), not_given);
  }
}

}  // namespace

Scenario::Scenario(std::shared_ptr<const Study> baseline) : baseline_(std::move(baseline)), edited_(*baseline_) {}

Beliefs Scenario::apply(Beliefs beliefs) const {
  for (const Override& change : overrides_) beliefs.of(change.parameter) = change.values;
  return beliefs;
}

void Scenario::add_links(const Table& table, bool mutual) {
  const std::vector<NamedLink> links = read_links(*edited_.roster, table, mutual);
  refuse_links(edited_, links, table.rows(), true, "is linked to the listener already; remove the rows");
  insert_links(edited_.communities, links);
}

void Scenario::cut_links(const Table* table, bool mutual) {
  if (table == nullptr) {
    for (Community& community : edited_.communities) {
      keep_links(community, std::vector<bool>(community.links.speaker.size(), false));
    }
    return;
  }
  const std::vector<NamedLink> links = read_links(*edited_.roster, *table, mutual);
  refuse_links(edited_, links, table->rows(), false,
               "is not linked to the listener, so there is nothing to cut; remove the rows");
  std::vector<std::vector<bool>> keep;
  for (const Community& community : edited_.communities) keep.emplace_back(community.links.speaker.size(), true);
  for (const NamedLink& link : links) {
    keep[link.community][find_link(edited_.communities[link.community].links, link.listener, link.speaker)] = false;
  }
  for (std::size_t c = 0; c < keep.size(); ++c) keep_links(edited_.communities[c], keep[c]);
}

void Scenario::thin_links(double share, std::uint64_t seed) {
  if (!(share >= 0.0 && share <= 1.0))
    throw BadArgument("thin_links: share is " + plain_number(share) + "; it must lie in 0 to 1.");
  for (std::size_t c = 0; c < edited_.communities.size(); ++c) {
    thin(edited_.communities[c], share, Stream(StreamKey{seed, Purpose::thinning, c, 0}));
  }
}

void Scenario::rewire_links(double share, std::uint64_t seed) {
  if (!(share >= 0.0 && share <= 1.0))
    throw BadArgument("rewire_links: share is " + plain_number(share) + "; it must lie in 0 to 1.");
  for (std::size_t c = 0; c < edited_.communities.size(); ++c) {
    rewire(edited_.communities[c].links, share, Stream(StreamKey{seed, Purpose::rewiring, c, 0}));
  }
}

void Scenario::broadcast(const Table* audience, double precision) {
  if (!(precision > 0.0) || std::isinf(precision)) {
    throw BadArgument("broadcast: precision is " + plain_number(precision) + "; it must be positive and finite.");
  }
  auto members = read_audience(*edited_.roster, audience, "broadcast");
  for (std::size_t c = 0; c < members.size(); ++c) {
    if (!members[c].empty()) edited_.communities[c].broadcasts.push_back({precision, std::move(members[c])});
  }
}

void Scenario::gathering(const Table* audience) {
  auto members = read_audience(*edited_.roster, audience, "gathering");
  for (std::size_t c = 0; c < members.size(); ++c) {
    if (!members[c].empty()) edited_.communities[c].gatherings.push_back({std::move(members[c])});
  }
}

void Scenario::shift_cost(const Table* audience, double by) {
  if (!std::isfinite(by)) throw BadArgument("shift_cost: by is " + plain_number(by) + "; it must be finite.");
  const auto members = read_audience(*edited_.roster, audience, "shift_cost");
  for (std::size_t c = 0; c < members.size(); ++c) {
    for (int i : members[c]) edited_.communities[c].values.cost_shift[i] += by;
  }
}

void Scenario::shift_benefit(const Table* audience, double by) {
  if (!std::isfinite(by)) throw BadArgument("shift_benefit: by is " + plain_number(by) + "; it must be finite.");
  const auto members = read_audience(*edited_.roster, audience, "shift_benefit");
  for (std::size_t c = 0; c < members.size(); ++c) {
    if (members[c].empty()) continue;
    edited_.communities[c].values.benefit_shift.resize(edited_.communities[c].size, 0.0);
    for (int i : members[c]) edited_.communities[c].values.benefit_shift[i] += by;
  }
}

void Scenario::set_beliefs(Parameter parameter, Spread values) {
  const ParameterRule& rule = parameter_rule(static_cast<int>(parameter));
  check_values(rule, values);
  check_length(rule, values, edited_);
  Beliefs{}.of(parameter);  // refuses parameters of the payoff
  forget_column(edited_, parameter);
  overrides_.push_back({parameter, std::move(values)});
}

void Scenario::forward_reports(int hops) {
  if (hops < 1 || hops > 64)
    throw BadArgument("forward_reports: hops is " + std::to_string(hops) + "; it must lie in 1 to 64.");
  for (Community& community : edited_.communities) community.hops = hops;
}

std::uint64_t Scenario::digest() const {
  Digest digest;
  digest.add(baseline_->digest()).add(edited_.digest());
  for (const Override& change : overrides_) {
    digest.add(static_cast<int>(change.parameter)).add(std::span<const double>(change.values));
  }
  return digest.value();
}

}  // namespace folkmote
