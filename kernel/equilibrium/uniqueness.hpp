#pragma once
// Proofs that a box of cutoffs holds at most one equilibrium (MODEL.md, section 5).
#include "numerics/strict.hpp"

#include <span>

#include "equilibrium/best_reply.hpp"

namespace folkmote {

/// An upper bound, rounded outward, on how much of a difference between two cutoff vectors of the box survives a best
/// reply, in the weighted sup-norm max_i |x_i| / v_i with v near the Perron vector. Below 1: at most one equilibrium in
/// the box. Infinite where a gain jumps.
double box_bound(const BestReply& game, std::span<const double> least, std::span<const double> greatest);

}  // namespace folkmote
