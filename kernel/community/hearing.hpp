#pragma once
// Whom a member hears: direct links and gatherings together, forwarded over the community's number of hops; nobody
// twice, never itself (MODEL.md, sections 2 and 7).
#include "numerics/strict.hpp"

#include <span>
#include <vector>

#include "community/study.hpp"

namespace folkmote {

struct Heard {
  int speaker;
  double relay_precision;    // infinite: exact
  double relay_slope = 1.0;  // d(relay_precision) when all relays on the way gain the same; no matter where exact
};

/// Answers one member at a time, so that a gathering of k is never stored as k^2 links.
class HeardSet {
 public:
  /// `relay_of_listener`: the precision of a link that has none of its own, by listener.
  HeardSet(const Community& community, std::vector<double> relay_of_listener);

  /// In increasing order of speaker. The span is valid until the next call.
  std::span<const Heard> of(int member);

 private:
  void hear_directly(int member, std::vector<Heard>& into) const;
  void forward(int member);

  /// The most precise way, so far, in which a report reaches the member asked about.
  struct Path {
    double variance;         // sum of 1 / gamma along it
    double relay_precision;  // of its only link, kept so that one hop changes no bit
    int hops;                // 0: not reached
    double squares;          // sum of 1 / gamma^2 along it
  };

  const Community& community_;
  std::vector<double> relay_of_listener_;
  std::vector<std::vector<int>> gatherings_of_;
  std::vector<Heard> heard_;
  std::vector<Heard> next_;
  std::vector<Path> path_;
  std::vector<int> reached_;
};

}  // namespace folkmote
