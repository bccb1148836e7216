// What makes a plan of sample sizes possible.
#pragma once

#include "sim/design/design.h"

namespace lacuna {

/// Whether rounding `size.distribution` gives at most 2^21 different sizes, which the engine tabulates.
bool is_tabulated(const SizePlan& size);

inline constexpr std::uint32_t largest_tabulated_n = 1u << 20;
inline constexpr std::uint32_t most_looks = 20;
inline constexpr std::uint32_t most_groups = 1000;
inline constexpr std::uint32_t most_unplanned_looks = 4999;  // after the first

/// Whether a study's noise can be set so that its power is any wanted: one or two means, z or Student.
bool has_free_noise(const Design& design);

/// Whether the design's effects can be as large as this, and the rule in words.
bool can_be_effect(Test test, double effect);
const char* effect_limits(Test test);

/// Whether the design's standardised mean difference has a small-sample correction.
bool has_correction(Test test);

/// About how many observations per group `size.power` takes, by the normal approximation
/// n = k ((z_alpha + z_power) / effect)^2 with k = 2 for two-means and 1 for known-variance (Cohen 1988,
/// section 2.4). Only to refuse plans far beyond what can be simulated; the planned n itself is exact.
double rough_planned_n(const SizePlan& size, const Design& design);

}  // namespace lacuna
