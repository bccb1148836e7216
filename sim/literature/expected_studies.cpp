#include "sim/literature/expected_studies.h"

#include <algorithm>
#include <cmath>

#include "sim/design/design.h"
#include "sim/stats/distribution.h"

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

/// Chance of a finding about a question of this effect, averaged over sizes (by a few of their quantiles)
/// and over the studies' deviations. Coarse: it only predicts how long a run takes.
double finding_chance(const Science& science, const IntegerDistribution& sizes, double effect) {
    std::vector<std::uint32_t> some;
    double below = 0.0;
    for (std::size_t i = 0, next = 0; i < sizes.chance.size() && next < 9; ++i) {
        below += sizes.chance[i];
        for (; next < 9 && below >= (static_cast<double>(next) + 0.5) / 9.0; ++next) {
            some.push_back(static_cast<std::uint32_t>(sizes.first + static_cast<long>(i)));
        }
    }
    Distribution deviation = Distribution::fixed(0.0);
    if (science.field.heterogeneity > 0.0)
        deviation = {Family::normal, 0.0, science.field.heterogeneity, -infinity, infinity, false, {}, {}};
    double sum = 0.0;
    for (const Node& node : quadrature(deviation, 8)) {
        for (const std::uint32_t n : some) {
            const TestPlan plan = describe(science.design, n);
            const bool either = science.design.findings == Findings::either;
            sum += node.weight * (either ? power(science.design, plan, effect + node.x)
                                         : power_predicted(science.design, plan, effect + node.x));
        }
    }
    return some.empty() ? 0.0 : std::clamp(sum / static_cast<double>(some.size()), 0.0, 1.0);
}

double mean_studies(const Science& science, const LabKind& kind) {
    if (kind.studies.kind == LineRule::Kind::fixed) return kind.studies.count;
    if (kind.size.for_each_question()) {
        const double rate = science.field.true_rate;
        return rate * mean_length(kind.studies, kind.size.power) +
               (1.0 - rate) * mean_length(kind.studies, science.design.alpha);
    }
    const IntegerDistribution sizes = size_distribution(science.design, kind.size);
    const auto over = [&](const Distribution& effects) {
        double sum = 0.0;
        for (const Node& node : quadrature(effects, 16)) {
            sum += node.weight * mean_length(kind.studies, finding_chance(science, sizes, node.x));
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
