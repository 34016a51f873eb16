#pragma once
// Rewiring contacts at random with everybody's number of listeners and of members heard kept (MODEL.md, section 7).
#include "numerics/strict.hpp"

#include "community/study.hpp"
#include "random/streams.hpp"

namespace folkmote {

/// Draws the nearest whole number of `share` times the contacts. Each exchanges partners with another contact of its
/// kind (heard in both directions, or in one), drawn at random: a-b and c-d become a-d and c-b. An exchange that would
/// link a member to itself, or a pair that is linked already, is drawn again, a hundred times at most; after that the
/// contact stays as it is. Each link keeps its listener, and with it its relay precision.
void rewire(Links& links, double share, Stream stream);

}  // namespace folkmote
