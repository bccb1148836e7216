#include <algorithm>
#include <boost/math/special_functions/beta.hpp>
#include <boost/math/special_functions/gamma.hpp>
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/variate/gamma.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;

TEST_CASE("Gamma variates follow the incomplete gamma function (Boost.Math)", "[variate]") {
    for (const double shape : {0.05, 0.5, 1.0, 1.5, 3.0, 24.0, 500.0}) {
        INFO("shape " << shape);
        std::vector<double> x;
        for (std::uint32_t i = 0; i < 200000; ++i) {
            Stream stream({7}, {0, Purpose::question_effect, 0, 0}, i);
            x.push_back(gamma_variate(stream, shape));
        }
        std::sort(x.begin(), x.end());
        CHECK(oracle::kolmogorov(x, [&](double t) { return boost::math::gamma_p(shape, t); }) <
              oracle::kolmogorov_bound);
    }
}

TEST_CASE("Beta variates follow the incomplete beta function (Boost.Math), also for tiny shapes", "[variate]") {
    const double shapes[][2] = {{0.5, 0.5}, {2.0, 5.0}, {30.0, 1.0}, {1e-3, 2e-3}};
    for (const auto& shape : shapes) {
        INFO(shape[0] << ", " << shape[1]);
        std::vector<double> x;
        for (std::uint32_t i = 0; i < 100000; ++i) {
            Stream stream({7}, {0, Purpose::question_effect, 0, 0}, i);
            x.push_back(beta_variate(stream, shape[0], shape[1]));
            REQUIRE(std::isfinite(x.back()));
        }
        if (shape[0] < 0.01) {
            // All mass at the ends: share near 1 is a / (a + b) to within 1e-2; compare at 1/2.
            const double above =
                static_cast<double>(std::count_if(x.begin(), x.end(), [](double t) { return t > 0.5; })) / 1e5;
            const double expected = boost::math::ibetac(shape[0], shape[1], 0.5);
            CHECK(std::fabs(oracle::z_score(above, expected, oracle::share_error(expected, 1e5))) < 4);
            continue;
        }
        std::sort(x.begin(), x.end());
        CHECK(oracle::kolmogorov(x, [&](double t) { return boost::math::ibeta(shape[0], shape[1], t); }) <
              oracle::kolmogorov_bound);
    }
}

TEST_CASE("The squeeze never accepts what the exact test refuses", "[variate]") {
    // The bound of sim/variate/gamma.h, as the vector kernel evaluates it, against the exact exponent.
    for (const double shape : {1.0, 1.5, 2.0, 5.0, 24.0, 1000.0}) {
        const GammaShape g = gamma_shape(shape);
        for (double x = -6.0; x <= 8.0; x += 0.001) {
            const double y = g.c * x;
            if (y < -0.5) continue;
            const double bound = x * x / 12 * y * y * (1 + 1.6 * std::max(-y, 0.0));
            const double v = std::pow(1 + y, 3);
            const double exact = std::exp(0.5 * x * x + g.d * (1 - v + std::log(v)));
            REQUIRE(1 - bound <= exact + 1e-14);
        }
    }
}
