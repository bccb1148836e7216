#include "analysis/cli/design_preview.h"

#include <algorithm>
#include <cmath>

#include "sim/config/choices.h"
#include "sim/design/design.h"
#include "sim/design/plan_table.h"

namespace lacuna {

namespace {

/// The smallest n at or below which at least half of the studies are.
std::uint32_t median_size(const IntegerDistribution& sizes) {
    double below = 0.0;
    std::size_t i = 0;
    while (i + 1 < sizes.chance.size() && (below += sizes.chance[i]) < 0.5) ++i;
    return static_cast<std::uint32_t>(sizes.first + static_cast<long>(i));
}

struct Sizes {
    std::uint32_t median, low, high;
};

/// Of studies planned for each question: at the planning effect of a question of mean effect, and the range
/// over the middle 99.8 % of effects.
Sizes planned_sizes(const Regime& regime, const SizePlan& size) {
    const Distribution& effects = regime.science.field.effect;
    const double lower = quantile(effects, 0.001), upper = quantile(effects, 0.999);
    const double least = lower > 0.0 ? lower : upper < 0.0 ? -upper : 0.0;
    const PlanTable plan(regime.science.design, size.power, size.most, size.effect.optimism * least);
    const auto n = [&](double effect) { return plan.first() + plan.position(size.effect.optimism * effect); };
    const auto [low, high] = std::minmax({n(lower), n(upper), n(mean(effects))});
    return {n(mean(effects)), low, high};
}

Sizes sizes_of(const Regime& regime, const SizePlan& size) {
    if (size.kind == SizePlan::Kind::power && size.effect.is_true) return planned_sizes(regime, size);
    const IntegerDistribution sizes = size_distribution(regime.science.design, size);
    const auto low = static_cast<std::uint32_t>(sizes.first);
    return {median_size(sizes), low, static_cast<std::uint32_t>(low + sizes.chance.size() - 1)};
}

double effect_shown(const Regime& regime, const SizePlan& size) {
    const bool planned = size.kind == SizePlan::Kind::power || size.kind == SizePlan::Kind::exact_power;
    return planned && !size.effect.is_true ? size.effect.value : mean(regime.science.field.effect);
}

DesignPreview preview_design(const Regime& regime, const LabKind& lab) {
    const Design& design = regime.science.design;
    const Sizes sizes = sizes_of(regime, lab.size);
    TestPlan plan = describe(design, sizes.median);
    DesignPreview preview;
    preview.lab = lab.name;
    preview.regime = regime.name;
    preview.test = word_for(design.test);
    preview.alpha = design.alpha;
    preview.sides = design.sides;
    preview.n1 = plan.size.n1;
    preview.n2 = plan.size.n2;
    preview.n1_low = sizes.low;
    preview.n1_high = sizes.high;
    preview.effect = effect_shown(regime, lab.size);
    if (lab.size.kind == SizePlan::Kind::exact_power) {
        const double planned = lab.size.effect.is_true ? lab.size.effect.optimism * preview.effect : preview.effect;
        plan.noncentrality = noncentrality_of_power(design, lab.size.n, lab.size.power) / std::fabs(planned);
    }
    preview.power_is_exact = design.looks.count == 1 || design.test == Test::known_variance;
    preview.power = power(design, plan, preview.effect);
    preview.power_predicted = power_predicted(design, plan, preview.effect);
    preview.critical = plan.critical;
    preview.minimal_significant_effect = minimal_significant_effect(design, plan);
    return preview;
}

}  // namespace

std::vector<DesignPreview> preview_designs(const Regime& regime) {
    std::vector<DesignPreview> designs;
    for (const LabKind& lab : regime.science.labs) designs.push_back(preview_design(regime, lab));
    return designs;
}

}  // namespace lacuna
