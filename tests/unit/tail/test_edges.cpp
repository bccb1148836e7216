#include <catch2/catch.hpp>

#include <boost/math/special_functions/gamma.hpp>
#include <cmath>
#include <hwy/targets.h>
#include <limits>
#include <numbers>
#include <vector>

#include "sim/base/fault.h"
#include "sim/random/kernels.h"
#include "sim/tail/tails.h"

using namespace lacuna;

namespace {

constexpr double infinite = std::numeric_limits<double>::infinity();
constexpr double missing = std::numeric_limits<double>::quiet_NaN();

double normal_tail(double z) {
    double p = -1.0;
    normal_upper_tails(&z, 1, &p);
    return p;
}

double t_tail(double t, double df) {
    double p = -1.0;
    t_upper_tails(&t, &df, 1, &p);
    return p;
}

double f_tail(double f, std::uint32_t df1, double df2) {
    double p = -1.0;
    f_upper_tails(&f, df1, &df2, 1, &p);
    return p;
}

template <class Check>
void on_each_target(Check check) {
    for (const std::int64_t target : hwy::SupportedAndGeneratedTargets()) {
        hwy::SetSupportedTargetsForTest(target);
        INFO(vector_target());
        check();
        hwy::SetSupportedTargetsForTest(0);
    }
}

}  // namespace

TEST_CASE("Tails at the ends of their arguments", "[tail]") {
    on_each_target([] {
        CHECK(normal_tail(0.0) == 0.5);
        CHECK(normal_tail(infinite) == 0.0);
        CHECK(normal_tail(-infinite) == 1.0);
        CHECK(normal_tail(1e300) == 0.0);
        CHECK(std::isnan(normal_tail(missing)));
        for (const double df : {1.0, 2.5, 30.0, 1e7, 1e25, infinite}) {
            CAPTURE(df);
            CHECK(t_tail(0.0, df) == Approx(0.5).epsilon(4e-16));
            CHECK(t_tail(infinite, df) == 0.0);
            CHECK(t_tail(-infinite, df) == 1.0);
            CHECK(std::isnan(t_tail(missing, df)));
            for (const std::uint32_t df1 : {1u, 2u, 3u, 40u}) {
                CHECK(f_tail(0.0, df1, df) == 1.0);
                CHECK(f_tail(-1.0, df1, df) == 1.0);
                CHECK(f_tail(-infinite, df1, df) == 1.0);
                CHECK(f_tail(infinite, df1, df) == 0.0);
                CHECK(std::isnan(f_tail(missing, df1, df)));
            }
        }
        for (const double df : {0.999, 0.0, -3.0, -infinite, missing}) {
            CHECK(std::isnan(t_tail(1.0, df)));
            CHECK(std::isnan(f_tail(1.0, 1, df)));
            CHECK(std::isnan(f_tail(-1.0, 2, df)));
        }
        CHECK_THROWS_AS(f_tail(1.0, 0, 5.0), Defect);
    });
}

TEST_CASE("Tails in closed form, also where t^2 or f is out of range", "[tail]") {
    on_each_target([] {
        // Cauchy: 1/2 - arctan(t) / pi, for large t 1 / (pi t).
        for (const double t : {1e100, 1e150, 1e152, 1e154, 1e200, 1e299}) {
            CHECK(t_tail(t, 1.0) == Approx(std::numbers::inv_pi / t).epsilon(1e-12).scale(0));
            CHECK(t_tail(-t, 1.0) == 1.0);
        }
        CHECK(t_tail(1.0, 1.0) == Approx(0.25).epsilon(1e-14));
        CHECK(t_tail(-1.0, 1.0) == Approx(0.75).epsilon(1e-14));
        // df 2: (1 - t / sqrt(2 + t^2)) / 2 = 1 / (r (r + t)), r = sqrt(2 + t^2).
        for (const double t : {1e-3, 0.7, 3.0, 1e6, 1e100, 1e149}) {
            const double r = std::hypot(std::numbers::sqrt2, t);
            CHECK(t_tail(t, 2.0) == Approx(1.0 / r / (r + t)).epsilon(1e-12).scale(0));
        }
        // F with 2 and df2: (1 + 2 f / df2)^(-df2 / 2).
        for (const double f : {1e-9, 1.0, 1e10, 1e250, 1e300, 1e308}) {
            CHECK(f_tail(f, 2, 1.0) == Approx(1.0 / std::sqrt(1.0 + f) / std::sqrt(1.0 + f / (1.0 + f)))
                                           .epsilon(1e-12)
                                           .scale(0));
            // F with 1 and 1: two tails of the Cauchy at sqrt(f).
            CHECK(f_tail(f, 1, 1.0) ==
                  Approx(2.0 * std::numbers::inv_pi * std::atan(1.0 / std::sqrt(f))).epsilon(1e-12).scale(0));
        }
        // Far out I_x(a, b) is x^a / (a B(a, b)) (DLMF 8.17.7 at x = 0), here with a = 1/2, x = 1 / (df1 f).
        for (const std::uint32_t df1 : {7u, 40u, 999u}) {
            for (const double f : {1e40, 1e250, 1e271, 1e307, 1.7e308}) {
                const double expected = 2.0 / std::sqrt(df1) / std::sqrt(f) / std::beta(0.5, 0.5 * df1);
                CHECK(f_tail(f, df1, 1.0) == Approx(expected).epsilon(1e-12).scale(0));
            }
        }
    });
}

TEST_CASE("Infinite degrees of freedom give the limiting laws", "[tail]") {
    on_each_target([] {
        for (const double z : {-3.0, 0.1, 1.96, 12.0, 37.0}) {
            CHECK(t_tail(z, infinite) == Approx(normal_tail(z)).epsilon(1e-12).scale(0));
            CHECK(t_tail(z, 1e19) == Approx(normal_tail(z)).epsilon(1e-12).scale(0));
        }
        for (const std::uint32_t df1 : {1u, 2u, 5u, 30u, 999u}) {  // df1 F is chi-squared
            for (const double f : {0.2, 1.0, 1.6, 40.0}) {
                const double expected = boost::math::gamma_q(0.5 * df1, 0.5 * df1 * f);
                if (expected > 1e-300) CHECK(f_tail(f, df1, infinite) == Approx(expected).epsilon(2e-12).scale(0));
            }
        }
    });
}

TEST_CASE("A column's values do not depend on their places, and results may replace arguments", "[tail]") {
    on_each_target([] {
        std::vector<double> t, df;
        for (int i = 0; i < 53; ++i) {
            t.push_back(-3.0 + 0.37 * i);
            df.push_back(1.0 + 7.3 * (i * 29 % 53));
        }
        for (std::size_t n = 0; n <= t.size(); ++n) {
            std::vector<double> p(n + 1, -7.0), q(n + 1, -7.0), z(t);
            t_upper_tails(t.data(), df.data(), n, p.data());
            f_upper_tails(t.data(), 3, df.data(), n, q.data());
            normal_upper_tails(z.data(), n, z.data());
            CHECK(p[n] == -7.0);
            CHECK(q[n] == -7.0);
            for (std::size_t i = 0; i < n; ++i) {
                CHECK(p[i] == t_tail(t[i], df[i]));
                CHECK(q[i] == f_tail(t[i], 3, df[i]));
                CHECK(z[i] == normal_tail(t[i]));
            }
            if (n < t.size()) CHECK(z[n] == t[n]);
        }
    });
}

TEST_CASE("Tails fall: with each step of 1e-9 and more of the argument", "[tail]") {
    on_each_target([] {
        for (const double df : {1.0, 1.5, 2.0, 5.0, 16.0, 17.0, 120.0, 1e4, 1e7, infinite}) {
            for (const double step : {1e-9, 1e-6, 1e-3}) {
                std::vector<double> t, f;
                for (const double start : {0.0, 1e-3, 0.3, 0.999, 1.7, 3.0, 9.0, 30.0}) {
                    for (int i = 0; i < 200; ++i) t.push_back(start + step * std::fmax(1.0, start) * i);
                }
                const std::vector<double> its_df(t.size(), df);
                std::vector<double> p(t.size()), q(t.size()), z(t.size());
                t_upper_tails(t.data(), its_df.data(), t.size(), p.data());
                f_upper_tails(t.data(), 5, its_df.data(), t.size(), q.data());
                normal_upper_tails(t.data(), t.size(), z.data());
                for (std::size_t i = 1; i < t.size(); ++i) {
                    if (i % 200 == 0) continue;
                    CAPTURE(df, step, t[i]);
                    REQUIRE(p[i] < p[i - 1]);
                    REQUIRE(q[i] < q[i - 1] + (q[i] > 0.99 ? 4e-15 : 0.0));  // flat near 1: rounding shows
                    REQUIRE(z[i] < z[i - 1]);
                }
            }
        }
    });
}

TEST_CASE("Results below the range of doubles end at 0 without leaving it", "[tail]") {
    on_each_target([] {
        CHECK(normal_tail(38.0) == Approx(2.885428e-316).epsilon(1e-5).scale(0));
        CHECK(normal_tail(39.0) == 0.0);
        for (double w = 36.0; w < 60.0; w += 0.01) {
            const double t = std::sqrt(50.0 * std::expm1(w * w / 50.0));
            CHECK(t_tail(t, 50.0) >= 0.0);
            CHECK(t_tail(t, 50.0) < 1e-280);
            CHECK(f_tail(w * w, 7, 1e9) >= 0.0);
            CHECK(f_tail(w * w, 1000, 1e25) == 0.0);
        }
    });
}
