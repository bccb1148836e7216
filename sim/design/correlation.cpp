#include "sim/design/correlation.h"

#include <array>
#include <cmath>
#include <span>

#include "sim/design/level_search.h"
#include "sim/design/share_expectation.h"
#include "sim/stats/distribution.h"
#include "sim/tail/tails.h"

namespace lacuna::correlation {

TestPlan plan(StudySize size) {
    const double n = size.n1;
    return {size, n, n - 2.0, std::sqrt(n - 1.0), 1.0, infinity};
}

// T = (theta X + Z) / (Y / sqrt(n - 2)), theta = rho / sqrt(1 - rho^2), X and Y independent chi of n - 1 and
// n - 2 degrees of freedom. With X = R cos(a), Y = R sin(a), T > t where Z / R > t' sin(a) - theta cos(a),
// t' = t / sqrt(n - 2); R, chi of 2n - 3 degrees of freedom, is independent of a, so that Z / R is a central t
// over sqrt(2n - 3).
double upper(double t, std::uint32_t n, double rho) {
    const double theta = rho / std::sqrt((1.0 - rho) * (1.0 + rho));
    const double slope = t / std::sqrt(n - 2.0);
    const double df = 2.0 * n - 3.0, root = std::sqrt(df);
    return share_expectation(n - 1.0, n - 2.0, [&](std::span<const double> angles, std::span<double> values) {
        std::array<double, 31> dfs;
        dfs.fill(df);
        for (std::size_t i = 0; i < angles.size(); ++i)
            values[i] = root * (slope * std::sin(angles[i]) - theta * std::cos(angles[i]));
        t_upper_tails(values.data(), dfs.data(), angles.size(), values.data());
    });
}

Tails tails(double critical, std::uint32_t n, double rho, int sides) {
    return {upper(critical, n, rho), sides == 2 ? upper(critical, n, -rho) : 0.0};
}

double r_of_t(double t, double df) { return t / std::sqrt(t * t + df); }

double standard_error(double r, std::uint32_t n) { return (1.0 - r * r) / std::sqrt(n - 1.0); }

double equivalence_critical_t(std::uint32_t n, double bound, double alpha) {
    // The alpha quantile of T at rho = bound; by symmetry the other test has its negative.
    const double centre = bound * std::sqrt((n - 2.0) / ((1.0 - bound) * (1.0 + bound)));
    return level_search([&](double t) { return upper(-t, n, -bound); }, alpha, centre, 1.0);
}

}  // namespace lacuna::correlation
