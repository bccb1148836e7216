#include "sim/config/rule.h"

#include <fmt/format.h>

#include <cmath>

namespace lacuna {

bool Range::holds(double x) const {
    if (!std::isfinite(x)) return false;
    return (low_open ? x > low : x >= low) && (high_open ? x < high : x <= high);
}

std::string to_string(const Range& range) {
    const bool below = std::isfinite(range.low);
    const bool above = std::isfinite(range.high);
    if (!below && !above) return "finite";
    if (below && above && !range.low_open && !range.high_open) {
        return fmt::format("between {} and {}", range.low, range.high);
    }
    std::string text;
    if (below) text = range.low_open ? fmt::format("above {}", range.low) : fmt::format("{} or more", range.low);
    if (below && above) text += " and ";
    if (above)
        text += range.high_open ? fmt::format("below {}", range.high) : fmt::format("at most {}", range.high);
    return text;
}

}  // namespace lacuna
