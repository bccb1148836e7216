#include "sim/design/design.h"

#include <cmath>

#include "sim/base/fault.h"
#include "sim/design/known_variance.h"
#include "sim/design/two_means.h"
#include "sim/stats/student_t.h"

namespace lacuna {

std::uint32_t smallest_n(Test test) {
    switch (test) {
        case Test::two_means:
            return two_means::smallest_n;
        case Test::known_variance:
            return known_variance::smallest_n;
    }
    throw Defect("smallest_n: unknown design");
}

double critical_value(Test test, double df, double alpha, int sides) {
    const double tail = sides == 2 ? 0.5 * alpha : alpha;
    switch (test) {
        case Test::two_means:
            return t_critical(df, tail);
        case Test::known_variance:
            return t_critical(infinity, tail);
    }
    throw Defect("critical_value: unknown design");
}

TestPlan describe(const Design& design, std::uint32_t n) {
    const auto with_critical = [&](TestPlan plan) {
        plan.critical = critical_value(design.test, plan.df, design.alpha, design.sides);
        return plan;
    };
    switch (design.test) {
        case Test::two_means:
            return with_critical(two_means::plan({n, n}));
        case Test::known_variance:
            return with_critical(known_variance::plan({n, 0}));
    }
    throw Defect("describe: unknown design");
}

double power_predicted(const Design&, const TestPlan& plan, double effect) {
    return noncentral_t_upper(plan.critical, plan.df, effect * plan.noncentrality);
}

double power(const Design& design, const TestPlan& plan, double effect) {
    const double predicted = power_predicted(design, plan, effect);
    if (design.sides == 1) return predicted;
    return predicted + noncentral_t_lower(-plan.critical, plan.df, effect * plan.noncentrality);
}

double reported_estimate(const Design& design, const TestPlan& plan, double statistic) {
    const double uncorrected = statistic / plan.noncentrality;
    return design.estimate == EffectEstimate::g ? plan.correction * uncorrected : uncorrected;
}

double reported_standard_error(const Design& design, const TestPlan& plan, double statistic) {
    switch (design.test) {
        case Test::two_means: {
            const double of_d = two_means::standard_error(plan.size, statistic / plan.noncentrality);
            return design.estimate == EffectEstimate::g ? plan.correction * of_d : of_d;
        }
        case Test::known_variance:
            return known_variance::standard_error(plan.size);
    }
    throw Defect("reported_standard_error: unknown design");
}

double minimal_significant_effect(const Design& design, const TestPlan& plan) {
    return reported_estimate(design, plan, plan.critical);
}

}  // namespace lacuna
