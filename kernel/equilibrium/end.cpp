#include "equilibrium/end.hpp"

#include <algorithm>
#include <cmath>

// Monotone best replies (Milgrom & Roberts 1990; Vives 1990; Van Zandt & Vives 2007): started where everybody acts they
// fall to the greatest equilibrium, started where nobody acts they rise to the least, and at every step the two
// iterates enclose every equilibrium. Replies are taken in turn, each against the newest cutoffs of the others
// (Gauss-Seidel), which keeps the enclosure and needs fewer sweeps.
//
// Leaps. With precise signals, or near a critical point, sweeps creep. Let u be the iterate from the top and v > 0. If
//   F_i(u - s v) < 0 for every i and every s in [0, S),
// no equilibrium k <= u lies outside k <= u - S v: otherwise raise s until u - s v touches k, at member i, say; the
// others are at or below the path, so 0 = F_i(k) <= F_i(u - s v) < 0, a contradiction. F_i is followed along the path
// by the largest slope that it can have there (BestReply::steepest), so the whole leap is proved, not only its landing.
//
// When is an end found? If k = u - epsilon v with v > 0 satisfies BR(k) >= k, then by Tarski there is an equilibrium
// above k; the greatest one therefore lies in [k, u]. The mirror image certifies the least. So an end is never declared
// found because steps became small, which near a critical point they do long before the end.

namespace folkmote {

End::End(BestReply& game, Side side, double tolerance)
    : game_(game),
      side_(side),
      slack_(tolerance / 4.0),
      gains_(game.size()),
      trial_(game.size()),
      linearised_(game.size()) {
  for (int i = 0; i < game.size(); ++i) {
    cutoffs_.push_back(side == Side::greatest ? game.highest(i) : game.lowest(i));
  }
}

void End::advance(double room) {
  if (iterations_ == 0) leap_together(room);
  sweep();
  if (largest_ <= slack_) {
    certified_ = certify();
    stalled_ = !certified_ && largest_ == 0.0;
    if (finished()) return;
  }
  constexpr double slow = 0.1;
  if (largest_ > slow * last_largest_) leap_by_newton();
}

void End::sweep() {
  last_largest_ = largest_;
  largest_ = 0.0;
  for (int i = 0; i < game_.size(); ++i) {
    const double reply = game_.reply(i, cutoffs_[i], cutoffs_, limit());
    // Never back across the last iterate: only rounding could ask for it.
    const double next = side_ == Side::greatest ? std::min(reply, cutoffs_[i]) : std::max(reply, cutoffs_[i]);
    largest_ = std::max(largest_, std::fabs(next - cutoffs_[i]));
    cutoffs_[i] = next;
  }
  ++iterations_;
}

/// |F_i|, with 0 where rounding has put a cutoff on the wrong side of its reply.
void End::measure_gains() {
  for (int i = 0; i < game_.size(); ++i) {
    gains_[i] = std::max(0.0, -sign() * game_.gain(i, cutoffs_[i], cutoffs_, limit()));
  }
}

/// All cutoffs by the same step: from the far start, where with precise signals sweeps move by a signal's error only.
bool End::leap_together(double room) {
  ++iterations_;
  measure_gains();
  direction_.assign(cutoffs_.size(), 1.0);
  double step = room;
  for (int i = 0; i < game_.size(); ++i) {
    const double slope = game_.steepest(i, cutoffs_, direction_, 0.0);
    if (slope > 0.0) step = std::min(step, 0.98 * gains_[i] / slope);
  }
  for (int attempt = 0; attempt < 4; ++attempt, step *= 0.4) {
    if (take_if_safe(step)) return true;
  }
  return false;
}

/// Along the Newton direction that would leave every member a tenth of the largest gain, or a third: what is left
/// pays for the curvature that the linear step does not see.
bool End::leap_by_newton() {
  ++iterations_;
  if (!linearised_.set(game_, cutoffs_)) return false;
  measure_gains();
  const double largest = *std::max_element(gains_.begin(), gains_.end());
  for (const double left : {0.1, 0.33}) {
    std::vector<double> rates = gains_;
    for (double& rate : rates) rate -= left * largest;
    const auto found = linearised_.direction(rates);
    if (!found) continue;
    direction_ = *found;
    for (double& v : direction_) v = std::max(v, 0.0);
    for (double step = 1.0; step > 0.1; step *= 0.5) {
      if (take_if_safe(step)) return true;
    }
  }
  return false;
}

/// Moves along the direction if no gain can change its sign on the way.
bool End::take_if_safe(double step) {
  for (int i = 0; i < game_.size(); ++i) {
    if (!(game_.steepest(i, cutoffs_, direction_, -sign() * step) * step < gains_[i])) return false;
  }
  for (std::size_t i = 0; i < cutoffs_.size(); ++i) cutoffs_[i] -= sign() * step * direction_[i];
  return true;
}

/// Tries v = 1 for every member, then the v along which all gains rise alike where the game is nearly linear.
bool End::certify() {
  const std::vector<double> ones(cutoffs_.size(), 1.0);
  if (certify_along(ones)) return true;
  if (!linearised_.set(game_, cutoffs_)) return false;
  auto direction = linearised_.direction(ones);
  if (!direction || *std::min_element(direction->begin(), direction->end()) <= 0.0) return false;
  const double furthest = *std::max_element(direction->begin(), direction->end());
  for (double& v : *direction) v /= furthest;
  return certify_along(*direction);
}

/// Whether k = cutoffs -+ slack v satisfies BR(k) >= k (greatest) or BR(k) <= k (least).
bool End::certify_along(const std::vector<double>& direction) {
  for (std::size_t i = 0; i < cutoffs_.size(); ++i) trial_[i] = cutoffs_[i] - sign() * slack_ * direction[i];
  for (int i = 0; i < game_.size(); ++i) {
    if (sign() * game_.gain(i, trial_[i], trial_, limit()) < 0.0) return false;
  }
  return true;
}

}  // namespace folkmote
