// What the studies table says of a study, from its statistic: by the textbook formulas and Boost.Math.
#include <boost/math/distributions/fisher_f.hpp>
#include <boost/math/distributions/students_t.hpp>
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/config/load.h"
#include "tests/oracle/recorded_run.h"

using namespace lacuna;
using namespace lacuna::oracle;

namespace {

struct Studies {
    std::vector<double> estimate, hedges_g, error, statistic, df, p;
    std::vector<std::int32_t> n1, n2;
};

Studies stored(const std::string& design, const std::string& effect = "0.4") {
    const Scenario scenario = parse_scenario("[run]\nliteratures = 2\n[field]\nquestions = 300\nlabs = 30\neffect = " + effect +
                                                 "\n[design]\n" + design +
                                                 "\n[[lab]]\nname = \"a\"\nlines = 10\n[store]\ndetail = \"studies\"\n",
                                             "t", {});
    const Recorded all = run(scenario);
    const auto real = [&](const char* name) { return column<double>(scenario, all, "studies", name); };
    return {real("estimate"), real("hedges_g"), real("standard_error"), real("statistic"), real("df"), real("p"),
            column<std::int32_t>(scenario, all, "studies", "n1"), column<std::int32_t>(scenario, all, "studies", "n2")};
}

/// Hedges' correction.
double j(double df) { return std::exp(std::lgamma(df / 2) - std::lgamma((df - 1) / 2)) / std::sqrt(df / 2); }

double two_sided(double t, double df) {
    return 2 * boost::math::cdf(boost::math::complement(boost::math::students_t(df), std::fabs(t)));
}

}  // namespace

TEST_CASE("Stored studies of two means", "[details]") {
    for (const bool as_g : {false, true}) {
        const Studies s = stored(std::string("size = { plan = \"distribution\", family = \"uniform\", low = 4, high = 30 }\nallocation = 2\n") +
                                 (as_g ? "estimate = \"g\"\n" : ""));
        REQUIRE(s.estimate.size() == 600);
        for (std::size_t i = 0; i < s.estimate.size(); ++i) {
            const double n1 = s.n1[i], n2 = s.n2[i], df = n1 + n2 - 2;
            const double d = s.statistic[i] * std::sqrt(1 / n1 + 1 / n2);
            REQUIRE(n2 == 2 * n1);
            REQUIRE(s.df[i] == df);
            REQUIRE(s.hedges_g[i] == Approx(j(df) * d).epsilon(1e-12));
            REQUIRE(s.estimate[i] == Approx(as_g ? j(df) * d : d).epsilon(1e-12));
            const double error = std::sqrt(1 / n1 + 1 / n2 + d * d / (2 * (n1 + n2)));
            REQUIRE(s.error[i] == Approx(as_g ? j(df) * error : error).epsilon(1e-12));
            REQUIRE(s.p[i] == Approx(two_sided(s.statistic[i], df)).epsilon(1e-10));
        }
    }
}

TEST_CASE("Stored studies of the other designs", "[details]") {
    const Studies r = stored("test = \"correlation\"\n");
    for (std::size_t i = 0; i < r.estimate.size(); ++i) {
        REQUIRE(r.statistic[i] == Approx(r.estimate[i] * std::sqrt(18 / (1 - r.estimate[i] * r.estimate[i]))).epsilon(1e-11));
        REQUIRE(r.hedges_g[i] == r.estimate[i]);
        REQUIRE(r.error[i] == Approx((1 - r.estimate[i] * r.estimate[i]) / std::sqrt(19.0)).epsilon(1e-12));
        REQUIRE(r.p[i] == Approx(two_sided(r.statistic[i], 18)).epsilon(1e-10));
    }
    const Studies f = stored("test = \"several-means\"\ngroups = 5\n");
    for (std::size_t i = 0; i < f.estimate.size(); ++i) {
        REQUIRE(f.estimate[i] == Approx(std::sqrt(4 * f.statistic[i] / 100)).epsilon(1e-12));
        REQUIRE(f.df[i] == 95);
        REQUIRE(f.p[i] == Approx(boost::math::cdf(boost::math::complement(boost::math::fisher_f(4, 95), f.statistic[i]))).epsilon(1e-10));
    }
    const Studies one = stored("test = \"paired-means\"\nsides = 1\nfindings = \"predicted\"\n");
    for (std::size_t i = 0; i < one.estimate.size(); ++i) {
        REQUIRE(one.n2[i] == 0);
        REQUIRE(one.estimate[i] == Approx(one.statistic[i] / std::sqrt(20.0)).epsilon(1e-12));
        REQUIRE(one.p[i] == Approx(boost::math::cdf(boost::math::complement(boost::math::students_t(19), one.statistic[i]))).epsilon(1e-10));
    }
    const Studies welch = stored("welch = true\n");
    for (std::size_t i = 0; i < welch.estimate.size(); ++i) {
        REQUIRE(welch.df[i] <= 38.0 + 1e-9);
        REQUIRE(welch.df[i] >= 19.0);
        // With equal groups t is d over sqrt(2 / n), whatever the variances.
        REQUIRE(welch.statistic[i] == Approx(welch.estimate[i] / std::sqrt(0.1)).epsilon(1e-11));
        REQUIRE(welch.p[i] == Approx(two_sided(welch.statistic[i], welch.df[i])).epsilon(1e-10));
    }
    const Studies odds = stored("test = \"two-proportions\"\nbase_rate = 0.3\n", "0.9");
    for (std::size_t i = 0; i < odds.estimate.size(); ++i) {
        REQUIRE(std::isinf(odds.df[i]));
        REQUIRE(odds.p[i] == Approx(std::erfc(std::fabs(odds.statistic[i]) / std::sqrt(2.0))).epsilon(1e-10));
        REQUIRE(odds.error[i] > 0.4);  // 1 / a + ... with cells of at most 20: at least sqrt(4 / 20)
        REQUIRE((odds.estimate[i] > 0) == (odds.statistic[i] > 0));
    }
}

TEST_CASE("Studies of an exact power report in units of effects", "[details]") {
    // One effect: noise is such that z = effect m has power 0.8, so the error of an estimate is 1 / m.
    const Studies s = stored("test = \"known-variance\"\nsize = { plan = \"exact-power\", power = 0.8, effect = \"true\", n = 50 }\n");
    const double m = (1.959963984540054 + 0.8416212335729143) / 0.4;  // the other tail adds less than 1e-6
    for (std::size_t i = 0; i < s.estimate.size(); ++i) {
        REQUIRE(s.n1[i] == 50);
        REQUIRE(s.error[i] == Approx(1 / m).epsilon(1e-5));
        REQUIRE(s.estimate[i] == Approx(s.statistic[i] / m).epsilon(1e-5));
    }
}
