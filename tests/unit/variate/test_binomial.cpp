// Binomial variates by inversion against Boost.Math's chances.
#include <boost/math/distributions/binomial.hpp>
#include <boost/math/distributions/chi_squared.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <random>
#include <vector>

#include "sim/variate/binomial.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;

namespace {

std::uint32_t one(std::uint32_t n, double p, double u) {
    std::uint32_t x = 0;
    binomials(&n, &p, &u, 1, &x);
    return x;
}

}  // namespace

TEST_CASE("Binomial counts have their chances: chi-squared over the outcomes", "[variate]") {
    // Both searches (n p up to 64, and above), both sides of 1/2; 18 tests at 1e-5.
    const std::size_t count = 300000;
    std::mt19937_64 generator(31);
    for (const std::uint32_t n : {1u, 5u, 24u, 100u, 128u, 1000u}) {
        for (const double p : {0.03, 0.5, 0.93}) {
            INFO("n " << n << " p " << p);
            std::vector<std::uint32_t> sizes(count, n), x(count);
            std::vector<double> rates(count, p), u(count);
            for (double& value : u) value = static_cast<double>(generator() >> 11) * 0x1p-53;
            binomials(sizes.data(), rates.data(), u.data(), count, x.data());
            std::vector<double> seen(n + 1, 0.0);
            for (const std::uint32_t value : x) {
                REQUIRE(value <= n);
                seen[value] += 1.0;
            }
            const boost::math::binomial law(n, p);
            double statistic = 0.0, cells = -1.0, rest = 0.0, rest_seen = 0.0;
            for (std::uint32_t k = 0; k <= n; ++k) {
                const double expected = boost::math::pdf(law, k) * static_cast<double>(count);
                if (expected < 10.0) {
                    rest += expected;
                    rest_seen += seen[k];
                    continue;
                }
                statistic += (seen[k] - expected) * (seen[k] - expected) / expected;
                cells += 1.0;
            }
            if (rest > 1.0) {
                statistic += (rest_seen - rest) * (rest_seen - rest) / rest;
                cells += 1.0;
            }
            CHECK(statistic < boost::math::quantile(boost::math::complement(boost::math::chi_squared(cells), 1e-5)));
        }
    }
}

TEST_CASE("Searched from 0, a count is the smallest whose distribution function exceeds the uniform", "[variate]") {
    std::mt19937_64 generator(4);
    for (const std::uint32_t n : {3u, 24u, 200u, 100000u}) {
        for (const double p : {0.0002, 0.2, 0.3}) {
            if (n * p > 64.0) continue;
            const boost::math::binomial law(n, p);
            for (int i = 0; i < 300; ++i) {
                const double u = static_cast<double>(generator() >> 11) * 0x1p-53;
                const std::uint32_t x = one(n, p, u);
                REQUIRE(boost::math::cdf(law, x) > u - 1e-13);
                if (x > 0) REQUIRE(boost::math::cdf(law, x - 1) <= u + 1e-13);
            }
        }
    }
}

TEST_CASE("Binomial counts of a million observations: mean and variance", "[variate]") {
    const std::size_t count = 100000;
    std::mt19937_64 generator(5);
    for (const double p : {0.001, 0.4}) {
        const std::uint32_t n = 1'000'000;
        oracle::Sample sample;
        for (std::size_t i = 0; i < count; ++i) sample.add(one(n, p, static_cast<double>(generator() >> 11) * 0x1p-53));
        const double variance = n * p * (1 - p);
        CHECK(std::fabs(oracle::z_score(sample.mean(), n * p, std::sqrt(variance / double(count)))) < 4);
        CHECK(std::fabs(sample.variance() / variance - 1) < 4 * std::sqrt(2.0 / double(count)));
    }
}

TEST_CASE("Binomial counts at the edges", "[variate]") {
    const double last = 1.0 - 0x1p-53;
    for (const double u : {0.0, 0.5, last}) {
        CHECK(one(0, 0.3, u) == 0);
        CHECK(one(12, 0.0, u) == 0);
        CHECK(one(12, 1.0, u) == 12);
    }
    CHECK(one(12, 0.3, 0.0) == 0);
    CHECK(one(12, 0.7, 0.0) == 12);  // failures are searched for p above 1/2
    CHECK(one(1, 0.25, 0.75) == 1);
    CHECK(one(1, 0.25, 0.7499999) == 0);
    // Where chances have vanished the search ends: about 9 standard deviations up, not at n.
    CHECK(one(10'000'000, 6e-6, last) < 160);
    CHECK(one(10'000'000, 1e-6, last) < 60);
    CHECK(one(10'000'000, 0.3, last) < 3'050'000);
}

TEST_CASE("Chances by the saddle point", "[variate]") {
    for (const std::uint32_t n : {1u, 7u, 64u, 5000u, 10'000'000u}) {
        for (const double p : {1e-5, 0.2, 0.5, 0.99}) {
            const boost::math::binomial law(n, p);
            for (const double sd : {-3.0, 0.0, 1.0, 4.0}) {
                const double at = std::floor(n * p + sd * std::sqrt(n * p * (1 - p)));
                if (at < 0.0 || at > n) continue;
                const double expected = boost::math::pdf(law, at);
                CHECK(binomial_chance(n, p, static_cast<std::uint32_t>(at)) == Approx(expected).epsilon(n > 100000 ? 1e-7 : 1e-10));
            }
        }
    }
}
