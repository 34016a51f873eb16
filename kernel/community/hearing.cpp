#include "community/hearing.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

namespace folkmote {

namespace {

constexpr double exact = std::numeric_limits<double>::infinity();

double relay_variance(double relay_precision) { return std::isinf(relay_precision) ? 0.0 : 1.0 / relay_precision; }

}  // namespace

HeardSet::HeardSet(const Community& community, std::vector<double> relay_of_listener)
    : community_(community),
      relay_of_listener_(std::move(relay_of_listener)),
      gatherings_of_(community.size),
      path_(community.hops > 1 ? community.size : 0, Path{0.0, 0.0, 0, 0.0}) {
  for (std::size_t g = 0; g < community.gatherings.size(); ++g) {
    for (int member : community.gatherings[g].members) gatherings_of_[member].push_back(static_cast<int>(g));
  }
}

std::span<const Heard> HeardSet::of(int member) {
  if (community_.hops > 1)
    forward(member);
  else
    hear_directly(member, heard_);
  return heard_;
}

void HeardSet::hear_directly(int member, std::vector<Heard>& into) const {
  into.clear();
  const Links& links = community_.links;
  for (std::int64_t k = links.start[member]; k < links.start[member + 1]; ++k) {
    const double own = links.relay_precision[k];
    into.push_back({links.speaker[k], std::isnan(own) ? relay_of_listener_[member] : own});
  }
  if (gatherings_of_[member].empty()) return;
  for (int g : gatherings_of_[member]) {
    for (int speaker : community_.gatherings[g].members) {
      if (speaker != member) into.push_back({speaker, exact});
    }
  }
  // A speaker heard twice is kept once, in the most precise way.
  std::sort(into.begin(), into.end(), [](const Heard& a, const Heard& b) {
    return a.speaker != b.speaker ? a.speaker < b.speaker : a.relay_precision > b.relay_precision;
  });
  const auto last =
      std::unique(into.begin(), into.end(), [](const Heard& a, const Heard& b) { return a.speaker == b.speaker; });
  into.erase(last, into.end());
}

/// Most precise paths of at most `hops` links (the recursion of Bellman 1958), one hop per round: a member reached in
/// the last round passes on what it hears directly.
void HeardSet::forward(int member) {
  hear_directly(member, next_);
  reached_.clear();
  for (const Heard& h : next_) {
    const double variance = relay_variance(h.relay_precision);
    path_[h.speaker] = {variance, h.relay_precision, 1, variance * variance};
    reached_.push_back(h.speaker);
  }
  std::vector<std::pair<int, Path>> improved;
  for (const Heard& h : next_) improved.emplace_back(h.speaker, path_[h.speaker]);
  for (int hop = 2; hop <= community_.hops && !improved.empty(); ++hop) {
    const std::vector<std::pair<int, Path>> relays = std::move(improved);
    improved.clear();
    for (const auto& [relay, way] : relays) {
      hear_directly(relay, next_);
      for (const Heard& h : next_) {
        if (h.speaker == member) continue;
        const double added = relay_variance(h.relay_precision);
        const double longer = way.variance + added;
        Path& path = path_[h.speaker];
        if (path.hops != 0 && path.variance <= longer) continue;
        if (path.hops == 0) reached_.push_back(h.speaker);
        path = {longer, exact, hop, way.squares + added * added};
        improved.emplace_back(h.speaker, path);
      }
    }
  }
  std::sort(reached_.begin(), reached_.end());
  heard_.clear();
  for (int speaker : reached_) {
    Path& path = path_[speaker];
    const double several = path.variance > 0.0 ? 1.0 / path.variance : exact;
    const double slope = path.variance > 0.0 ? path.squares / path.variance / path.variance : 1.0;
    heard_.push_back({speaker, path.hops == 1 ? path.relay_precision : several, slope});
    path.hops = 0;
  }
}

}  // namespace folkmote
