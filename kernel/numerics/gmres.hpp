// Linear systems of which only the product with a vector is known, solved to full accuracy.
#pragma once

#include "numerics/strict.hpp"

#include <functional>
#include <optional>
#include <span>
#include <vector>

namespace folkmote {

/// v -> A v.
using LinearMap = std::function<std::vector<double>(std::span<const double> v)>;

/// x with A x = right, for A of the size of the identity: |right - A x| is at most 1e-14 (|right| + |x|) in the
/// Euclidean norm. Nothing where 600 products do not get there.
std::optional<std::vector<double>> gmres(const LinearMap& map, std::span<const double> right);

}  // namespace folkmote
