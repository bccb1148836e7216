#include "sim/sequential/boundaries.h"

#include <algorithm>
#include <boost/math/special_functions/erf.hpp>
#include <boost/math/tools/toms748_solve.hpp>
#include <cmath>

#include "sim/base/fault.h"
#include "sim/sequential/score_density.h"

namespace lacuna {

namespace {

double normal_upper(double z) { return 0.5 * std::erfc(z * M_SQRT1_2); }
double normal_upper_quantile(double chance) { return M_SQRT2 * boost::math::erfc_inv(2.0 * chance); }

template <class F>
double root(F f, double low, double high) {
    std::uintmax_t steps = 200;
    const auto ends =
        boost::math::tools::toms748_solve(f, low, high, boost::math::tools::eps_tolerance<double>(48), steps);
    return 0.5 * (ends.first + ends.second);
}

void check(const LookSchedule& schedule) {
    Fault fault;
    fault.key = "looks";
    if (!(schedule.alpha > 0.0 && schedule.alpha < 1.0)) {
        fault.message = "alpha must be above 0 and below 1";
        fault.remedy = "give a significance level such as 0.05";
        throw InputError(std::move(fault));
    }
    double last = 0.0;
    for (const double t : schedule.information) {
        if (!(t > last)) last = 2.0;
        last = std::fmax(last, t);
    }
    if (last == 1.0) return;
    fault.message = "shares of information must ascend and end at 1";
    fault.remedy = "give for example 0.5, 1";
    throw InputError(std::move(fault));
}

/// What each side may have spent by information t.
double spent(const LookSchedule& schedule, double t) {
    const double level = schedule.alpha / schedule.sides;
    if (schedule.kind == BoundaryKind::spending_pocock) return level * std::log1p((M_E - 1.0) * t);
    return 2.0 * normal_upper(normal_upper_quantile(0.5 * level) / std::sqrt(t));
}

/// Look by look: the bound that spends what is new.
std::vector<double> spending_bounds(const LookSchedule& schedule) {
    std::vector<double> bounds;
    ScoreDensity density;
    double before = 0.0;
    for (const double t : schedule.information) {
        const double now = spent(schedule, t);
        const double a_side = now - before;
        const auto excess = [&](double c) { return density.above(t, c * std::sqrt(t), 0.0) - a_side; };
        // Nothing representable to spend: no bound that can be reached.
        bounds.push_back(a_side < 1e-300 || excess(37.0) > 0.0 ? 37.0 : root(excess, -10.0, 37.0));
        density.advance(t, schedule.sides == 2 ? -bounds.back() * std::sqrt(t) : -infinite_score, bounds.back() * std::sqrt(t), 0.0);
        before = now;
    }
    return bounds;
}

std::vector<double> shaped_bounds(const LookSchedule& schedule, double constant) {
    std::vector<double> bounds;
    for (const double t : schedule.information) {
        bounds.push_back(schedule.kind == BoundaryKind::obrien_fleming ? constant / std::sqrt(t) : constant);
    }
    return bounds;
}

}  // namespace

std::vector<double> equal_steps(std::size_t looks) {
    std::vector<double> information;
    for (std::size_t k = 1; k <= looks; ++k) information.push_back(static_cast<double>(k) / static_cast<double>(looks));
    return information;
}

double nominal_level(double bound, int sides) { return sides * normal_upper(bound); }

std::vector<double> look_bounds(const LookSchedule& schedule) {
    check(schedule);
    const double fixed = normal_upper_quantile(schedule.alpha / schedule.sides);
    switch (schedule.kind) {
        case BoundaryKind::constant_level:
            return std::vector<double>(schedule.information.size(), fixed);
        case BoundaryKind::pocock:
        case BoundaryKind::obrien_fleming: {
            if (schedule.information.size() == 1) return {fixed};
            const auto excess = [&](double constant) {
                const Crossing its = crossing(schedule.information, shaped_bounds(schedule, constant), schedule.sides, 0.0);
                return its.predicted + its.reversed - schedule.alpha;
            };
            const double looks = static_cast<double>(schedule.information.size());
            const double highest = normal_upper_quantile(schedule.alpha / schedule.sides / looks) + 0.5;  // Bonferroni's
            return shaped_bounds(schedule, root(excess, fixed - 0.5, highest));
        }
        case BoundaryKind::spending_pocock:
        case BoundaryKind::spending_obrien_fleming:
            return spending_bounds(schedule);
    }
    throw Defect("look_bounds: unknown kind");
}

Crossing crossing(const std::vector<double>& information, const std::vector<double>& bounds, int sides, double drift,
                  double futility) {
    Crossing its;
    ScoreDensity density;
    for (std::size_t k = 0; k < information.size(); ++k) {
        const double t = information[k], root_t = std::sqrt(t), bound = bounds[k] * root_t;
        const bool last = k + 1 == information.size();
        its.above.push_back(density.above(t, bound, drift));
        its.below.push_back(sides == 2 ? density.below(t, -bound, drift) : 0.0);
        double futile = 0.0;
        const double inner = std::fmin(futility, bounds[k]) * root_t;
        const double low = sides == 2 ? -bound : -infinite_score;
        if (!last && sides == 1 && futility > -infinite_score) {
            futile = density.below(t, inner, drift);
            density.advance(t, inner, bound, drift);
        } else if (!last && sides == 2 && futility > 0.0) {
            futile = density.below(t, inner, drift) - density.below(t, -inner, drift);
            density.advance_around(t, low, -inner, inner, bound, drift);
        } else if (!last) {
            density.advance(t, low, bound, drift);
        }
        its.futile.push_back(futile);
        its.predicted += its.above.back();
        its.reversed += its.below.back();
    }
    double stopped = 0.0;
    for (std::size_t k = 0; k + 1 < information.size(); ++k) {
        const double here = its.above[k] + its.below[k] + its.futile[k];
        its.information += here * information[k];
        stopped += here;
    }
    its.information += (1.0 - stopped) * information.back();
    return its;
}

double drift_of_power(const std::vector<double>& information, const std::vector<double>& bounds, int sides,
                      double power) {
    const auto excess = [&](double drift) {
        const Crossing its = crossing(information, bounds, sides, drift);
        return its.predicted + its.reversed - power;
    };
    double high = 1.0;
    while (excess(high) < 0.0) high *= 2.0;
    return root(excess, 0.0, high);
}

}  // namespace lacuna
