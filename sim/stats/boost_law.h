// From a Distribution to the Boost.Math distribution of its family.
#pragma once

#include <boost/math/distributions/beta.hpp>
#include <boost/math/distributions/gamma.hpp>
#include <boost/math/distributions/lognormal.hpp>
#include <boost/math/distributions/normal.hpp>
#include <boost/math/distributions/poisson.hpp>
#include <boost/math/distributions/uniform.hpp>

#include "sim/base/fault.h"
#include "sim/stats/distribution.h"

namespace lacuna {

// Quantiles at 0 and 1 are infinite rather than errors; those of integers are rounded up, so that they
// are the smallest x with P(X <= x) >= p.
using QuietPolicy = boost::math::policies::policy<
    boost::math::policies::overflow_error<boost::math::policies::ignore_error>,
    boost::math::policies::underflow_error<boost::math::policies::ignore_error>,
    boost::math::policies::denorm_error<boost::math::policies::ignore_error>,
    boost::math::policies::discrete_quantile<boost::math::policies::integer_round_up>>;

/// Calls `use` with the Boost distribution of a family that has one (not fixed, half-normal, discrete).
template <class Use>
double with_boost_law(const Distribution& d, Use use) {
    namespace bm = boost::math;
    switch (d.family) {
        case Family::normal:
            return use(bm::normal_distribution<double, QuietPolicy>(d.first, d.second));
        case Family::lognormal:
            return use(bm::lognormal_distribution<double, QuietPolicy>(std::log(d.first), d.second));
        case Family::gamma:
            return use(bm::gamma_distribution<double, QuietPolicy>(d.second, d.first / d.second));
        case Family::beta:
            return use(bm::beta_distribution<double, QuietPolicy>(d.first * d.second, (1.0 - d.first) * d.second));
        case Family::uniform:
            return use(bm::uniform_distribution<double, QuietPolicy>(d.first, d.second));
        case Family::poisson:
            return use(bm::poisson_distribution<double, QuietPolicy>(d.first));
        case Family::fixed:
        case Family::half_normal:
        case Family::discrete:
            break;
    }
    throw Defect("with_boost_law: this family is computed directly");
}

/// The smallest and largest value of a family with a Boost law, or of the half-normal.
inline double support_low(const Distribution& d) {
    if (d.family == Family::normal) return -infinity;
    return d.family == Family::uniform ? d.first : 0.0;
}
inline double support_high(const Distribution& d) {
    if (d.family == Family::uniform) return d.second;
    return d.family == Family::beta ? 1.0 : infinity;
}

}  // namespace lacuna
