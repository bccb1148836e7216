// Distributions against SciPy (reference/distributions_scipy.csv) and closed forms.
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/base/fault.h"
#include "sim/stats/distribution.h"
#include "tests/oracle/reference_csv.h"

using namespace lacuna;
using oracle::number;

namespace {

Family family_of(const std::string& name) {
    static const std::map<std::string, Family> families{
        {"normal", Family::normal},       {"half_normal", Family::half_normal},
        {"lognormal", Family::lognormal}, {"gamma", Family::gamma},
        {"beta", Family::beta},           {"uniform", Family::uniform},
        {"poisson", Family::poisson}};
    return families.at(name);
}

Distribution make(Family family, double first, double second = 0.0, double min = -infinity, double max = infinity,
                  bool clamp = false) {
    Distribution d;
    d.family = family;
    d.first = first;
    d.second = second;
    d.min = min;
    d.max = max;
    d.clamp = clamp;
    return d;
}

Distribution discrete(std::vector<double> values, std::vector<double> weights) {
    Distribution d = make(Family::discrete, 0.0);
    d.values = std::move(values);
    d.weights = std::move(weights);
    return d;
}

double moment(const Distribution& d, int power, double about) {
    double sum = 0.0;
    for (const Node& node : quadrature(d)) sum += node.weight * std::pow(node.x - about, power);
    return sum;
}

double chance_of(const IntegerDistribution& integers, double n) {
    const double at = n - static_cast<double>(integers.first);
    return at < 0.0 || at >= static_cast<double>(integers.chance.size()) ? 0.0 : integers.chance[std::size_t(at)];
}

double total(const IntegerDistribution& integers) {
    double sum = 0.0;
    for (const double chance : integers.chance) sum += chance;
    return sum;
}

}  // namespace

TEST_CASE("Distributions agree with SciPy", "[stats]") {
    for (const auto& row : oracle::read_reference("distributions_scipy.csv").rows) {
        const Distribution d = make(family_of(row.at("family")), number(row, "first"), number(row, "second"),
                                    number(row, "min"), number(row, "max"), row.at("clamp") == "1");
        const std::string& quantity = row.at("quantity");
        const double value = number(row, "value");
        INFO(row.at("family") << ' ' << d.first << ' ' << d.second << " in " << d.min << " .. " << d.max
                              << " clamp " << d.clamp << ": " << quantity << ' ' << row.at("argument"));
        if (quantity == "mass") CHECK(mass_inside(d) == Approx(value).epsilon(1e-9));
        if (quantity == "mean") {
            CHECK(mean(d) == Approx(value).epsilon(1e-10));
            CHECK(moment(d, 1, 0.0) == Approx(value).epsilon(1e-9));
        }
        if (quantity == "variance") CHECK(moment(d, 2, mean(d)) == Approx(value).epsilon(1e-9));
        if (quantity == "cdf") CHECK(cdf(d, number(row, "argument")) == Approx(value).margin(1e-12).epsilon(0));
        if (quantity == "quantile") CHECK(quantile(d, number(row, "argument")) == Approx(value).epsilon(1e-9));
        if (quantity.starts_with("rounded")) {
            const IntegerDistribution integers = rounded(d, quantity == "rounded_down");
            CHECK(chance_of(integers, number(row, "argument")) == Approx(value).epsilon(1e-9).margin(1e-14));
            CHECK(total(integers) == Approx(1.0).epsilon(1e-14));
        }
    }
}

TEST_CASE("Sizes floored after clamping keep the bounds' atoms", "[stats]") {
    const Distribution d = make(Family::lognormal, 25.0, 0.5, 8.0, 200.0, true);
    const IntegerDistribution integers = rounded(d, true);
    CHECK(integers.first == 8);
    REQUIRE(integers.chance.size() == 193);
    // P(X < 9) and P(X >= 200) of the lognormal, by the error function.
    CHECK(integers.chance[0] ==
          Approx(0.5 * std::erfc(-std::log(9.0 / 25.0) / 0.5 / std::sqrt(2.0))).epsilon(1e-13));
    CHECK(integers.chance[192] ==
          Approx(0.5 * std::erfc(std::log(200.0 / 25.0) / 0.5 / std::sqrt(2.0))).epsilon(1e-12));
}

TEST_CASE("Rounding to nearest takes halves up", "[stats]") {
    const IntegerDistribution integers = rounded(discrete({2.5, -0.5, 3.4}, {1, 1, 2}), false);
    CHECK(integers.first == 0);
    CHECK(integers.chance == std::vector<double>{0.25, 0.0, 0.0, 0.75});
    const IntegerDistribution uniform = rounded(make(Family::uniform, 0.0, 4.0), false);
    CHECK(uniform.first == 0);
    REQUIRE(uniform.chance.size() == 5);
    CHECK(uniform.chance[0] == Approx(0.125).epsilon(1e-14));
    CHECK(uniform.chance[2] == Approx(0.25).epsilon(1e-14));
    CHECK(uniform.chance[4] == Approx(0.125).epsilon(1e-14));
}

TEST_CASE("Support of rounded values is cut at 2^-60 and refused beyond `most`", "[stats]") {
    const IntegerDistribution wide = rounded(make(Family::normal, 0.0, 100.0), false);
    CHECK(wide.first == -885);  // normal quantile of 2^-61: -8.8510 (mpmath)
    CHECK(total(wide) == Approx(1.0).epsilon(1e-14));
    CHECK_THROWS_AS(rounded(make(Family::lognormal, 1e6, 2.0), false), InputError);
    CHECK_THROWS_AS(rounded(make(Family::normal, 0.0, 100.0), false, 100), InputError);
}

TEST_CASE("Clamping onto a bound beyond all mass leaves one atom", "[stats]") {
    for (const Distribution& d :
         {make(Family::uniform, 0.0, 1.0, 5.0, 9.0, true), make(Family::uniform, 10.0, 11.0, 2.0, 5.0, true)}) {
        CHECK(is_constant(d));
        CHECK(mean(d) == 5.0);
        CHECK(quantile(d, 0.5) == 5.0);
        const IntegerDistribution integers = rounded(d, false);
        CHECK(integers.first == 5);
        CHECK(integers.chance == std::vector<double>{1.0});
    }
}

TEST_CASE("Discrete distributions: unsorted, repeated, weightless and truncated values", "[stats]") {
    Distribution d = discrete({3.0, 1.0, 2.0, 1.0, 9.0}, {1.0, 2.0, 4.0, 1.0, 0.0});
    CHECK(mean(d) == Approx(14.0 / 8.0));
    CHECK(cdf(d, 1.0) == 3.0 / 8.0);
    CHECK(cdf(d, 0.99) == 0.0);
    CHECK(quantile(d, 3.0 / 8.0) == 1.0);
    CHECK(quantile(d, 0.4) == 2.0);
    CHECK(quantile(d, 1.0) == 3.0);
    d.min = 2.0;
    CHECK(mass_inside(d) == 5.0 / 8.0);
    CHECK(cdf(d, 2.0) == Approx(0.8));
    CHECK(quantile(d, 0.0) == 2.0);
    CHECK(mean(d) == Approx(11.0 / 5.0));
    d.clamp = true;
    CHECK(mass_inside(d) == 1.0);
    CHECK(cdf(d, 2.0) == 7.0 / 8.0);
    CHECK(mean(d) == Approx(17.0 / 8.0));
    CHECK(quadrature(d).size() == 2);
}

TEST_CASE("What is constant", "[stats]") {
    CHECK(is_constant(Distribution::fixed(0.4)));
    CHECK(is_constant(make(Family::normal, 0.4, 0.0)));
    CHECK(is_constant(make(Family::uniform, 2.0, 2.0)));
    CHECK(is_constant(make(Family::poisson, 0.0)));
    CHECK(is_constant(make(Family::normal, 0.4, 0.1, 0.3, 0.3)));
    CHECK(is_constant(discrete({4.0, 4.0, 5.0}, {1.0, 2.0, 0.0})));
    CHECK_FALSE(is_constant(make(Family::normal, 0.4, 0.1)));
    CHECK_FALSE(is_constant(discrete({4.0, 5.0}, {1.0, 2.0})));
    CHECK(mean(make(Family::lognormal, 3.0, 0.0)) == 3.0);
    CHECK(quantile(make(Family::half_normal, 0.0), 0.5) == 0.0);
}

TEST_CASE("Quadrature with breaks integrates a step exactly", "[stats]") {
    const Distribution d = make(Family::normal, 0.2, 0.3);
    double above = 0.0;
    for (const Node& node : quadrature(d, 200, {0.0})) above += node.x > 0.0 ? node.weight : 0.0;
    CHECK(above == Approx(0.5 * std::erfc(-0.2 / 0.3 / std::sqrt(2.0))).epsilon(1e-12));
}

TEST_CASE("Beta quantiles invert the distribution for every shape (the incomplete beta function of Boost)", "[stats]") {
    for (const double mean_of : {0.01, 0.1, 0.301, 0.5, 0.9}) {
        for (const double concentration : {0.05, 0.5, 2.0, 2.698, 10.0, 1000.0}) {
            Distribution d;
            d.family = Family::beta;
            d.first = mean_of;
            d.second = concentration;
            INFO(mean_of << ", " << concentration);
            for (const double p : {0.1, 0.5, 0.9}) {
                const double x = quantile(d, p);
                if (x < 1e-290 || x > 1.0 - 1e-12) continue;  // all mass at an end
                CHECK(cdf(d, x) == Approx(p).epsilon(1e-9));
            }
        }
    }
}
