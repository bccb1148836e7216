#include "sim/design/looks.h"

#include <cmath>

#include "sim/base/fault.h"
#include "sim/design/design.h"
#include "sim/stats/student_t.h"

namespace lacuna {

namespace {

BoundaryKind kind_of(Looks::Boundary boundary) {
    switch (boundary) {
        case Looks::Boundary::pocock:
            return BoundaryKind::pocock;
        case Looks::Boundary::obrien_fleming:
            return BoundaryKind::obrien_fleming;
        case Looks::Boundary::spending_pocock:
            return BoundaryKind::spending_pocock;
        case Looks::Boundary::spending_obrien_fleming:
            return BoundaryKind::spending_obrien_fleming;
    }
    throw Defect("kind_of: unknown boundary");
}

Design without_looks(Design design) {
    design.looks = Looks{};
    return design;
}

}  // namespace

LookPlans::LookPlans(const Design& design)
    : design_(without_looks(design)),
      looks_(design.looks),
      information_(equal_steps(design.looks.count)),
      bound_(look_bounds({kind_of(design.looks.boundary), information_, design.alpha, design.sides})) {}

TestPlan LookPlans::plan(std::uint32_t n, std::uint32_t look) const {
    const double share = information_[look];
    TestPlan plan = describe(design_, static_cast<std::uint32_t>(std::floor(n * share + 0.5)));
    plan.critical = t_critical(plan.df, nominal_level(bound_[look], 1));
    return plan;
}

double LookPlans::futility(std::uint32_t look, double df) const {
    if (look + 1 == information_.size() || looks_.futility == -infinity) return -infinity;
    return t_critical(df, nominal_level(std::fmin(looks_.futility, bound_[look]), 1));
}

Tails LookPlans::tails(std::uint32_t n, double drift) const {
    std::vector<double> information;
    for (const double share : information_) information.push_back(std::floor(n * share + 0.5) / n);
    const Crossing its = crossing(information, bound_, design_.sides, drift, looks_.futility);
    return {its.predicted, its.reversed};
}

}  // namespace lacuna
