// A distribution: a number, or { family = ..., ... }.
#pragma once

#include <fmt/format.h>

#include <algorithm>
#include <numeric>

#include "sim/config/choices.h"
#include "sim/config/rule.h"

namespace lacuna {

/// Truncations that keep less than this of a distribution are taken for mistakes.
inline constexpr double least_mass_inside = 1e-6;

/// Shapes beyond these are points or nothing but tails, and overflow what computes with them.
inline constexpr Range shape_range{1e-6, 1e9};
inline constexpr Range sdlog_range{0.0, 100.0};
inline constexpr Range poisson_range{0.0, 4e9};

template <class V>
void describe_families(V& v, Distribution& d) {
    v.variant("family", d.family, Family::fixed,
              [&] { v.number("value", d.first, any_range, About::required_key("the value of every draw")); });
    v.variant("family", d.family, Family::normal, [&] {
        v.number("mean", d.first, any_range, About::required_key("mean before truncation"));
        v.number("sd", d.second, nonnegative_range, About::required_key("standard deviation before truncation"));
    });
    v.variant("family", d.family, Family::half_normal, [&] {
        v.number("sd", d.first, nonnegative_range,
                 About::required_key("standard deviation of the normal whose absolute value is drawn"));
    });
    v.variant("family", d.family, Family::lognormal, [&] {
        v.number("median", d.first, positive_range, About::required_key("median before truncation"));
        v.number("sdlog", d.second, sdlog_range, About::required_key("standard deviation of the logarithm"));
    });
    v.variant("family", d.family, Family::gamma, [&] {
        v.number("mean", d.first, positive_range, About::required_key("mean before truncation"));
        v.number("shape", d.second, shape_range, About::required_key("shape of the gamma distribution"));
    });
    v.variant("family", d.family, Family::beta, [&] {
        v.number("mean", d.first, open_share_range, About::required_key("mean before truncation"));
        v.number("concentration", d.second, shape_range, About::required_key("sum a + b of the beta's shapes"));
    });
}

template <class V>
void describe_bounded_families(V& v, Distribution& d) {
    v.variant("family", d.family, Family::uniform, [&] {
        v.number("low", d.first, any_range, About::required_key("lower end"));
        v.number("high", d.second, any_range, About::required_key("upper end"));
        v.check(
            {"high", "low"}, [&] { return d.first < d.second; }, "must be above low", "");
    });
    v.variant("family", d.family, Family::poisson,
              [&] { v.number("mean", d.first, poisson_range, About::required_key("mean before truncation")); });
    v.variant("family", d.family, Family::discrete, [&] {
        v.numbers("values", d.values, any_range, About::required_key("the possible values"));
        v.numbers("weights", d.weights, nonnegative_range,
                  About::required_key("the chance of each value, up to a common factor"));
        v.check(
            {"values"}, [&] { return !d.values.empty(); }, "must hold at least one value", "");
        v.check(
            {"weights", "values"}, [&] { return d.weights.size() == d.values.size(); },
            "must hold as many numbers as values", "");
        v.check(
            {"weights", "values"},
            [&] {
                const double sum = std::accumulate(d.weights.begin(), d.weights.end(), 0.0);
                return sum > 0.0 && sum < infinity;
            },
            "must have a positive, finite sum", "");
    });
}

/// The keys of a distribution in the table that `v` walks.
template <class V>
void describe(V& v, Distribution& d) {
    v.choice("family", d.family, About::required_key("the family of distributions"));
    describe_families(v, d);
    describe_bounded_families(v, d);
    v.bound("min", d.min, About::derived("draws below do not occur", "no bound"));
    v.bound("max", d.max, About::derived("draws above do not occur", "no bound"));
    v.flag("clamp", d.clamp, "draws outside move to the nearer bound; otherwise the distribution is truncated");
    v.check(
        {"max", "min"}, [&] { return d.min <= d.max; }, "must be min or more", "");
    v.check(
        {"clamp"}, [&] { return !d.clamp || d.min > -infinity || d.max < infinity; },
        "needs min or max to clamp to", "");
    v.check(
        {d.min > -infinity ? "min" : "max", "min", "max", "clamp", "family", "value", "mean", "sd", "median",
         "sdlog", "shape", "concentration", "low", "high", "values", "weights"},
        [&] { return mass_inside(d) >= least_mass_inside; },
        "has less than a millionth of its draws between min and max", "widen min and max, or set clamp = true");
}

/// A distribution whose keys stand among others in the table that `v` walks.
template <class V>
void describe_among_others(V& v, Distribution& d) {
    if constexpr (requires { v.distribution_keys(); }) {
        v.distribution_keys();
    } else {
        describe(v, d);
    }
}

/// A key that holds a number or a distribution.
template <class V>
void describe_distribution(V& v, const char* key, Distribution& d, const About& about) {
    if constexpr (requires { v.distribution(key, d, about); }) {
        v.distribution(key, d, about);
    } else {
        v.number_or_table(
            key, any_range, about, [&](double x) { d = Distribution::fixed(x); },
            [&](auto& inner) {
                inner.preset(d, Distribution{});
                describe(inner, d);
            });
    }
}

}  // namespace lacuna
