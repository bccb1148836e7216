// The slow, plain twins of sim/tail: one value at a time in long double, by the continued fraction of the
// incomplete beta function, which shares nothing with the kernels.
#pragma once

#include <boost/math/special_functions/gamma.hpp>
#include <cmath>
#include <cstdint>

namespace lacuna::oracle {

/// 1 / (1 + c1 / (1 + c2 / (1 + ...))) of DLMF 8.17.22, by Lentz's method as Thompson & Barnett (1986,
/// "Coulomb and Bessel functions of complex arguments and order", J. Comput. Phys. 64) modified it.
inline long double beta_fraction(long double a, long double b, long double x) {
    long double denominator = 1.0L, c = 1.0L, d = 0.0L;
    for (int n = 1; n < 1000000; ++n) {
        const auto m = static_cast<long double>(n / 2);
        const long double coefficient = n % 2 == 0 ? m * (b - m) * x / ((a + 2 * m - 1) * (a + 2 * m))
                                                   : -(a + m) * (a + b + m) * x / ((a + 2 * m) * (a + 2 * m + 1));
        d = 1.0L / (1.0L + coefficient * d);
        c = 1.0L + coefficient / c;
        denominator *= c * d;
        if (std::fabs(c * d - 1.0L) < 1e-19L) break;
    }
    return 1.0L / denominator;
}

/// I_x(a, b) at x = 1 / (1 + odds), for b up to 1000.
inline long double incomplete_beta(long double a, long double b, long double odds) {
    const long double x = 1.0L / (1.0L + odds), y = odds / (1.0L + odds);
    const bool near = x < (a + 1.0L) / (a + b + 2.0L);
    // Gamma(a + b) / (Gamma(a) Gamma(b)); the ratio without the cancellation of two large logarithms.
    const long double log_front =
        -a * std::log1p(odds) + b * std::log(y) - std::log(boost::math::tgamma_delta_ratio(a, b)) - std::lgamma(b);
    const long double front = std::exp(log_front);
    return near ? front * beta_fraction(a, b, x) / a : 1.0L - front * beta_fraction(b, a, y) / b;
}

inline long double normal_upper(double z) { return 0.5L * std::erfc(z / std::sqrt(2.0L)); }

inline long double t_upper(double t, double df) {
    if (std::isinf(df)) return normal_upper(t);
    if (t == 0.0) return 0.5L;
    const long double size = std::fabs(static_cast<long double>(t));
    const long double p = 0.5L * incomplete_beta(df / 2.0L, 0.5L, size * size / df);
    return t < 0.0 ? 1.0L - p : p;
}

inline long double f_upper(double f, std::uint32_t df1, double df2) {
    return incomplete_beta(df2 / 2.0L, df1 / 2.0L, df1 * static_cast<long double>(f) / df2);
}

}  // namespace lacuna::oracle
