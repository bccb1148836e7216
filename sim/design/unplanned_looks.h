// The looks of a study that stops when it finds.
#pragma once

#include <cstdint>
#include <vector>

#include "sim/model/scenario.h"

namespace lacuna {

/// Sizes per group at each look of a study planned for n, ascending: start, then a batch more each time, the last
/// at the limit. Multiples of n are rounded to nearest, and never below `least`; looks that add nobody are left out.
std::vector<std::uint32_t> look_sizes(const OptionalStopping& stopping, std::uint32_t n, std::uint32_t least);

}  // namespace lacuna
