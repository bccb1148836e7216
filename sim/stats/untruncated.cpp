#include "sim/stats/untruncated.h"

#include <algorithm>
#include <boost/math/special_functions/erf.hpp>
#include <numbers>

#include "sim/stats/boost_law.h"

namespace lacuna::untruncated {

namespace {

bool is_listed(const Distribution& d) { return d.family == Family::fixed || d.family == Family::discrete; }

/// Share of the weights of a listed distribution whose values satisfy `holds`.
template <class Holds>
double share(const Distribution& d, Holds holds) {
    if (d.family == Family::fixed) return holds(d.first) ? 1.0 : 0.0;
    double inside = 0.0, all = 0.0;
    for (std::size_t i = 0; i < d.values.size(); ++i) {
        all += d.weights[i];
        if (holds(d.values[i])) inside += d.weights[i];
    }
    return inside / all;
}

/// Smallest listed value whose cumulative share is p or more (a relative 1e-14 forgives the rounding of
/// sums of decimal weights).
double listed_quantile(const Distribution& d, double p) {
    if (d.family == Family::fixed) return d.first;
    std::vector<double> values;
    for (std::size_t i = 0; i < d.values.size(); ++i) {
        if (d.weights[i] > 0.0) values.push_back(d.values[i]);
    }
    std::sort(values.begin(), values.end());
    for (const double x : values) {
        if (lower(d, x) >= p * (1.0 - 1e-14)) return x;
    }
    return values.back();
}

}  // namespace

bool has_atoms(Family family) {
    return family == Family::fixed || family == Family::poisson || family == Family::discrete;
}

Distribution without_degeneracy(const Distribution& distribution) {
    Distribution d = distribution;
    const auto becomes = [&](double value) {
        d.family = Family::fixed;
        d.first = value;
    };
    switch (d.family) {
        case Family::normal:
        case Family::lognormal:
            if (d.second == 0.0) becomes(d.first);
            break;
        case Family::half_normal:
        case Family::gamma:
        case Family::poisson:
            if (d.first == 0.0) becomes(0.0);
            break;
        case Family::beta:
            if (d.first == 0.0 || d.first == 1.0) becomes(d.first);
            break;
        case Family::uniform:
            if (d.first == d.second) becomes(d.first);
            break;
        case Family::fixed:
        case Family::discrete:
            break;
    }
    return d;
}

double lower(const Distribution& d, double x) {
    if (d.family == Family::poisson) x = std::floor(x);  // Boost interpolates between integers
    if (is_listed(d)) return share(d, [x](double value) { return value <= x; });
    if (x < support_low(d)) return 0.0;
    if (x >= support_high(d)) return 1.0;
    if (d.family == Family::half_normal) return std::erf(x / (d.first * std::numbers::sqrt2));
    return with_boost_law(d, [x](const auto& law) { return boost::math::cdf(law, x); });
}

double below(const Distribution& d, double x) {
    if (is_listed(d)) return share(d, [x](double value) { return value < x; });
    if (d.family != Family::poisson) return lower(d, x);
    return lower(d, std::ceil(x) - 1.0);
}

double upper(const Distribution& d, double x) {
    if (d.family == Family::poisson) x = std::floor(x);
    if (is_listed(d)) return share(d, [x](double value) { return value > x; });
    if (x < support_low(d)) return 1.0;
    if (x >= support_high(d)) return 0.0;
    if (d.family == Family::half_normal) return std::erfc(x / (d.first * std::numbers::sqrt2));
    return with_boost_law(d, [x](const auto& law) { return boost::math::cdf(boost::math::complement(law, x)); });
}

double mass_between(const Distribution& d, double a, double b) {
    if (!(a <= b)) return 0.0;
    if (is_listed(d)) return share(d, [a, b](double value) { return value >= a && value <= b; });
    const double before = below(d, a);
    if (before > 0.5) {
        const double from = d.family == Family::poisson ? std::ceil(a) - 1.0 : a;
        return std::max(0.0, upper(d, from) - upper(d, b));
    }
    const double through = lower(d, b);
    return std::max(0.0, through < 0.5 ? through - before : 1.0 - upper(d, b) - before);
}

namespace {

/// x at which a tail of the beta holds `chance`, by bisection in log odds: Boost 1.74's own root finding
/// gives up for some shapes. `tail` falls (upper) or rises (lower) with x.
template <class Tail>
double beta_quantile(double chance, bool rising, Tail tail) {
    const auto value = [](double log_odds) { return 1.0 / (1.0 + std::exp(-log_odds)); };
    double low = -700.0;
    double high = 700.0;
    for (int step = 0; step < 110; ++step) {
        const double middle = 0.5 * (low + high);
        const bool enough = rising ? tail(value(middle)) >= chance : tail(value(middle)) <= chance;
        (enough ? high : low) = middle;
    }
    return value(high);
}

}  // namespace

double quantile(const Distribution& d, double p) {
    if (is_listed(d)) return listed_quantile(d, p);
    if (p <= 0.0) return support_low(d);
    if (p >= 1.0) return support_high(d);
    if (d.family == Family::half_normal) return d.first * std::numbers::sqrt2 * boost::math::erf_inv(p);
    if (d.family == Family::beta) return beta_quantile(p, true, [&](double x) { return lower(d, x); });
    return with_boost_law(d, [p](const auto& law) { return boost::math::quantile(law, p); });
}

double upper_quantile(const Distribution& d, double q) {
    if (is_listed(d)) return listed_quantile(d, 1.0 - q);
    if (q >= 1.0) return support_low(d);
    if (q <= 0.0) return support_high(d);
    if (d.family == Family::half_normal) return d.first * std::numbers::sqrt2 * boost::math::erfc_inv(q);
    if (d.family == Family::beta) return beta_quantile(q, false, [&](double x) { return upper(d, x); });
    return with_boost_law(d,
                          [q](const auto& law) { return boost::math::quantile(boost::math::complement(law, q)); });
}

double mean(const Distribution& d) {
    switch (d.family) {
        case Family::fixed:
        case Family::normal:
        case Family::gamma:
        case Family::beta:
        case Family::poisson:
            return d.first;
        case Family::half_normal:
            return d.first * std::numbers::sqrt2 * std::numbers::inv_sqrtpi;
        case Family::lognormal:
            return d.first * std::exp(0.5 * d.second * d.second);
        case Family::uniform:
            return 0.5 * (d.first + d.second);
        case Family::discrete:
            break;
    }
    double sum = 0.0, all = 0.0;
    for (std::size_t i = 0; i < d.values.size(); ++i) {
        sum += d.weights[i] * d.values[i];
        all += d.weights[i];
    }
    return sum / all;
}

}  // namespace lacuna::untruncated
