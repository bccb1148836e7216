#include "sim/literature/expected_studies.h"

#include <algorithm>
#include <cmath>

#include "sim/design/design.h"
#include "sim/stats/distribution.h"
#include "sim/stats/student_t.h"

namespace lacuna {

namespace {

/// Mean length of a line whose studies find with chance p, independently: by going through its studies,
/// chances[k] being that it goes on with k failures so far.
double mean_length(const LineRule& rule, double p) {
    if (rule.kind == LineRule::Kind::fixed) return rule.count;
    if (rule.kind == LineRule::Kind::until_positive) {
        return p > 0.0 ? -std::expm1(rule.limit * std::log1p(-p)) / p : rule.limit;
    }
    std::vector<double> going(rule.failures, 0.0);
    going[0] = 1.0;
    double length = 0.0;
    for (std::uint32_t study = 0; study < rule.limit; ++study) {
        std::vector<double> next(rule.failures, 0.0);
        for (std::size_t k = 0; k < going.size(); ++k) {
            length += going[k];
            next[k] += going[k] * p;
            if (k + 1 < next.size()) next[k + 1] += going[k] * (1.0 - p);
        }
        going.swap(next);
    }
    return length;
}

/// Studies of a few sizes that stand for all: quantiles of the size, as if there were no interim looks.
std::vector<TestPlan> some_plans(Design design, const IntegerDistribution& sizes) {
    design.looks = Looks{};
    std::vector<TestPlan> some;
    double below = 0.0;
    for (std::size_t i = 0, next = 0; i < sizes.chance.size() && next < 5; ++i) {
        below += sizes.chance[i];
        for (; next < 5 && below >= (static_cast<double>(next) + 0.5) / 5.0; ++next) {
            some.push_back(describe(design, static_cast<std::uint32_t>(sizes.first + static_cast<long>(i))));
        }
    }
    return some;
}

/// Chances of significant results, quickly: where the exact ones take long, by a noncentral t next to them.
/// The designs whose exact ones are taken have no looks.
Tails rough_tails(const Design& design, const TestPlan& plan, double effect) {
    if (design.test == Test::several_means || design.test == Test::two_proportions) return tails(design, plan, effect);
    const double slope = design.test == Test::correlation ? effect / std::sqrt(1.0 - effect * effect) : effect;
    const double noncentrality = slope * plan.noncentrality;
    return {noncentral_t_upper(plan.critical, plan.df, noncentrality),
            design.sides == 2 ? noncentral_t_lower(-plan.critical, plan.df, noncentrality) : 0.0};
}

/// Chance of a finding about a question of this effect, averaged over sizes and over the studies' deviations.
double finding_chance(const Science& science, const std::vector<TestPlan>& plans, double effect) {
    Distribution deviation = Distribution::fixed(0.0);
    if (science.field.heterogeneity > 0.0)
        deviation = {Family::normal, 0.0, science.field.heterogeneity, -infinity, infinity, false, {}, {}};
    const bool either = science.design.findings == Findings::either;
    const double most = science.design.test == Test::correlation ? 0.999 : infinity;
    double sum = 0.0;
    for (const Node& node : quadrature(deviation, 4)) {
        for (const TestPlan& plan : plans) {
            const Tails its = rough_tails(science.design, plan, std::clamp(effect + node.x, -most, most));
            sum += node.weight * (its.predicted + (either ? its.reversed : 0.0));
        }
    }
    return plans.empty() ? 0.0 : std::clamp(sum / static_cast<double>(plans.size()), 0.0, 1.0);
}

double mean_studies(const Science& science, const LabKind& kind) {
    if (kind.studies.kind == LineRule::Kind::fixed) return kind.studies.count;
    if (kind.size.for_each_question()) {
        const double rate = science.field.true_rate;
        return rate * mean_length(kind.studies, kind.size.power) +
               (1.0 - rate) * mean_length(kind.studies, science.design.alpha);
    }
    const std::vector<TestPlan> plans = some_plans(science.design, size_distribution(science.design, kind.size));
    const auto over = [&](const Distribution& effects) {
        double sum = 0.0;
        for (const Node& node : quadrature(effects, 8)) {
            sum += node.weight * mean_length(kind.studies, finding_chance(science, plans, node.x));
        }
        return sum;
    };
    const double rate = science.field.true_rate;
    return rate * over(science.field.effect) + (1.0 - rate) * over(science.field.null_effect);
}

}  // namespace

double expected_studies(const Science& science) {
    double studies = 0.0;
    for (const LabKind& kind : science.labs) studies += kind.share * mean(kind.lines) * mean_studies(science, kind);
    return studies * static_cast<double>(science.field.labs);
}

}  // namespace lacuna
