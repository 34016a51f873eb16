#pragma once
// A range of plays cut into pieces of work: progress and cancel move within one large community, and threads share it.
#include "numerics/strict.hpp"

#include <algorithm>
#include <cstdint>
#include <vector>

#include "turnout/play_block.hpp"

namespace folkmote {

/// Plays first .. first + count - 1 of a range, in one community.
struct PlayPiece {
  std::int64_t community;
  std::int64_t first;
  std::int64_t count;
};

/// Appends the pieces of `plays` plays of a community of `size` members: about a million member-plays each, at least 64
/// plays, which make what is done once in a piece cheap.
inline void cut_plays(std::vector<PlayPiece>& pieces, std::int64_t community, std::int64_t size, std::int64_t plays) {
  const std::int64_t most = std::max<std::int64_t>(64, (std::int64_t{1} << 20) / std::max<std::int64_t>(size, 1));
  for (std::int64_t first = 0; first < plays; first += most) {
    pieces.push_back({community, first, std::min(most, plays - first)});
  }
}

/// Calls `play(first, count)` for the plays of a piece, `lanes` at a time, until the work is stopped.
template <class Stop, class Play>
void play_by_lanes(const PlayPiece& piece, const Stop& stop, const Play& play) {
  const std::int64_t end = piece.first + piece.count;
  for (std::int64_t first = piece.first; first < end && !stop.raised(); first += lanes) {
    play(first, static_cast<int>(std::min<std::int64_t>(lanes, end - first)));
  }
}

}  // namespace folkmote
