// Expectations over how two independent sums of squares share their total: what is left of a design's
// exact power once the total is integrated out. The share is written as an angle, in which its density
// has no singular ends: X / (X + Y) = cos^2(angle), X and Y chi-squared, and independent of X + Y (Johnson,
// Kotz & Balakrishnan 1995, Continuous Univariate Distributions 2, ch. 25).
#pragma once

#include <functional>
#include <optional>
#include <span>

namespace lacuna {

/// values[i] = f(angles[i]); called with up to 31 angles at a time.
using AngleFunction = std::function<void(std::span<const double> angles, std::span<double> values)>;

/// E[f(angle)], angle in [0, pi/2] with density proportional to cos^(df_cosine - 1) sin^(df_sine - 1).
/// f is between 0 and 1 and smooth, except that it may start as a square root below the angle `root` and
/// jump there. Adaptive Gauss-Kronrod (15 and 31 points), absolute error below 1e-11. Both df 1 or more.
double share_expectation(double df_cosine, double df_sine, const AngleFunction& f,
                         std::optional<double> root = std::nullopt);

}  // namespace lacuna
