#include <hwy/targets.h>

#include <algorithm>
#include <boost/math/distributions/chi_squared.hpp>
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/design/design.h"
#include "sim/design/sampling.h"
#include "sim/stats/student_t.h"
#include "tests/oracle/participants.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;

namespace {

struct Drawn {
    std::vector<std::uint32_t> row;
    std::vector<double> theta, statistic, estimate;
    std::vector<std::uint8_t> claim;
};

Science science_of(Test test, const SizePlan& size) {
    Science science;
    science.design.test = test;
    science.design.size = size;
    LabKind kind;
    kind.size = size;
    science.labs = {kind};
    return science;
}

SizePlan fixed_size(std::uint32_t n) {
    SizePlan size;
    size.n = n;
    return size;
}

SizePlan lognormal_sizes() {
    SizePlan size;
    size.kind = SizePlan::Kind::distribution;
    size.distribution.family = Family::lognormal;
    size.distribution.first = 24;
    size.distribution.second = 0.5;
    size.distribution.min = 4;
    size.distribution.max = 200;
    return size;
}

/// Study 3 of `entities` of literature 5; whole vectors beyond the end are written, then cut.
Drawn draw(const Science& science, const TestTable& table, Entities entities, double effect) {
    const StudyRound round{{99}, 5, 3, entities};
    const std::size_t room = entities.count + 16;
    Drawn d{std::vector<std::uint32_t>(room), std::vector<double>(room, effect), std::vector<double>(room),
            std::vector<double>(room), std::vector<std::uint8_t>(room)};
    SamplingScratch scratch;
    std::vector<double> df(room), error(room);
    draw_sizes(round, table, nullptr, nullptr, scratch, d.row.data());
    draw_studies(round, science.design, table, scratch,
                 {d.row.data(), d.theta.data(), d.statistic.data(), d.estimate.data(), d.claim.data(), df.data(), error.data()});
    d.row.resize(entities.count);
    d.statistic.resize(entities.count);
    d.estimate.resize(entities.count);
    d.claim.resize(entities.count);
    return d;
}

}  // namespace

TEST_CASE("The two-means statistic follows the noncentral t (quadrature), from n = 2 on", "[design]") {
    const double cases[][2] = {{2, 0.0}, {2, 0.8}, {3, -0.4}, {5, 0.5}, {24, 0.35}, {200, 0.1}};
    for (const auto& c : cases) {
        const auto n = static_cast<std::uint32_t>(c[0]);
        INFO("n " << n << " effect " << c[1]);
        const Science science = science_of(Test::two_means, fixed_size(n));
        const TestTable table = test_table(science, {});
        Drawn d = draw(science, table, {0, nullptr, 300000}, c[1]);
        std::sort(d.statistic.begin(), d.statistic.end());
        const double df = 2.0 * n - 2.0;
        const double noncentrality = c[1] * std::sqrt(n / 2.0);
        CHECK(oracle::kolmogorov(d.statistic, [&](double t) { return noncentral_t_lower(t, df, noncentrality); }) <
              oracle::kolmogorov_bound);
    }
}

TEST_CASE("The known-variance statistic is normal", "[design]") {
    const Science science = science_of(Test::known_variance, fixed_size(9));
    const TestTable table = test_table(science, {});
    Drawn d = draw(science, table, {0, nullptr, 300000}, 0.5);
    std::sort(d.statistic.begin(), d.statistic.end());
    CHECK(oracle::kolmogorov(d.statistic, [](double z) { return 0.5 * std::erfc((1.5 - z) / std::sqrt(2.0)); }) <
          oracle::kolmogorov_bound);
}

TEST_CASE("Claims and estimates follow from the statistic", "[design]") {
    Science science = science_of(Test::two_means, fixed_size(10));
    for (const int sides : {1, 2}) {
        science.design.sides = sides;
        const TestTable table = test_table(science, {});
        const double critical = t_critical(18, sides == 2 ? 0.025 : 0.05);
        const Drawn d = draw(science, table, {17, nullptr, 5001}, 0.1);
        std::size_t reversed = 0;
        for (std::size_t i = 0; i < d.statistic.size(); ++i) {
            const Claim expected = d.statistic[i] > critical                  ? Claim::positive
                                   : sides == 2 && d.statistic[i] < -critical ? Claim::reversed
                                                                              : Claim::inconclusive;
            REQUIRE(Claim(d.claim[i]) == expected);
            REQUIRE(d.estimate[i] == Approx(d.statistic[i] * std::sqrt(0.2)).epsilon(1e-14));
            reversed += expected == Claim::reversed;
        }
        CHECK((reversed > 0) == (sides == 2));
    }
}

TEST_CASE("Sizes follow the exact rounded distribution (chi-squared)", "[design]") {
    const Science science = science_of(Test::two_means, lognormal_sizes());
    const TestTable table = test_table(science, {});
    const IntegerDistribution sizes = size_distribution(science.design, science.labs[0].size);
    const std::size_t count = 2'000'000;
    const Drawn d = draw(science, table, {0, nullptr, count}, 0.0);
    std::vector<double> seen(sizes.chance.size(), 0.0);
    for (const std::uint32_t row : d.row) seen[row] += 1.0;
    double statistic = 0.0;
    double cells = 0.0;
    double rest_seen = 0.0;
    double rest_expected = 0.0;
    for (std::size_t i = 0; i < seen.size(); ++i) {
        const double expected = sizes.chance[i] * static_cast<double>(count);
        if (expected < 10.0) {  // pooled, so that the approximation holds
            rest_seen += seen[i];
            rest_expected += expected;
            continue;
        }
        statistic += (seen[i] - expected) * (seen[i] - expected) / expected;
        cells += 1.0;
    }
    if (rest_expected > 0.0) {
        statistic += (rest_seen - rest_expected) * (rest_seen - rest_expected) / rest_expected;
        cells += 1.0;
    }
    // Mean cells - 1, variance twice that: four standard errors.
    CHECK(std::fabs(statistic - (cells - 1)) < 4 * std::sqrt(2 * (cells - 1)));
}

TEST_CASE("A study's draw depends on nothing but its address", "[design]") {
    for (const Test test : {Test::two_means, Test::known_variance, Test::one_mean, Test::correlation, Test::several_means,
                            Test::two_proportions}) {
        const Science science = science_of(test, lognormal_sizes());
        const TestTable table = test_table(science, {});
        const Drawn all = draw(science, table, {0, nullptr, 3000}, 0.2);
        for (const std::uint64_t first : {1u, 16u, 37u, 64u}) {
            const Drawn part = draw(science, table, {first, nullptr, 777}, 0.2);
            for (std::size_t i = 0; i < 777; ++i) {
                REQUIRE(part.row[i] == all.row[first + i]);
                REQUIRE(part.statistic[i] == all.statistic[first + i]);
                REQUIRE(part.estimate[i] == all.estimate[first + i]);
            }
        }
        std::vector<std::uint32_t> offsets;
        for (std::uint32_t i = 0; i < 500; ++i) offsets.push_back(i * 1237 % 2990);
        const Drawn scattered = draw(science, table, {10, offsets.data(), offsets.size()}, 0.2);
        for (std::size_t i = 0; i < offsets.size(); ++i) {
            REQUIRE(scattered.row[i] == all.row[10 + offsets[i]]);
            REQUIRE(scattered.statistic[i] == all.statistic[10 + offsets[i]]);
            REQUIRE(scattered.claim[i] == all.claim[10 + offsets[i]]);
        }
    }
}

TEST_CASE("All vector targets draw the same studies to rounding, with every design", "[design]") {
    const auto with = [](Test test, auto change) {
        Science science = science_of(test, lognormal_sizes());
        change(science.design);
        return science;
    };
    const auto nothing = [](Design&) {};
    const std::vector<Science> sciences{
        with(Test::two_means, nothing),
        with(Test::two_means, [](Design& d) { d.welch = true; d.equivalence.bound = 0.6; d.allocation = 1.5; }),
        with(Test::paired_means, [](Design& d) { d.equivalence.bound = 0.5; }),
        with(Test::known_variance, nothing),
        with(Test::correlation, nothing),
        with(Test::several_means, [](Design& d) { d.groups = 4; }),
        with(Test::several_means, [](Design& d) { d.groups = 5; }),
        with(Test::two_proportions, [](Design& d) { d.base_rate = 0.35; }),
        with(Test::two_means, [](Design& d) { d.looks.count = 2; })};
    for (const Science& science : sciences) {
        INFO("test " << int(science.design.test) << " groups " << science.design.groups);
        const TestTable table = test_table(science, {});
        const Drawn best = draw(science, table, {0, nullptr, 20000}, 0.3);
        for (const std::int64_t target : hwy::SupportedAndGeneratedTargets()) {
            hwy::SetSupportedTargetsForTest(target);
            const Drawn other = draw(science, table, {0, nullptr, 20000}, 0.3);
            hwy::SetSupportedTargetsForTest(0);
            CHECK(other.row == best.row);
            CHECK(other.claim == best.claim);
            for (std::size_t i = 0; i < best.statistic.size(); ++i) {
                REQUIRE(other.statistic[i] == Approx(best.statistic[i]).epsilon(1e-11).margin(1e-12));
                REQUIRE(other.estimate[i] == Approx(best.estimate[i]).epsilon(1e-11).margin(1e-12));
            }
        }
    }
}

TEST_CASE("Levels count the cuts that p is below", "[design]") {
    const Science science = science_of(Test::two_means, fixed_size(10));
    const TestTable table = test_table(science, {{0.01, 2}, {0.05, 2}, {0.3, 2}, {0.025, 1}, {0.6, 1}});
    const Drawn d = draw(science, table, {0, nullptr, 4000}, 0.4);
    std::vector<std::uint8_t> two(4000), one(4000);
    count_cuts(table, {0, 1, 2}, 2, 4000, d.row.data(), d.statistic.data(), nullptr, two.data());
    count_cuts(table, {3, 4}, 1, 4000, d.row.data(), d.statistic.data(), nullptr, one.data());
    for (std::size_t i = 0; i < 4000; ++i) {
        const double upper = noncentral_t_upper(d.statistic[i], 18, 0);
        const double p = 2 * noncentral_t_upper(std::fabs(d.statistic[i]), 18, 0);
        REQUIRE(two[i] == (p < 0.01) + (p < 0.05) + (p < 0.3));
        REQUIRE(one[i] == (upper < 0.025) + (upper < 0.6));
    }
}

TEST_CASE("Statistics drawn from their joint distribution match participants drawn one by one", "[design]") {
    // Two-sample Kolmogorov-Smirnov, 200,000 studies each.
    for (const std::uint32_t n : {2u, 6u, 30u}) {
        INFO("n " << n);
        const Science science = science_of(Test::two_means, fixed_size(n));
        const TestTable table = test_table(science, {});
        const std::size_t count = 200000;
        Drawn drawn = draw(science, table, {0, nullptr, count}, 0.4);
        std::vector<double> plain_t, plain_d;
        std::mt19937_64 generator(11);
        for (std::size_t i = 0; i < count; ++i) {
            const oracle::PlainStudy study = oracle::plain_two_means(generator, n, 0.4);
            plain_t.push_back(study.t);
            plain_d.push_back(study.d);
        }
        const auto distance = [&](std::vector<double> a, std::vector<double> b) {
            std::sort(a.begin(), a.end());
            std::sort(b.begin(), b.end());
            double worst = 0.0;
            for (std::size_t i = 0, j = 0; i < a.size() && j < b.size();) {
                (a[i] <= b[j] ? i : j) += 1;
                worst = std::max(
                    worst, std::fabs(static_cast<double>(i) - static_cast<double>(j)) / static_cast<double>(count));
            }
            return worst * std::sqrt(static_cast<double>(count) / 2.0);
        };
        CHECK(distance(drawn.statistic, plain_t) < oracle::kolmogorov_bound);
        CHECK(distance(drawn.estimate, plain_d) < oracle::kolmogorov_bound);
    }
}

TEST_CASE("The largest uniforms pick a row of their own kind", "[design]") {
    for (std::uint32_t rows = 1; rows < 3000; ++rows) {
        // Two kinds; columns keep all of their chance, so the row is the column, and what stands behind the
        // first kind's rows would show.
        TestTable table;
        table.keep.assign(2 * rows, 1.0);
        table.other_row.assign(2 * rows, 7777777);
        table.kinds = {{0, rows, {}, false}, {rows, rows, {}, false}};
        for (const double u : {1.0 - 0x1p-53, 1.0 - 0x1p-52, 1.0 - 0x1p-32}) {
            REQUIRE(pick_row(table, table.kinds[0], u) == rows - 1);
            REQUIRE(pick_row(table, table.kinds[1], u) == 2 * rows - 1);
        }
        // An end that has been rounded to: past the column's whole, so to the alias, which is a row too.
        table.other_row.assign(2 * rows, rows - 1);
        REQUIRE(pick_row(table, table.kinds[0], 1.0) == rows - 1);
    }
    const TestTable table = test_table(science_of(Test::two_means, lognormal_sizes()), {});
    CHECK(pick_row(table, table.kinds[0], 1.0) < table.n1.size());
    CHECK(pick_row(table, table.kinds[0], 0.0) < table.n1.size());
}

TEST_CASE("The variance of small studies is chi-squared (Boost.Math), in 400 cells of four million draws",
          "[design]") {
    // An effect so large that the sampling error vanishes beside it leaves statistic = noncentrality /
    // sqrt(variance), to 1e-8.
    const double effect = 1e9;
    const std::size_t count = 4'000'000;
    for (const std::uint32_t n : {2u, 3u, 4u}) {
        const Science science = science_of(Test::two_means, fixed_size(n));
        const TestTable table = test_table(science, {});
        const Drawn d = draw(science, table, {0, nullptr, count}, effect);
        const boost::math::chi_squared law(2.0 * n - 2.0);
        // 200 cells of equal chance, the outer two of them cut into 100 each.
        std::vector<double> chance;
        for (int i = 1; i < 100; ++i) chance.push_back(i * 5e-5);
        for (int i = 1; i < 200; ++i) chance.push_back(i * 5e-3);
        for (int i = 1; i < 100; ++i) chance.push_back(0.995 + i * 5e-5);
        std::vector<double> edges;
        for (const double p : chance) edges.push_back(boost::math::quantile(law, p));
        std::vector<double> seen(edges.size() + 1, 0.0);
        for (const double t : d.statistic) {
            const double ratio = effect * std::sqrt(n / 2.0) / t;
            const double x = (2.0 * n - 2.0) * ratio * ratio;
            seen[static_cast<std::size_t>(std::upper_bound(edges.begin(), edges.end(), x) - edges.begin())] += 1.0;
        }
        double statistic = 0.0;
        for (std::size_t i = 0; i < seen.size(); ++i) {
            const double expected = static_cast<double>(count) *
                                    ((i < chance.size() ? chance[i] : 1.0) - (i > 0 ? chance[i - 1] : 0.0));
            statistic += (seen[i] - expected) * (seen[i] - expected) / expected;
        }
        INFO("n " << n << ", chi-squared " << statistic << " on " << seen.size() - 1);
        CHECK(statistic < boost::math::quantile(complement(
                              boost::math::chi_squared(static_cast<double>(seen.size() - 1)), 1e-4 / 3)));
    }
}
