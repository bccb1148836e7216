// The standard normal, with both tails to full relative accuracy.
#pragma once

#include <cmath>
#include <numbers>

namespace lacuna {

inline double normal_density(double z) {
    constexpr double scale = 0.5 * std::numbers::inv_sqrtpi * std::numbers::sqrt2;  // 1 / sqrt(2 pi)
    return scale * std::exp(-0.5 * z * z);
}

/// P(Z <= z).
inline double normal_lower(double z) { return 0.5 * std::erfc(-z / std::numbers::sqrt2); }

/// P(a < Z <= b) without loss of digits where both are in one tail.
inline double normal_between(double a, double b) {
    if (!(a < b)) return 0.0;
    return a + b > 0.0 ? normal_lower(-a) - normal_lower(-b) : normal_lower(b) - normal_lower(a);
}

/// z with P(Z > z) = tail.
double normal_critical(double tail);

}  // namespace lacuna
