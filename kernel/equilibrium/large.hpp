#pragma once
// Enclosing the equilibria of a large community with the turnout curve (MODEL.md, section 4).
#include "numerics/strict.hpp"

#include <optional>

#include "equilibrium/curve_game.hpp"
#include "equilibrium/enclosure.hpp"

namespace folkmote {

/// Large enough that the curve is worth its set-up.
bool is_large(int size);

/// The game of a large community by the turnout curve; nothing where that does not serve, because pairs that share
/// information are too many to be held one by one (20 bytes each).
std::optional<CurveGame> curve_game(const Knowledge& knowledge, const Stakes& stakes, const Execution& execution);

/// As `enclose`. Where the contraction bound proves one equilibrium it is found by accelerated best replies and then
/// enclosed; elsewhere monotone best replies enclose both ends. `execution` splits each sweep.
Enclosure enclose_large(CurveGame& game, const SolveRule& rule, const Execution& execution);

}  // namespace folkmote
