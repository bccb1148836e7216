#include "sim/design/correlation.h"

#include <array>
#include <boost/math/tools/toms748_solve.hpp>
#include <cmath>
#include <limits>

#include "sim/stats/chi_expectation.h"
#include "sim/stats/partitioned_t.h"
#include "sim/stats/student_t.h"

namespace lacuna::correlation {

TestPlan plan(StudySize size) {
    const double n = size.n1;
    return {size, n, n - 2.0, std::sqrt(n - 1.0), 1.0, infinity};
}

Tails tails(double critical, std::uint32_t n, double rho, int sides) {
    const double df = n - 2.0;
    const double slope = rho / std::sqrt((1.0 - rho) * (1.0 + rho));
    const double per_s = slope * std::sqrt(n - 1.0);  // noncentrality is per_s S, S = chi_{n-1} / sqrt(n - 1)
    if (per_s == 0.0) {
        const double upper = noncentral_t_upper(critical, df, 0.0);
        return {upper, sides == 2 ? noncentral_t_lower(-critical, df, 0.0) : 0.0};
    }
    const PartitionedT parts({-infinity, -critical, critical, infinity}, df);
    const std::array<double, 1> bend{per_s};
    const auto sums = chi_expectation<2>(n - 1.0, chi_pieces(n - 1.0, critical, bend), [&](double s) {
        const std::vector<TruncatedT> part = parts(per_s * s);
        return std::array<double, 2>{part[2].chance, part[0].chance};
    });
    return {sums[0], sides == 2 ? sums[1] : 0.0};
}

double r_of_t(double t, double df) { return t / std::sqrt(t * t + df); }

double standard_error(double r, std::uint32_t n) { return (1.0 - r * r) / std::sqrt(n - 1.0); }

double equivalence_critical_t(std::uint32_t n, double bound, double alpha) {
    // The alpha quantile of T at rho = bound; by symmetry the other test has its negative.
    const double df = n - 2.0;
    const auto excess = [&](double r) {
        const double t = r * std::sqrt(df / ((1.0 - r) * (1.0 + r)));
        const Tails at = tails(std::fabs(t), n, bound, 2);
        return (t >= 0.0 ? 1.0 - at.predicted : at.reversed) - alpha;
    };
    double low = -1.0 + 1e-9, high = 1.0 - 1e-9;
    std::uintmax_t steps = 100;
    const auto ends = boost::math::tools::toms748_solve(excess, low, high, boost::math::tools::eps_tolerance<double>(46), steps);
    const double r = 0.5 * (ends.first + ends.second);
    return r * std::sqrt(df / ((1.0 - r) * (1.0 + r)));
}

}  // namespace lacuna::correlation
