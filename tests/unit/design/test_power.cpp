// Power and planned sizes against the reference grids and Cohen's tables.
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/base/fault.h"
#include "sim/design/design.h"
#include "sim/design/two_means.h"
#include "tests/oracle/make_design.h"
#include "tests/oracle/reference_csv.h"

using namespace lacuna;
using oracle::make;
using oracle::number;

TEST_CASE("Power of two means (reference/power_t.csv)", "[design]") {
    for (const auto& row : oracle::read_reference("power_t.csv").rows) {
        if (row.at("test") != "two.sample") continue;
        const Design design = make(Test::two_means, number(row, "alpha"), std::stoi(row.at("sides")));
        const TestPlan plan = describe(design, static_cast<std::uint32_t>(number(row, "n")));
        const double d = number(row, "d");
        INFO("n " << plan.size.n1 << " d " << d << " alpha " << design.alpha << " sides " << design.sides);
        CHECK(plan.df == number(row, "df"));
        CHECK(plan.noncentrality * d == Approx(number(row, "ncp")).epsilon(1e-11));
        CHECK(power(design, plan, d) == Approx(number(row, "power_R")).margin(1e-8).epsilon(0));
        CHECK(power_predicted(design, plan, d) == Approx(number(row, "p_upper")).margin(1e-8).epsilon(0));
    }
}

TEST_CASE("Power of two means of unequal sizes (reference/power_t_unequal.csv)", "[design]") {
    for (const auto& row : oracle::read_reference("power_t_unequal.csv").rows) {
        const Design design = make(Test::two_means, number(row, "alpha"), std::stoi(row.at("sides")));
        TestPlan plan = two_means::plan(
            {static_cast<std::uint32_t>(number(row, "n1")), static_cast<std::uint32_t>(number(row, "n2"))});
        plan.critical = critical_value(design, plan, design.alpha, design.sides);
        INFO("n1 " << plan.size.n1 << " n2 " << plan.size.n2 << " d " << row.at("d"));
        CHECK(power(design, plan, number(row, "d")) == Approx(number(row, "power")).margin(1e-8).epsilon(0));
    }
}

TEST_CASE("Planned n of two means (reference/power_published_n.csv: Cohen 1988, 1992, and exact)", "[design]") {
    int rows = 0;
    for (const auto& row : oracle::read_reference("power_published_n.csv").rows) {
        if (row.at("test") != "two-sample t") continue;
        ++rows;
        const Design design = make(Test::two_means, number(row, "alpha"), std::stoi(row.at("sides")));
        const double d = number(row, "es"), target = number(row, "target_power");
        INFO("d " << d << " alpha " << design.alpha << " sides " << design.sides << " power " << target);
        const std::uint32_t n = planned_n(design, target, d);
        CHECK(n == number(row, "n_exact"));
        CHECK(power(design, describe(design, n), d) ==
              Approx(number(row, "power_at_n_exact")).margin(1e-8).epsilon(0));
        CHECK(std::fabs(n - number(row, "n_published")) <= 2.0);  // Cohen's tables rest on approximations
    }
    CHECK(rows == 14);
}

TEST_CASE("Power and planned n with known variance are the normal's closed forms", "[design]") {
    // One-sided: n = ((z_alpha + z_beta) / effect)^2 rounded up = (2.486475 / 0.5)^2 = 24.73.
    CHECK(planned_n(make(Test::known_variance, 0.05, 1), 0.8, 0.5) == 25);
    // Two-sided at effect 0.5: (1.959964 + 0.841621)^2 / 0.25 = 31.4.
    const Design design = make(Test::known_variance, 0.05, 2);
    CHECK(planned_n(design, 0.8, 0.5) == 32);
    CHECK(planned_n(design, 0.8, -0.5) == 32);
    // At a noncentrality of c: 1/2 above, and P(Z < -2c) below.
    const TestPlan plan = describe(design, 1);
    const double c = 1.959963984540054;
    CHECK(power(design, plan, c) == Approx(0.5 + 0.5 * std::erfc(2.0 * c / std::sqrt(2.0))).epsilon(1e-13));
    CHECK(power_predicted(design, plan, c) == Approx(0.5).epsilon(1e-13));
    CHECK(plan.size == StudySize{1, 0});
    CHECK(plan.participants == 1.0);
}

TEST_CASE("The smallest studies", "[design]") {
    const Design two = make(Test::two_means, 0.05, 2);
    const TestPlan pair = describe(two, 2);
    CHECK(pair.df == 2.0);
    // t with 2 df has a closed quantile: t = (2 p - 1) sqrt(2 / (4 p (1 - p))), p = 0.975.
    CHECK(pair.critical == Approx(0.95 * std::sqrt(2.0 / (4.0 * 0.975 * 0.025))).epsilon(1e-13));
    CHECK(pair.correction == Approx(1.0 / std::sqrt(M_PI)).epsilon(1e-14));  // Gamma(1) / (1 * Gamma(1/2))
    CHECK(power(two, pair, 0.0) == Approx(0.05).epsilon(1e-12));
    CHECK(planned_n(two, 0.04, 0.0) == 2);
    CHECK(planned_n(two, 0.8, 50.0) == 2);
    CHECK(planned_n(make(Test::known_variance, 0.05, 2), 0.8, 50.0) == 1);
    CHECK(smallest_n(two) == 2);
    CHECK(smallest_n(make(Test::known_variance, 0.05, 2)) == 1);
}

TEST_CASE("A planned n is smallest", "[design]") {
    for (const double effect : {0.01, 0.33, 1.7}) {
        for (const double target : {0.3, 0.8, 0.999}) {
            const Design design = make(Test::two_means, 0.005, 2);
            const std::uint32_t n = planned_n(design, target, effect);
            CHECK(power(design, describe(design, n), effect) >= target);
            CHECK((n == 2 || power(design, describe(design, n - 1), effect) < target));
        }
    }
}

TEST_CASE("Impossible plans are refused with a remedy", "[design]") {
    const auto message = [](const Design& design, double target, double effect) -> std::string {
        try {
            planned_n(design, target, effect);
        } catch (const InputError& error) {
            CHECK_FALSE(error.faults().at(0).remedy.empty());
            return error.what();
        }
        return "";
    };
    const Design design = make(Test::two_means, 0.05, 2);
    CHECK(message(design, 0.8, 0.0).find("power 0.8 at effect 0") != std::string::npos);
    CHECK(message(design, 0.9, 1e-5).find("10000000 observations per group") != std::string::npos);
    CHECK(message(make(Test::two_means, 0.05, 1), 0.8, -0.5).find("one-sided") != std::string::npos);
    CHECK(message(make(Test::known_variance, 0.05, 2), 0.8, 0.0).find("per group") == std::string::npos);
}
