// Draws from Distribution values against their cdf, which tests/unit/stats compares with SciPy.
#include <algorithm>
#include <boost/math/distributions/chi_squared.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <map>

#include "sim/variate/sampler.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;

namespace {

Distribution law(Family family, double first, double second, double min, double max) {
    Distribution d;
    d.family = family;
    d.first = first;
    d.second = second;
    d.min = min;
    d.max = max;
    return d;
}

std::vector<double> drawn(const Distribution& d, std::size_t count) {
    std::vector<double> x(count);
    Sampler(d).draw({8}, {2, Purpose::question_effect, 0, 0}, Purpose::question_effect_again, {5, nullptr, count},
                    x.data());
    std::sort(x.begin(), x.end());
    return x;
}

/// Pearson's chi-squared of a sorted sample of few different values, below its 1 - 1e-4 quantile (Boost.Math).
bool fits(const std::vector<double>& x, const Distribution& d) {
    double statistic = 0.0;
    double cells = 0.0;
    for (auto at = x.begin(); at != x.end();) {
        const auto end = std::upper_bound(at, x.end(), *at);
        const double chance = cdf(d, *at) - cdf(d, std::nextafter(*at, -infinity));
        const double expected = chance * static_cast<double>(x.size());
        const double seen = static_cast<double>(end - at);
        statistic += (seen - expected) * (seen - expected) / expected;
        cells += 1.0;
        at = end;
    }
    return statistic < boost::math::quantile(complement(boost::math::chi_squared(cells - 1), 1e-4));
}

}  // namespace

TEST_CASE("Truncated draws stay inside both bounds and follow the truncated distribution", "[variate]") {
    // Bounds that hold more than half of the mass (drawn again) and less (inverted); a lower one, an upper
    // one, both.
    const std::vector<Distribution> cases{
        law(Family::normal, 0.3, 0.3, -0.1, 0.5),     law(Family::normal, 0.3, 0.3, -infinity, 0.4),
        law(Family::normal, 0.3, 0.3, 0.2, infinity), law(Family::normal, 0.3, 0.3, 0.7, 0.9),
        law(Family::half_normal, 0.4, 0, 0.1, 0.6),   law(Family::half_normal, 0.4, 0, 0.9, 1.1),
        law(Family::lognormal, 24, 0.5, 10, 40),      law(Family::lognormal, 24, 0.5, 60, 90),
        law(Family::gamma, 0.4, 2, 0.05, 0.7),        law(Family::gamma, 0.4, 2, 0.9, 1.5),
        law(Family::beta, 0.3, 5, 0.05, 0.45),        law(Family::beta, 0.3, 5, 0.6, 0.7),
        law(Family::uniform, 0, 1, 0.2, 0.9),         law(Family::uniform, 0, 1, 0.8, 0.9)};
    for (const Distribution& d : cases) {
        INFO("family " << int(d.family) << " on [" << d.min << ", " << d.max << "], mass " << mass_inside(d));
        const std::vector<double> x = drawn(d, 20000);
        CHECK(x.front() >= d.min);
        CHECK(x.back() <= d.max);
        CHECK(oracle::kolmogorov(x, [&](double t) { return cdf(d, t); }) < oracle::kolmogorov_bound);
    }
}

TEST_CASE("Truncated counts and lists stay inside both bounds, each value with its chance", "[variate]") {
    Distribution list = law(Family::discrete, 0, 0, 1, 3);
    list.values = {0, 1, 2, 3, 4};
    list.weights = {1, 3, 2, 3, 1};
    Distribution rare = list;
    rare.max = 1;
    rare.min = 0;
    for (const Distribution& d : {law(Family::poisson, 4, 0, 2, 6), law(Family::poisson, 4, 0, -infinity, 5),
                                  law(Family::poisson, 4, 0, 7, 9), list, rare}) {
        INFO("family " << int(d.family) << " on [" << d.min << ", " << d.max << "], mass " << mass_inside(d));
        const std::vector<double> x = drawn(d, 100000);
        CHECK(x.front() >= d.min);
        CHECK(x.back() <= d.max);
        CHECK(fits(x, d));
    }
}

TEST_CASE("Clamped draws move to the bounds, where they pile up", "[variate]") {
    Distribution d = law(Family::normal, 0.3, 0.3, 0.0, 0.6);
    d.clamp = true;
    const std::vector<double> x = drawn(d, 100000);
    CHECK(x.front() == 0.0);
    CHECK(x.back() == 0.6);
    // P(Z < -1) = 0.158655253931457 at either end (standard normal table).
    const double p = 0.158655253931457;
    for (const double bound : {0.0, 0.6}) {
        const double share = static_cast<double>(std::count(x.begin(), x.end(), bound)) / 1e5;
        CHECK(std::fabs(oracle::z_score(share, p, oracle::share_error(p, 1e5))) < oracle::bound_in_standard_errors);
    }
}
