#include "counterfactual/rewire.hpp"

#include <algorithm>
#include <cmath>
#include <set>
#include <utility>
#include <vector>

// Exchanging the partners of two contacts keeps every degree (the switching step of Maslov & Sneppen 2002, Science
// 296:910-913), in both directions apart, since two contacts of one kind exchange only.

namespace folkmote {

namespace {

/// `first` hears `second`; in a contact of both directions the reverse holds too.
struct Contact {
  int first, second;
  double relay, relay_back;  // of the link heard by first, and by second
};

struct Contacts {
  std::vector<Contact> both_ways, one_way;
  std::set<std::pair<int, int>> linked;  // either direction, the smaller position first
};

std::pair<int, int> pair_of(int i, int j) { return {std::min(i, j), std::max(i, j)}; }

Contacts contacts_of(const Links& links) {
  Contacts found;
  const int n = static_cast<int>(links.start.size()) - 1;
  for (int i = 0; i < n; ++i) {
    for (std::int64_t k = links.start[i]; k < links.start[i + 1]; ++k) {
      const int j = links.speaker[k];
      const auto from = links.speaker.begin() + links.start[j], to = links.speaker.begin() + links.start[j + 1];
      const auto back = std::lower_bound(from, to, i);
      const bool mutual = back != to && *back == i;
      found.linked.insert(pair_of(i, j));
      if (!mutual) found.one_way.push_back({i, j, links.relay_precision[k], 0.0});
      if (mutual && i < j) {
        found.both_ways.push_back(
            {i, j, links.relay_precision[k], links.relay_precision[back - links.speaker.begin()]});
      }
    }
  }
  return found;
}

/// One exchange; false where the two cannot.
bool exchange(Contact& a, Contact& b, std::set<std::pair<int, int>>& linked) {
  if (a.first == b.second || b.first == a.second || a.first == b.first || a.second == b.second) return false;
  if (linked.count(pair_of(a.first, b.second)) != 0 || linked.count(pair_of(b.first, a.second)) != 0) return false;
  linked.erase(pair_of(a.first, a.second));
  linked.erase(pair_of(b.first, b.second));
  // Links stay with their listeners: those heard by first stay in place, those heard by second move along.
  std::swap(a.second, b.second);
  std::swap(a.relay_back, b.relay_back);
  linked.insert(pair_of(a.first, a.second));
  linked.insert(pair_of(b.first, b.second));
  return true;
}

void rewire_kind(std::vector<Contact>& contacts, std::size_t wanted, bool both_ways,
                 std::set<std::pair<int, int>>& linked, Stream& stream) {
  constexpr int attempts = 100;
  for (std::size_t k = 0; k < wanted; ++k) {
    // A set of contacts, each set equally likely: a partial Fisher-Yates shuffle.
    std::swap(contacts[k], contacts[k + stream.below(contacts.size() - k)]);
    for (int attempt = 0; attempt < attempts; ++attempt) {
      Contact& other = contacts[stream.below(contacts.size())];
      // Which end of a mutual contact is first means nothing: either may be exchanged.
      if (both_ways && stream.below(2) == 1) {
        std::swap(other.first, other.second);
        std::swap(other.relay, other.relay_back);
      }
      if (&other != &contacts[k] && exchange(contacts[k], other, linked)) break;
    }
  }
}

Links links_of(const Contacts& contacts, int size) {
  std::vector<std::vector<std::pair<int, double>>> heard(size);
  for (const Contact& contact : contacts.both_ways) {
    heard[contact.first].emplace_back(contact.second, contact.relay);
    heard[contact.second].emplace_back(contact.first, contact.relay_back);
  }
  for (const Contact& contact : contacts.one_way) heard[contact.first].emplace_back(contact.second, contact.relay);
  Links links;
  links.start.push_back(0);
  for (auto& of_listener : heard) {
    std::sort(of_listener.begin(), of_listener.end(), [](const auto& a, const auto& b) { return a.first < b.first; });
    for (const auto& [speaker, relay] : of_listener) {
      links.speaker.push_back(speaker);
      links.relay_precision.push_back(relay);
    }
    links.start.push_back(static_cast<std::int64_t>(links.speaker.size()));
  }
  return links;
}

}  // namespace

void rewire(Links& links, double share, Stream stream) {
  Contacts contacts = contacts_of(links);
  const std::size_t mutual = contacts.both_ways.size(), all = mutual + contacts.one_way.size();
  const auto wanted = static_cast<std::size_t>(std::floor(share * static_cast<double>(all) + 0.5));
  // How many of each kind: as in a draw without replacement from all.
  std::size_t of_mutual = 0;
  for (std::size_t k = 0; k < wanted; ++k) of_mutual += stream.below(all - k) < mutual - of_mutual;
  rewire_kind(contacts.both_ways, of_mutual, true, contacts.linked, stream);
  rewire_kind(contacts.one_way, wanted - of_mutual, false, contacts.linked, stream);
  links = links_of(contacts, static_cast<int>(links.start.size()) - 1);
}

}  // namespace folkmote
