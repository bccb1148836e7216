#include "sim/config/size_rules.h"

#include <cmath>

#include "sim/config/support.h"

namespace lacuna {

namespace {

constexpr double largest_log_odds_ratio = 30.0;

}  // namespace

bool is_tabulated(const SizePlan& size) {
    return practical_highest_draw(size.distribution) - lowest_draw(size.distribution) <= 0x1p21;  // so many that words of 32 bits pick them exactly
}

double rough_planned_n(const SizePlan& size, const Design& design) {
    Distribution normal;
    normal.family = Family::normal;
    normal.second = 1.0;
    const double z = quantile(normal, size.power) - quantile(normal, design.alpha / design.sides);
    const double groups = design.test == Test::two_means ? 1.0 + 1.0 / design.allocation : 1.0;
    const double per_group = design.test == Test::several_means ? 1.0 / design.groups : groups;
    return per_group * (z / size.effect.value) * (z / size.effect.value);
}

bool has_free_noise(const Design& design) {
    switch (design.test) {
        case Test::two_means:
            return !design.welch;
        case Test::paired_means:
        case Test::one_mean:
        case Test::known_variance:
            return true;
        case Test::correlation:
        case Test::two_proportions:
        case Test::several_means:
            return false;
    }
    return false;
}

bool can_be_effect(Test test, double effect) {
    switch (test) {
        case Test::correlation:
            return std::fabs(effect) < 1.0;
        case Test::several_means:
            return effect >= 0.0 && effect <= 10.0;
        case Test::two_proportions:
            return std::fabs(effect) <= largest_log_odds_ratio;
        case Test::two_means:
        case Test::paired_means:
        case Test::one_mean:
        case Test::known_variance:
            return true;
    }
    return true;
}

const char* effect_limits(Test test) {
    switch (test) {
        case Test::correlation:
            return "must be above -1 and below 1, being a correlation";
        case Test::several_means:
            return "must be between 0 and 10, being Cohen's f";
        case Test::two_proportions:
            return "must be between -30 and 30, being a log odds ratio";
        case Test::two_means:
        case Test::paired_means:
        case Test::one_mean:
        case Test::known_variance:
            return "";
    }
    return "";
}

bool has_correction(Test test) {
    return test == Test::two_means || test == Test::paired_means || test == Test::one_mean;
}

}  // namespace lacuna
