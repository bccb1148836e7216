// What makes a plan of sample sizes possible.
#pragma once

#include "sim/design/design.h"

namespace lacuna {

/// Whether rounding `size.distribution` gives at most 2^22 different sizes, which the engine tabulates.
bool is_tabulated(const SizePlan& size);

/// About how many observations per group `size.power` takes, by the normal approximation
/// n = k ((z_alpha + z_power) / effect)^2 with k = 2 for two-means and 1 for known-variance (Cohen 1988,
/// section 2.4). Only to refuse plans far beyond what can be simulated; the planned n itself is exact.
double rough_planned_n(const SizePlan& size, const Design& design);

}  // namespace lacuna
