#include "analysis/cli/design_preview.h"

#include "sim/design/design.h"

namespace lacuna {

namespace {

/// The smallest n at or below which at least half of the studies are.
std::uint32_t median_size(const IntegerDistribution& sizes) {
    double below = 0.0;
    std::size_t i = 0;
    while (i + 1 < sizes.chance.size() && (below += sizes.chance[i]) < 0.5) ++i;
    return static_cast<std::uint32_t>(sizes.first + static_cast<long>(i));
}

DesignPreview preview_design(const Regime& regime, const LabKind& lab) {
    const Design& design = regime.science.design;
    const IntegerDistribution sizes = size_distribution(design, lab.size);
    const TestPlan plan = describe(design, median_size(sizes));
    const auto low = static_cast<std::uint32_t>(sizes.first);
    const auto high = static_cast<std::uint32_t>(low + sizes.chance.size() - 1);
    DesignPreview preview;
    preview.lab = lab.name;
    preview.regime = regime.name;
    preview.test = design.test == Test::two_means ? "two-means" : "known-variance";
    preview.alpha = design.alpha;
    preview.sides = design.sides;
    preview.n1 = plan.size.n1;
    preview.n2 = plan.size.n2;
    preview.n1_low = low;
    preview.n1_high = high;
    preview.effect = lab.size.kind == SizePlan::Kind::power ? lab.size.effect : mean(regime.science.field.effect);
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
