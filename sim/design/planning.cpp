#include <string>

#include "sim/base/fault.h"
#include "sim/design/design.h"
#include "sim/design/two_proportions.h"

namespace lacuna {

namespace {

std::string shown(double x) {
    std::string text = std::to_string(x);
    text.erase(text.find_last_not_of('0') + 1);
    if (text.back() == '.') text.pop_back();
    return text;
}

[[noreturn]] void refuse_plan(const Design& design, double target_power, double effect) {
    Fault fault;
    fault.key = "size";
    fault.message = "no study of up to " + std::to_string(largest_n) + " observations" +
                    (design.test == Test::two_means || design.test == Test::several_means ? " per group" : "") + " reaches power " + shown(target_power) +
                    " at effect " + shown(effect);
    if (design.sides == 1 && effect < 0.0) {
        fault.remedy = "a one-sided test predicts a positive effect: plan for one, or use sides = 2";
    } else {
        fault.remedy = "plan for a larger effect or a lower power";
    }
    throw InputError(std::move(fault));
}

[[noreturn]] void refuse_size(const Design& design, long n) {
    Fault fault;
    fault.key = "size";
    fault.message = "studies of n = " + std::to_string(n) + " would occur, but n must be " +
                    std::to_string(smallest_n(design)) + " .. " + std::to_string(largest_n);
    fault.remedy = "bound the sizes with min and max";
    throw InputError(std::move(fault));
}

}  // namespace

std::uint32_t planned_n(const Design& design, double target_power, double effect) {
    if (design.test == Test::two_proportions) {  // its power is not monotone in n
        const double critical = describe(design, smallest_n(design)).critical;
        const std::uint32_t n = two_proportions::planned_n(design.base_rate, effect, target_power, critical,
                                                           design.sides, design.allocation);
        if (n == 0) refuse_plan(design, target_power, effect);
        return n;
    }
    const auto reaches = [&](std::uint32_t n) {
        return power(design, describe(design, n), effect) >= target_power;
    };
    std::uint32_t reaching = smallest_n(design);
    std::uint32_t lacking = reaching - 1;
    while (!reaches(reaching)) {
        // Without an effect in the tested direction power never grows with n.
        const bool hopeless = effect == 0.0 || (design.sides == 1 && effect < 0.0);
        if (hopeless || reaching == largest_n) refuse_plan(design, target_power, effect);
        lacking = reaching;
        reaching = reaching > largest_n / 2 ? largest_n : 2 * reaching;
    }
    while (reaching - lacking > 1) {
        const std::uint32_t middle = lacking + (reaching - lacking) / 2;
        (reaches(middle) ? reaching : lacking) = middle;
    }
    return reaching;
}

IntegerDistribution size_distribution(const Design& design, const SizePlan& size) {
    IntegerDistribution sizes;
    switch (size.kind) {
        case SizePlan::Kind::fixed:
            sizes = {static_cast<long>(size.n), {1.0}};
            break;
        case SizePlan::Kind::power:
            sizes = {static_cast<long>(planned_n(design, size.power, size.effect.value)), {1.0}};
            break;
        case SizePlan::Kind::exact_power:
            sizes = {static_cast<long>(size.n), {1.0}};
            break;
        case SizePlan::Kind::distribution:
            sizes = rounded(size.distribution, size.round_down);
            break;
    }
    const long last = sizes.first + static_cast<long>(sizes.chance.size()) - 1;
    if (sizes.first < static_cast<long>(smallest_n(design))) refuse_size(design, sizes.first);
    if (last > static_cast<long>(largest_n)) refuse_size(design, last);
    return sizes;
}

}  // namespace lacuna
