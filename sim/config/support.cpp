#include "sim/config/support.h"

#include <algorithm>

#include "sim/base/fault.h"

namespace lacuna {

namespace {

/// The smallest value of positive weight.
double extreme_value(const Distribution& d, bool largest) {
    double extreme = largest ? -infinity : infinity;
    for (std::size_t i = 0; i < d.values.size(); ++i) {
        const bool inside = d.clamp || (d.values[i] >= d.min && d.values[i] <= d.max);
        if (i >= d.weights.size() || d.weights[i] <= 0.0 || !inside) continue;
        extreme = largest ? std::max(extreme, d.values[i]) : std::min(extreme, d.values[i]);
    }
    return extreme;
}

double family_lowest(const Distribution& d) {
    switch (d.family) {
        case Family::fixed:
        case Family::uniform:
            return d.first;
        case Family::normal:
            return d.second > 0.0 ? -infinity : d.first;
        case Family::lognormal:
            return d.second > 0.0 ? 0.0 : d.first;
        case Family::half_normal:
        case Family::gamma:
        case Family::beta:
        case Family::poisson:
            return 0.0;
        case Family::discrete:
            return extreme_value(d, false);
    }
    throw Defect("lowest_draw: unknown family");
}

double family_highest(const Distribution& d) {
    switch (d.family) {
        case Family::fixed:
            return d.first;
        case Family::uniform:
            return d.second;
        case Family::normal:
        case Family::lognormal:
            return d.second > 0.0 ? infinity : d.first;
        case Family::half_normal:
            return d.first > 0.0 ? infinity : 0.0;
        case Family::beta:
            return 1.0;
        case Family::gamma:
            return infinity;
        case Family::poisson:
            return d.first > 0.0 ? infinity : 0.0;
        case Family::discrete:
            return extreme_value(d, true);
    }
    throw Defect("highest_draw: unknown family");
}

}  // namespace

double lowest_draw(const Distribution& d) { return std::clamp(family_lowest(d), d.min, d.max); }

double highest_draw(const Distribution& d) { return std::clamp(family_highest(d), d.min, d.max); }

double practical_lowest_draw(const Distribution& d) {
    const double lowest = lowest_draw(d);
    return lowest > -infinity ? lowest : quantile(d, 0x1p-53);
}

double practical_highest_draw(const Distribution& d) {
    const double highest = highest_draw(d);
    return highest < infinity ? highest : quantile(d, 1.0 - 0x1p-53);
}

}  // namespace lacuna
