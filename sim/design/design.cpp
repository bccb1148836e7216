#include "sim/design/design.h"

#include <cmath>

#include "sim/base/fault.h"
#include "sim/design/correlation.h"
#include "sim/design/known_variance.h"
#include "sim/design/looks.h"
#include "sim/design/one_mean.h"
#include "sim/design/several_means.h"
#include "sim/design/two_means.h"
#include "sim/design/two_proportions.h"
#include "sim/design/welch.h"
#include "sim/stats/student_t.h"

namespace lacuna {

namespace {

/// Sizes of both groups: n2 / n1 next to the allocation, but never below what a group needs.
StudySize two_groups(const Design& design, std::uint32_t n, std::uint32_t least) {
    const double other = std::floor(design.allocation * n + 0.5);
    return {n, static_cast<std::uint32_t>(std::fmin(std::fmax(other, least), largest_n))};
}

Tails t_tails(const Design& design, const TestPlan& plan, double effect) {
    const double noncentrality = effect * plan.noncentrality;
    return {noncentral_t_upper(plan.critical, plan.df, noncentrality),
            design.sides == 2 ? noncentral_t_lower(-plan.critical, plan.df, noncentrality) : 0.0};
}

TestPlan without_critical(const Design& design, std::uint32_t n) {
    switch (design.test) {
        case Test::two_means:
            return two_means::plan(two_groups(design, n, smallest_n(design)));
        case Test::paired_means:
        case Test::one_mean:
            return one_mean::plan({n, 0});
        case Test::known_variance:
            return known_variance::plan({n, 0});
        case Test::correlation:
            return correlation::plan({n, 0});
        case Test::two_proportions:
            return two_proportions::plan(two_groups(design, n, smallest_n(design)), design.base_rate);
        case Test::several_means:
            return several_means::plan(n, design.groups);
    }
    throw Defect("describe: unknown design");
}

}  // namespace

std::uint32_t smallest_n(const Design& design) {
    return design.looks.count * smallest_at_a_look(design);
}

std::uint32_t smallest_at_a_look(const Design& design) {
    switch (design.test) {
        case Test::two_means:
            return design.welch ? welch::smallest_n : two_means::smallest_n;
        case Test::paired_means:
        case Test::one_mean:
            return one_mean::smallest_n;
        case Test::known_variance:
            return known_variance::smallest_n;
        case Test::correlation:
            return correlation::smallest_n;
        case Test::two_proportions:
            return two_proportions::smallest_n;
        case Test::several_means:
            return several_means::smallest_n;
    }
    throw Defect("smallest_n: unknown design");
}

double critical_value(const Design& design, const TestPlan& plan, double alpha, int sides) {
    if (design.test == Test::several_means) return several_means::critical(plan.df_effect, plan.df, alpha);
    return t_critical(plan.df, sides == 2 ? 0.5 * alpha : alpha);
}

TestPlan describe(const Design& design, std::uint32_t n) {
    if (design.looks.count > 1) return LookPlans(design).plan(n, design.looks.count - 1);
    TestPlan plan = without_critical(design, n);
    plan.critical = critical_value(design, plan, design.alpha, design.sides);
    return plan;
}

Tails tails(const Design& design, const TestPlan& plan, double effect) {
    const StudySize size = plan.size;
    if (design.looks.count > 1) return LookPlans(design).tails(size.n1, effect * plan.noncentrality);
    switch (design.test) {
        case Test::two_means:
            if (design.welch) return welch::tails(design.alpha, design.sides, size.n1, size.n2, effect);
            return t_tails(design, plan, effect);
        case Test::paired_means:
        case Test::one_mean:
        case Test::known_variance:
            return t_tails(design, plan, effect);
        case Test::correlation:
            return correlation::tails(plan.critical, size.n1, effect, design.sides);
        case Test::two_proportions:
            return two_proportions::tails(plan.critical, size.n1, size.n2, design.base_rate, effect, design.sides);
        case Test::several_means:
            return several_means::tails(plan.critical, design.groups, size.n1, effect);
    }
    throw Defect("tails: unknown design");
}

double power_predicted(const Design& design, const TestPlan& plan, double effect) {
    return tails(design, plan, effect).predicted;
}

double power(const Design& design, const TestPlan& plan, double effect) {
    const Tails its = tails(design, plan, effect);
    return its.predicted + its.reversed;
}

double reported_estimate(const Design& design, const TestPlan& plan, double statistic) {
    switch (design.test) {
        case Test::two_means:
        case Test::paired_means:
        case Test::one_mean:
        case Test::known_variance: {
            const double uncorrected = statistic / plan.noncentrality;
            return design.estimate == EffectEstimate::g ? plan.correction * uncorrected : uncorrected;
        }
        case Test::correlation:
            return correlation::r_of_t(statistic, plan.df);
        case Test::two_proportions:
            return two_proportions::estimate_at(statistic, plan.size.n1, plan.size.n2, design.base_rate);
        case Test::several_means:
            return several_means::effect_of(statistic, plan.df_effect, plan.participants);
    }
    throw Defect("reported_estimate: unknown design");
}

double reported_standard_error(const Design& design, const TestPlan& plan, double estimate) {
    const bool corrected = design.estimate == EffectEstimate::g;
    const double d = corrected ? estimate / plan.correction : estimate;
    const double factor = corrected ? plan.correction : 1.0;
    switch (design.test) {
        case Test::two_means:
            return factor * two_means::standard_error(plan, d);
        case Test::paired_means:
        case Test::one_mean:
            return factor * one_mean::standard_error(plan, d);
        case Test::known_variance:
            return known_variance::standard_error(plan);
        case Test::correlation:
            return correlation::standard_error(estimate, plan.size.n1);
        case Test::two_proportions:
            return two_proportions::standard_error_at(estimate, plan.size.n1, plan.size.n2, design.base_rate);
        case Test::several_means:
            return several_means::standard_error(estimate, plan.df_effect, plan.df, plan.participants);
    }
    throw Defect("reported_standard_error: unknown design");
}

double corrected_estimate(const Design& design, const TestPlan& plan, double estimate) {
    return design.estimate == EffectEstimate::g ? estimate : plan.correction * estimate;
}

double equivalence_critical(const Design& design, const TestPlan& plan) {
    const Equivalence& equivalence = design.equivalence;
    if (design.test == Test::correlation) {
        return correlation::equivalence_critical_t(plan.size.n1, equivalence.bound, equivalence.alpha);
    }
    if (design.test == Test::several_means) {
        return several_means::equivalence_critical(design.groups, plan.size.n1, equivalence.bound, equivalence.alpha);
    }
    return t_critical(plan.df, equivalence.alpha);
}

double minimal_significant_effect(const Design& design, const TestPlan& plan) {
    return reported_estimate(design, plan, plan.critical);
}

}  // namespace lacuna
