#include "sim/design/unplanned_looks.h"

#include <algorithm>
#include <cmath>

#include "sim/design/design.h"

namespace lacuna {

std::vector<std::uint32_t> look_sizes(const OptionalStopping& stopping, std::uint32_t n, std::uint32_t least) {
    const double unit = stopping.relative ? n : 1.0;
    std::vector<std::uint32_t> sizes;
    const auto look = [&](double multiple) {
        const double size = std::clamp(std::floor(multiple * unit + 0.5), double(least), double(largest_n));
        if (sizes.empty() || size > sizes.back()) sizes.push_back(static_cast<std::uint32_t>(size));
    };
    const auto whole_batches = static_cast<std::uint32_t>(std::floor((stopping.limit - stopping.start) / stopping.batch + 1e-9));
    for (std::uint32_t k = 0; k <= whole_batches; ++k) look(std::fmin(stopping.limit, stopping.start + k * stopping.batch));
    look(stopping.limit);
    return sizes;
}

}  // namespace lacuna
