#include "sim/design/several_means.h"

#include <boost/math/distributions/fisher_f.hpp>
#include <boost/math/distributions/non_central_f.hpp>
#include <boost/math/tools/toms748_solve.hpp>
#include <cmath>
#include <exception>
#include <limits>

#include "sim/base/fault.h"

namespace lacuna::several_means {

namespace {

namespace policies = boost::math::policies;
using Quiet = policies::policy<policies::overflow_error<policies::ignore_error>, policies::underflow_error<policies::ignore_error>,
                               policies::promote_double<false>>;

constexpr double infinite = std::numeric_limits<double>::infinity();

/// P(F > x).
double upper(double x, double df_effect, double df, double lambda) {
    if (lambda == 0.0) {
        return boost::math::cdf(boost::math::complement(boost::math::fisher_f_distribution<double, Quiet>(df_effect, df), x));
    }
    // Far above: the numerator lies within 12 of its standard deviations of its mean, the denominator below 12.
    const double numerator = df_effect + lambda - 12.0 * std::sqrt(2.0 * (df_effect + 2.0 * lambda));
    if (numerator > x * df_effect * (1.0 + 12.0 * std::sqrt(2.0 / df) + 100.0 / df)) return 1.0;
    try {
        return boost::math::cdf(
            boost::math::complement(boost::math::non_central_f_distribution<double, Quiet>(df_effect, df, lambda), x));
    } catch (const std::exception&) {  // its sums do not reach so far
        Fault fault;
        fault.key = "design";
        fault.message = "the F test of so many participants at so large an effect is beyond what can be computed";
        fault.remedy = "lower n, the effect, or the equivalence bound";
        throw InputError(std::move(fault));
    }
}

}  // namespace

TestPlan plan(std::uint32_t n, std::uint32_t groups) {
    const double all = static_cast<double>(n) * groups;
    return {{n, 0}, all, all - groups, std::sqrt(all), 1.0, infinite, groups - 1.0};
}

double critical(double df_effect, double df, double alpha) {
    return boost::math::quantile(
        boost::math::complement(boost::math::fisher_f_distribution<double, Quiet>(df_effect, df), alpha));
}

Tails tails(double critical, std::uint32_t groups, std::uint32_t n, double f) {
    const double all = static_cast<double>(n) * groups;
    return {upper(critical, groups - 1.0, all - groups, all * f * f), 0.0};
}

double effect_of(double statistic, double df_effect, double participants) {
    return std::sqrt(df_effect * statistic / participants);
}

double standard_error(double f, double df_effect, double df, double participants) {
    if (df <= 4.0 || f <= 0.0) return infinite;
    const double lambda = participants * f * f;
    const double sum = df_effect + lambda;
    const double ratio = df / (df_effect * (df - 2.0));
    const double variance = 2.0 * ratio * ratio * (sum * sum + (sum + lambda) * (df - 2.0)) / (df - 4.0);
    return std::sqrt(variance) * df_effect / (2.0 * participants * f);
}

double equivalence_critical(std::uint32_t groups, std::uint32_t n, double bound, double alpha) {
    const auto excess = [&](double x) { return 1.0 - alpha - tails(x, groups, n, bound).predicted; };
    double high = 1.0;
    while (excess(high) < 0.0) high *= 2.0;
    std::uintmax_t steps = 200;
    const auto ends = boost::math::tools::toms748_solve(excess, 0.0, high, boost::math::tools::eps_tolerance<double>(46), steps);
    return 0.5 * (ends.first + ends.second);
}

}  // namespace lacuna::several_means
