// The points of a distribution that has only points.
#pragma once

#include <vector>

#include "sim/stats/distribution.h"

namespace lacuna {

/// Values with positive chance in ascending order, each once, truncation or clamping applied, weights
/// summing to 1. For fixed, discrete, and Poisson (whose support is cut where a tail holds less than
/// 2^-60); the distribution must not be degenerate otherwise.
std::vector<Node> atoms(const Distribution& distribution);

/// Sorts by x, adds up equal x, drops zero weights, and makes the weights sum to 1.
void settle(std::vector<Node>& nodes);

}  // namespace lacuna
