// Power and planned sizes of the designs beyond two means, against the reference grids and SciPy.
#include <catch2/catch.hpp>
#include <boost/math/distributions/students_t.hpp>
#include <cmath>

#include "sim/base/fault.h"
#include "sim/design/correlation.h"
#include "sim/design/design.h"
#include "sim/design/plan_table.h"
#include "sim/design/two_proportions.h"
#include "sim/design/welch.h"
#include "tests/oracle/make_design.h"
#include "tests/oracle/reference_csv.h"

using namespace lacuna;
using oracle::make;
using oracle::number;

namespace {

std::uint32_t whole(const std::map<std::string, std::string>& row, const char* name) { return static_cast<std::uint32_t>(number(row, name)); }

}  // namespace

TEST_CASE("Power of one mean and of pairs (reference/power_t.csv)", "[design]") {
    int rows = 0;
    for (const auto& row : oracle::read_reference("power_t.csv").rows) {
        if (row.at("test") != "one.sample" || number(row, "n") < 3) continue;
        ++rows;
        const Design design = make(rows % 2 ? Test::one_mean : Test::paired_means, number(row, "alpha"), int(number(row, "sides")));
        const TestPlan plan = describe(design, whole(row, "n"));
        const Tails its = tails(design, plan, number(row, "d"));
        CHECK(plan.df == number(row, "df"));
        CHECK(its.predicted + its.reversed == Approx(number(row, "power_R")).margin(1e-8).epsilon(0));
        CHECK(its.reversed == Approx(number(row, "p_lower")).margin(1e-8).epsilon(0));
    }
    CHECK(rows > 700);
}

TEST_CASE("Power of a correlation (reference/power_correlation.csv: two exact ways)", "[design]") {
    int rows = 0;
    for (const auto& row : oracle::read_reference("power_correlation.csv").rows) {
        ++rows;
        const Design design = make(Test::correlation, number(row, "alpha"), int(number(row, "sides")));
        const Tails its = tails(design, describe(design, whole(row, "n")), number(row, "rho"));
        INFO("n " << row.at("n") << " rho " << row.at("rho"));
        // The file is good to 1e-10 where its two ways agree so.
        const double margin = std::fmax(1e-8, 2.0 * std::fabs(number(row, "power") - number(row, "power_2F1")));
        CHECK(its.predicted + its.reversed == Approx(number(row, "power_2F1")).margin(margin).epsilon(0));
    }
    CHECK(rows == 224);
}

TEST_CASE("r at small n against its exact density (Hotelling 1953)", "[design]") {
    // f(r) by the series of Fisher (1915): integral of (cosh w - rho r)^{-(n-1)} over w, Simpson's rule.
    for (const int n : {4, 5, 10}) {
        for (const double rho : {0.3, 0.9}) {
            const auto density = [&](double r) {
                const int steps = 4000;
                const double width = 40.0 / steps;
                double sum = 0.0;
                for (int i = 0; i <= steps; ++i) {
                    const double weight = i == 0 || i == steps ? 1.0 : i % 2 ? 4.0 : 2.0;
                    sum += weight * std::pow(std::cosh(i * width) - rho * r, -(n - 1.0));
                }
                return (n - 2.0) / M_PI * std::pow(1 - rho * rho, (n - 1) / 2.0) * std::pow(1 - r * r, (n - 4) / 2.0) * sum * width / 3.0;
            };
            for (const double cut : {-0.5, 0.2, 0.8}) {
                const int steps = 400;  // of Simpson's rule in the angle with r = sin(angle), which has no singular end
                const double low = std::asin(cut), width = (M_PI_2 - low) / steps;
                double exact = 0.0;
                for (int i = 0; i < steps; ++i) {
                    const double weight = i == 0 ? 1.0 : i % 2 ? 4.0 : 2.0;
                    const double angle = low + i * width;
                    exact += weight * width / 3.0 * density(std::sin(angle)) * std::cos(angle);
                }
                const double t = cut * std::sqrt((n - 2.0) / (1.0 - cut * cut));
                const Tails at = correlation::tails(std::fabs(t), static_cast<std::uint32_t>(n), rho, 2);
                const double upper = t >= 0.0 ? at.predicted : 1.0 - at.reversed;
                INFO("n " << n << " rho " << rho << " cut " << cut);
                CHECK(upper == Approx(exact).margin(1e-7).epsilon(0));
            }
        }
    }
}

TEST_CASE("Planned n of a correlation (reference/power_published_n.csv: Cohen 1988, 1992, and exact)", "[design]") {
    int rows = 0;
    for (const auto& row : oracle::read_reference("power_published_n.csv").rows) {
        if (row.at("test") != "Pearson r") continue;
        ++rows;
        const Design design = make(Test::correlation, number(row, "alpha"), int(number(row, "sides")));
        const std::uint32_t n = planned_n(design, number(row, "target_power"), number(row, "es"));
        CHECK(n == number(row, "n_exact"));
        CHECK(power(design, describe(design, n), number(row, "es")) == Approx(number(row, "power_at_n_exact")).margin(1e-8).epsilon(0));
    }
    CHECK(rows == 9);
}

TEST_CASE("Power of several means and of Welch's test (reference/design_facts_scipy.csv)", "[design]") {
    int rows = 0;
    for (const auto& row : oracle::read_reference("design_facts_scipy.csv").rows) {
        ++rows;
        const bool welch = row.at("test") == "welch";
        Design design = make(welch ? Test::two_means : Test::several_means, number(row, "alpha"), int(number(row, "sides")));
        design.welch = welch;
        if (welch)
            design.allocation = number(row, "n2") / number(row, "n1");
        else
            design.groups = whole(row, "a");
        const Tails its = tails(design, describe(design, whole(row, "n1")), number(row, "effect"));
        INFO(row.at("test") << " " << row.at("a") << " " << row.at("n1") << " " << row.at("n2") << " " << row.at("effect"));
        CHECK(its.predicted == Approx(number(row, "upper")).margin(1e-8).epsilon(0));
        CHECK(its.reversed == Approx(number(row, "lower")).margin(1e-8).epsilon(0));
    }
    CHECK(rows == 176);
}

TEST_CASE("Cohen (1988), section 8.4: n per group of F tests at power 0.8", "[design]") {
    // Table 8.4.4 (from memory): alpha 0.05, f 0.25: u = 1: 64, u = 2: 52, u = 3: 45; f 0.10: u = 2: 322, u = 3: 274.
    const auto n = [](std::uint32_t groups, double f) {
        Design design = make(Test::several_means, 0.05, 2);
        design.groups = groups;
        return planned_n(design, 0.8, f);
    };
    // His tables rest on approximations.
    CHECK(std::abs(int(n(2, 0.25)) - 64) <= 1);
    CHECK(std::abs(int(n(3, 0.25)) - 52) <= 1);
    CHECK(std::abs(int(n(4, 0.25)) - 45) <= 1);
    CHECK(std::abs(int(n(3, 0.10)) - 322) <= 1);
    CHECK(std::abs(int(n(4, 0.10)) - 274) <= 1);
}

TEST_CASE("Power of the score test (reference/power_two_proportions.csv: full enumeration)", "[design]") {
    int rows = 0;
    for (const auto& row : oracle::read_reference("power_two_proportions.csv").rows) {
        ++rows;
        const double p1 = number(row, "p1"), p2 = number(row, "p2");
        Design design = make(Test::two_proportions, number(row, "alpha"), 2);
        design.base_rate = p2;
        const double effect = std::log(p1 / (1 - p1)) - std::log(p2 / (1 - p2));
        INFO("n " << row.at("n") << " p " << p1 << " " << p2);
        CHECK(power(design, describe(design, whole(row, "n")), effect) == Approx(number(row, "exact_pooled_z")).margin(1e-9).epsilon(0));
    }
    CHECK(rows == 60);
}

TEST_CASE("Two proportions of unequal groups: both tails against the sum over all cells", "[design]") {
    const auto pmf = [](int x, int n, double p) {
        return std::exp(std::lgamma(n + 1.0) - std::lgamma(x + 1.0) - std::lgamma(n - x + 1.0) + x * std::log(p) + (n - x) * std::log1p(-p));
    };
    for (const double effect : {-1.0, 0.0, 0.7}) {
        const int n1 = 13, n2 = 29;
        const double base = 0.2, p1 = two_proportions::rate(base, effect);
        double up = 0.0, down = 0.0;
        for (int x = 0; x <= n1; ++x) {
            for (int y = 0; y <= n2; ++y) {
                const double pooled = double(x + y) / (n1 + n2);
                const double z = x + y == 0 || x + y == n1 + n2 ? 0.0
                                                               : (double(x) / n1 - double(y) / n2) /
                                                                     std::sqrt(pooled * (1 - pooled) * (1.0 / n1 + 1.0 / n2));
                if (z > 1.7) up += pmf(x, n1, p1) * pmf(y, n2, base);
                if (z < -1.7) down += pmf(x, n1, p1) * pmf(y, n2, base);
            }
        }
        const Tails its = two_proportions::tails(1.7, 13, 29, base, effect, 2);
        CHECK(its.predicted == Approx(up).margin(1e-11).epsilon(0));
        CHECK(its.reversed == Approx(down).margin(1e-11).epsilon(0));
    }
}

TEST_CASE("Planned n of two proportions is the smallest: every n below is tried", "[design]") {
    for (const double base : {0.02, 0.1, 0.5}) {
        for (const double effect : {0.6, 1.2, 2.5, -0.9}) {
            for (const double allocation : {1.0, 2.0}) {
                Design design = make(Test::two_proportions, 0.05, 2);
                design.base_rate = base;
                design.allocation = allocation;
                if (effect < 0.0 && base < 0.1) continue;  // thousands
                const std::uint32_t n = planned_n(design, 0.8, effect);
                INFO("base " << base << " effect " << effect << " n " << n);
                CHECK(power(design, describe(design, n), effect) >= 0.8);
                std::uint32_t smaller = 0;
                for (std::uint32_t k = 2; k < n; ++k) smaller += power(design, describe(design, k), effect) >= 0.8;
                CHECK(smaller == 0);
            }
        }
    }
}

TEST_CASE("Critical values at real degrees of freedom", "[design]") {
    for (const auto& [least, most] : {std::pair{2.0, 8.0}, std::pair{9.0, 300.0}, std::pair{2.0, 1e6}}) {
        for (const double alpha : {0.3, 0.05, 1e-6}) {
            const CriticalCurve curve(alpha, 2, least, most);
            for (double df = least; df <= most; df *= 1.07) {
                const double exact = boost::math::quantile(boost::math::complement(boost::math::students_t(df), alpha / 2));
                REQUIRE(curve(df) == Approx(exact).epsilon(1e-10));
            }
        }
    }
}

TEST_CASE("Sizes planned for each question's effect are those planned one by one", "[design]") {
    struct Case {
        Test test;
        int sides;
        double allocation;
        std::uint32_t most;
    };
    for (const Case& its : {Case{Test::two_means, 2, 1.0, 5000}, Case{Test::two_means, 1, 1.5, 300}, Case{Test::one_mean, 2, 1.0, 3000},
                            Case{Test::known_variance, 2, 1.0, 5000}, Case{Test::correlation, 2, 1.0, 700},
                            Case{Test::several_means, 2, 1.0, 500}}) {
        Design design = make(its.test, 0.05, its.sides);
        design.allocation = its.allocation;
        const PlanTable table(design, 0.8, its.most);
        INFO("test " << int(its.test));
        CHECK(table.most() == its.most);
        // Next to the least effect of a size on either side, at sizes far from those that were solved for.
        for (std::uint32_t n = table.first() + 1; n <= its.most; n = n + 1 + n / 5) {
            const double least = table.least_effect(n);
            INFO("n " << n);
            const auto power_at = [&](double effect) { return power(design, describe(design, n), effect); };
            CHECK(power_at(least * (1 + 1e-9)) >= 0.8);
            CHECK(power_at(least * (1 - 1e-9)) < 0.8);
            CHECK(table.first() + table.position(least * (1 + 1e-9)) == n);
            CHECK(table.first() + table.position(-least * (1 - 1e-9)) == std::min(n + 1, its.most));
        }
        CHECK(table.position(0.0) == its.most - table.first());
        CHECK(table.position(0.99 * (its.test == Test::correlation ? 1.0 : 100.0)) == 0);
    }
    for (const double effect : {0.13, 0.35, 0.5, 0.8, 1.7}) {
        const PlanTable table(Design{}, 0.9, 3000);
        CHECK(table.first() + table.position(effect) == planned_n(Design{}, 0.9, effect));
    }
}

TEST_CASE("Two proportions planned for each question's effect: as one by one, though power is saw-toothed", "[design]") {
    for (const double allocation : {1.0, 1.5}) {
        Design design = make(Test::two_proportions, 0.05, 2);
        design.base_rate = 0.3;
        design.allocation = allocation;
        const PlanTable table(design, 0.8, 400, 0.4);
        for (const double effect : {0.5, 0.61, 0.72, 0.8, 0.95, 1.1, 1.3, 1.7, 2.4, 5.0, -0.7, -0.9, -1.0, -1.4, -2.0}) {
            INFO("effect " << effect << " allocation " << allocation);
            CHECK(table.first() + table.position(effect) == std::min(400u, planned_n(design, 0.8, effect)));
        }
    }
}

TEST_CASE("A size whose power no effect brings up to the target never suffices", "[design]") {
    // Two and two: the largest z is 2 (2 of 2 against none), below 3.29.
    Design design = make(Test::two_proportions, 0.001, 2);
    const PlanTable table(design, 0.8, 300, 1.0);
    CHECK(std::isinf(table.least_effect(2)));
    CHECK(table.first() + table.position(30.0) == planned_n(design, 0.8, 30.0));
    CHECK(table.first() + table.position(1.5) == planned_n(design, 0.8, 1.5));
}

TEST_CASE("A table of sizes ends where the least planned effect needs no more", "[design]") {
    const PlanTable table(Design{}, 0.8, 5000, 0.35);
    CHECK(table.most() < 300);
    CHECK(table.first() + table.position(0.35) == planned_n(Design{}, 0.8, 0.35));
    CHECK(table.first() + table.position(0.9) == planned_n(Design{}, 0.8, 0.9));
}

TEST_CASE("An exact power is exact", "[design]") {
    for (const Test test : {Test::two_means, Test::one_mean, Test::known_variance}) {
        for (const double target : {0.06, 0.5, 0.999}) {
            const Design design = make(test, 0.05, 2);
            TestPlan plan = describe(design, 7);
            plan.noncentrality = noncentrality_of_power(design, 7, target);
            CHECK(power(design, plan, 1.0) == Approx(target).margin(1e-11).epsilon(0));
        }
    }
}
