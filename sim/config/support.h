// Where a distribution's draws can fall.
#pragma once

#include "sim/stats/distribution.h"

namespace lacuna {

/// The smallest and the largest draw, infinite where there is none, with min and max applied.
double lowest_draw(const Distribution& distribution);
double highest_draw(const Distribution& distribution);

/// The same; where a family goes on for ever, the point beyond which less than 2^-53 of it lies.
double practical_lowest_draw(const Distribution& distribution);
double practical_highest_draw(const Distribution& distribution);

}  // namespace lacuna
