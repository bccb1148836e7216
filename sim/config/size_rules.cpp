#include "sim/config/size_rules.h"

#include "sim/config/support.h"

namespace lacuna {

bool is_tabulated(const SizePlan& size) {
    return practical_highest_draw(size.distribution) - lowest_draw(size.distribution) <= 0x1p22;
}

double rough_planned_n(const SizePlan& size, const Design& design) {
    Distribution normal;
    normal.family = Family::normal;
    normal.second = 1.0;
    const double z = quantile(normal, size.power) - quantile(normal, design.alpha / design.sides);
    const double groups = design.test == Test::two_means ? 2.0 : 1.0;
    return groups * (z / size.effect) * (z / size.effect);
}

}  // namespace lacuna
