// What studies report, and the sizes they may have.
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/base/fault.h"
#include "sim/design/design.h"
#include "sim/design/two_means.h"

using namespace lacuna;

TEST_CASE("d, g and their standard errors", "[design]") {
    Design design;
    const TestPlan plan = describe(design, 20);
    const double t = 2.5, d = t * std::sqrt(2.0 / 20.0);
    CHECK(reported_estimate(design, plan, t) == Approx(d).epsilon(1e-15));
    const double se = std::sqrt(0.1 + d * d / 80.0);
    CHECK(reported_standard_error(design, plan, d) == Approx(se).epsilon(1e-15));
    CHECK(minimal_significant_effect(design, plan) == Approx(2.024394163911970 * std::sqrt(0.1)).epsilon(1e-13));
    design.estimate = EffectEstimate::g;
    // J(38) = Gamma(19) / (sqrt(19) Gamma(18.5)): 0.9801104021309462728 (mpmath).
    CHECK(plan.correction == Approx(0.9801104021309462728).epsilon(1e-13));
    CHECK(reported_estimate(design, plan, t) == Approx(plan.correction * d).epsilon(1e-15));
    CHECK(reported_standard_error(design, plan, plan.correction * d) == Approx(plan.correction * se).epsilon(1e-15));
}

TEST_CASE("Known variance reports the mean", "[design]") {
    Design design;
    design.test = Test::known_variance;
    design.estimate = EffectEstimate::g;  // no correction to make
    const TestPlan plan = describe(design, 16);
    CHECK(reported_estimate(design, plan, 3.0) == 0.75);
    CHECK(reported_standard_error(design, plan, 3.0) == 0.25);
    CHECK(plan.correction == 1.0);
}

TEST_CASE("Size distributions", "[design]") {
    const Design design;
    SizePlan size;
    size.n = 24;
    CHECK(size_distribution(design, size).first == 24);
    CHECK(size_distribution(design, size).chance == std::vector<double>{1.0});
    size.kind = SizePlan::Kind::power;
    CHECK(size_distribution(design, size).first == 64);  // d = .5, power .8: Cohen 1992, Table 2
    size.kind = SizePlan::Kind::distribution;
    size.distribution.family = Family::uniform;
    size.distribution.first = 10.0;
    size.distribution.second = 14.0;
    const IntegerDistribution nearest = size_distribution(design, size);
    CHECK(nearest.first == 10);
    CHECK(nearest.chance.size() == 5);
    CHECK(nearest.chance[0] == Approx(0.125));
    size.round_down = true;
    CHECK(size_distribution(design, size).chance[0] == Approx(0.25));
}

TEST_CASE("Sizes that no study can have are refused", "[design]") {
    Design design;
    SizePlan size;
    size.n = 1;
    CHECK_THROWS_AS(size_distribution(design, size), InputError);
    design.test = Test::known_variance;
    CHECK_NOTHROW(size_distribution(design, size));
    size.n = largest_n + 1;
    CHECK_THROWS_AS(size_distribution(design, size), InputError);
    size.kind = SizePlan::Kind::distribution;
    size.distribution.family = Family::normal;
    size.distribution.first = 20.0;
    size.distribution.second = 10.0;
    CHECK_THROWS_AS(size_distribution(design, size), InputError);
    size.distribution.min = 5.0;
    CHECK(size_distribution(design, size).first == 5);
}
