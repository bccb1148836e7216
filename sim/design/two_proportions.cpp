#include "sim/design/two_proportions.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <vector>

#include "sim/stats/distribution.h"
#include "sim/variate/binomial.h"

namespace lacuna::two_proportions {

namespace {

constexpr std::uint32_t largest = 10'000'000;

/// The outcomes of a binomial that matter, with their chances.
struct Outcomes {
    std::uint32_t first = 0;
    std::vector<double> chance;
};

Outcomes outcomes(std::uint32_t n, double p) {
    const double sd = std::sqrt(n * p * (1.0 - p));
    const double low = std::floor(n * p - 9.5 * sd - 40.0), high = std::ceil(n * p + 9.5 * sd + 40.0);
    Outcomes all{static_cast<std::uint32_t>(std::fmax(0.0, low)), {}};
    const auto last = static_cast<std::uint32_t>(std::fmin(n, high));
    all.chance.resize(last - all.first + 1);
    const auto mode = std::clamp(static_cast<std::uint32_t>((n + 1.0) * p), all.first, last);
    const double odds = p / (1.0 - p);
    all.chance[mode - all.first] = binomial_chance(n, p, mode);
    for (std::uint32_t x = mode; x < last; ++x)
        all.chance[x + 1 - all.first] = all.chance[x - all.first] * (odds * (n - x) / (x + 1.0));
    for (std::uint32_t x = mode; x > all.first; --x)
        all.chance[x - 1 - all.first] = all.chance[x - all.first] * (x / (odds * (n - x + 1.0)));
    return all;
}

/// Power by the normal approximation with unpooled variance (Fleiss, Levin & Paik 2003, eq. 4.14 without its
/// correction; from memory): only to know where to begin.
double rough_power(double n1, double n2, double p1, double p2, double critical) {
    const double pooled = (n1 * p1 + n2 * p2) / (n1 + n2);
    const double null_sd = std::sqrt(pooled * (1.0 - pooled) * (1.0 / n1 + 1.0 / n2));
    const double sd = std::sqrt(p1 * (1.0 - p1) / n1 + p2 * (1.0 - p2) / n2);
    return 0.5 * std::erfc((critical * null_sd - std::fabs(p1 - p2)) / (sd * std::sqrt(2.0)));
}

}  // namespace

TestPlan plan(StudySize size, double base_rate) {
    const double n1 = size.n1, n2 = size.n2;
    return {size, n1 + n2, infinity, std::sqrt(base_rate * (1.0 - base_rate) * n1 * n2 / (n1 + n2)), 1.0, infinity};
}

double rate(double base_rate, double effect) {
    return 1.0 / (1.0 + (1.0 - base_rate) / base_rate * std::exp(-effect));
}

double statistic(std::uint32_t x1, std::uint32_t n1, std::uint32_t x2, std::uint32_t n2) {
    const double a = x1, b = x2, m = n1, n = n2;
    const double together = a + b, all = m + n;
    if (together == 0.0 || together == all) return 0.0;
    return (a * n - b * m) * std::sqrt(all / (m * n * together * (all - together)));
}

LogOddsRatio log_odds_ratio(std::uint32_t x1, std::uint32_t n1, std::uint32_t x2, std::uint32_t n2) {
    const bool corrected = x1 == 0 || x2 == 0 || x1 == n1 || x2 == n2;
    const double add = corrected ? 0.5 : 0.0;
    const double a = x1 + add, b = n1 - x1 + add, c = x2 + add, d = n2 - x2 + add;
    return {std::log(a * d / (b * c)), std::sqrt(1.0 / a + 1.0 / b + 1.0 / c + 1.0 / d), corrected};
}

Tails tails(double critical, std::uint32_t n1, std::uint32_t n2, double base_rate, double effect, int sides) {
    const Outcomes treated = outcomes(n1, rate(base_rate, effect));
    const Outcomes control = outcomes(n2, base_rate);
    // z falls in x2 and rises in x1, so the regions' ends in x2 only ever move up.
    std::vector<double> below(control.chance.size() + 1, 0.0);  // chances of x2 before each outcome
    for (std::size_t i = 0; i < control.chance.size(); ++i) below[i + 1] = below[i] + control.chance[i];
    std::vector<double> from(control.chance.size() + 1, 0.0);  // and from each on
    for (std::size_t i = control.chance.size(); i-- > 0;) from[i] = from[i + 1] + control.chance[i];
    Tails sum{0.0, 0.0};
    std::size_t up = 0, down = 0;  // first x2 with z <= critical; first with z < -critical
    for (std::size_t i = 0; i < treated.chance.size(); ++i) {
        const auto x1 = treated.first + static_cast<std::uint32_t>(i);
        const auto z = [&](std::size_t j) { return statistic(x1, n1, control.first + static_cast<std::uint32_t>(j), n2); };
        while (up < control.chance.size() && z(up) > critical) ++up;
        while (down < control.chance.size() && !(z(down) < -critical)) ++down;
        sum.predicted += treated.chance[i] * below[up];
        if (sides == 2) sum.reversed += treated.chance[i] * from[down];
    }
    return sum;
}

std::uint32_t other_size(std::uint32_t n, double allocation) {
    return static_cast<std::uint32_t>(std::clamp(std::floor(allocation * n + 0.5), double(smallest_n), double(largest)));
}

std::uint32_t planned_n(double base_rate, double effect, double power, double critical, int sides, double allocation) {
    if (effect == 0.0 || (sides == 1 && effect < 0.0)) return 0;
    const double p1 = rate(base_rate, effect);
    const auto rough = [&](std::uint32_t n) { return rough_power(n, other_size(n, allocation), p1, base_rate, critical); };
    const auto falls_short = [&](std::uint32_t n) {
        const double spread = n * std::fmin(p1 * (1.0 - p1), base_rate * (1.0 - base_rate));
        return rough(n) < power - std::fmin(0.25, 0.8 / std::sqrt(spread) + 4.0 / spread);
    };
    std::uint32_t low = smallest_n, high = smallest_n;
    while (high < largest && falls_short(high)) {
        low = high;
        high = std::min(largest, 2 * high);
    }
    while (high - low > 1) {
        const std::uint32_t middle = low + (high - low) / 2;
        (falls_short(middle) ? low : high) = middle;
    }
    for (std::uint32_t n = low; n <= largest; ++n) {
        const Tails its = tails(critical, n, other_size(n, allocation), base_rate, effect, sides);
        if (its.predicted + its.reversed >= power) return n;
        if (n == largest) break;
    }
    return 0;
}

double estimate_at(double z, std::uint32_t n1, std::uint32_t n2, double base_rate) {
    // The treated's rate p with (p - b) = z sqrt(q (1 - q) (1 / n1 + 1 / n2)), q the rate of both: by bisection.
    const double n = n1, m = n2;
    const auto excess = [&](double p) {
        const double q = (n * p + m * base_rate) / (n + m);
        return (p - base_rate) - z * std::sqrt(q * (1.0 - q) * (1.0 / n + 1.0 / m));
    };
    double low = z > 0.0 ? base_rate : 0.0, high = z > 0.0 ? 1.0 : base_rate;
    if (excess(high) < 0.0) return std::numeric_limits<double>::infinity();
    if (excess(low) > 0.0) return -std::numeric_limits<double>::infinity();
    for (int step = 0; step < 100; ++step) (excess(0.5 * (low + high)) < 0.0 ? low : high) = 0.5 * (low + high);
    const double p = 0.5 * (low + high);
    return std::log(p / (1.0 - p)) - std::log(base_rate / (1.0 - base_rate));
}

double standard_error_at(double estimate, std::uint32_t n1, std::uint32_t n2, double base_rate) {
    const double p = rate(base_rate, estimate);
    return std::sqrt(1.0 / (n1 * p * (1.0 - p)) + 1.0 / (n2 * base_rate * (1.0 - base_rate)));
}

}  // namespace lacuna::two_proportions
