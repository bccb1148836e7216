// Where an increasing function reaches a level: quantiles of a distribution known by its P(X <= x).
#pragma once

#include <boost/math/tools/toms748_solve.hpp>
#include <cmath>
#include <cstdint>

namespace lacuna {

/// x with f(x) = level for a continuous f that increases on the real line (or is constant below some x)
/// and passes the level, by bracketing from `start` in growing steps, then TOMS 748 (Alefeld, Potra & Shi
/// 1995), to 15 digits of x or the digits that f has. step > 0.
template <class Function>
double level_search(Function f, double level, double start, double step) {
    const auto excess = [&](double x) { return f(x) - level; };
    double low = start, high = start;
    double at_low = excess(low), at_high = at_low;
    for (; at_low > 0.0; step *= 2.0) at_low = excess(low -= step);
    for (; at_high < 0.0; step *= 2.0) at_high = excess(high += step);
    if (at_low == 0.0) return low;
    if (at_high == 0.0) return high;
    std::uintmax_t most = 100;
    const auto close = [](double a, double b) { return std::fabs(b - a) <= 1e-15 * (std::fabs(a) + std::fabs(b)); };
    const auto [a, b] = boost::math::tools::toms748_solve(excess, low, high, at_low, at_high, close, most);
    return 0.5 * (a + b);
}

}  // namespace lacuna
