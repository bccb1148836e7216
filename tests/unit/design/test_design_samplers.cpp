// Every design's sampler against participants drawn one by one, 10^6 studies each: statistic and estimate by
// the two-sample Kolmogorov-Smirnov distance, claims by their shares.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/design/design.h"
#include "sim/design/sampling.h"
#include "sim/stats/student_t.h"
#include "tests/oracle/plain_designs.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;

namespace {

constexpr std::size_t studies = 1'000'000;

struct Columns {
    std::vector<double> statistic, estimate, df;
    std::vector<std::uint8_t> claim;
    double share(Claim which) const {
        return static_cast<double>(std::count(claim.begin(), claim.end(), std::uint8_t(which))) /
               static_cast<double>(claim.size());
    }
};

Columns sampled(const Design& design, double effect) {
    Science science;
    science.design = design;
    LabKind kind;
    kind.size = design.size;
    science.labs = {kind};
    const TestTable table = test_table(science, {});
    const std::size_t room = studies + 16;
    std::vector<std::uint32_t> row(room);
    std::vector<double> theta(room, effect), error(room);
    Columns columns{std::vector<double>(room), std::vector<double>(room), std::vector<double>(room),
                    std::vector<std::uint8_t>(room)};
    SamplingScratch scratch;
    const StudyRound round{{2026}, 3, 0, {0, nullptr, studies}};
    draw_sizes(round, table, nullptr, nullptr, scratch, row.data());
    draw_studies(round, design, table, scratch,
                 {row.data(), theta.data(), columns.statistic.data(), columns.estimate.data(), columns.claim.data(),
                  columns.df.data(), error.data()});
    columns.statistic.resize(studies);
    columns.estimate.resize(studies);
    columns.df.resize(studies);
    columns.claim.resize(studies);
    return columns;
}

double distance(std::vector<double> a, std::vector<double> b) {
    std::sort(a.begin(), a.end());
    std::sort(b.begin(), b.end());
    double worst = 0.0;
    for (std::size_t i = 0, j = 0; i < a.size() && j < b.size();) {
        const double x = std::min(a[i], b[j]);
        while (i < a.size() && a[i] == x) ++i;
        while (j < b.size() && b[j] == x) ++j;
        worst = std::max(worst, std::fabs(static_cast<double>(i) / static_cast<double>(a.size()) -
                                          static_cast<double>(j) / static_cast<double>(b.size())));
    }
    return worst * std::sqrt(static_cast<double>(studies) / 2.0);
}

/// Compares a sampler with a plain study, drawn as often.
template <class Plain>
Columns compare(const Design& design, double effect, Plain plain) {
    const Columns fast = sampled(design, effect);
    Columns slow;
    std::mt19937_64 generator(7);
    for (std::size_t i = 0; i < studies; ++i) {
        const oracle::PlainResult study = plain(generator);
        slow.statistic.push_back(study.statistic);
        slow.estimate.push_back(study.estimate);
        slow.df.push_back(study.df);
    }
    CHECK(distance(fast.statistic, slow.statistic) < oracle::kolmogorov_bound);
    CHECK(distance(fast.estimate, slow.estimate) < oracle::kolmogorov_bound);
    if (design.welch) {
        CHECK(distance(fast.df, slow.df) < oracle::kolmogorov_bound);
        // Jointly: products would differ if the columns went together otherwise.
        const auto product = [](Columns c) {
            for (std::size_t i = 0; i < studies; ++i) c.statistic[i] *= c.df[i];
            return c.statistic;
        };
        CHECK(distance(product(fast), product(slow)) < oracle::kolmogorov_bound);
    }
    return fast;
}

Design design_of(Test test, std::uint32_t n) {
    Design design;
    design.test = test;
    design.size.n = n;
    return design;
}

void check_power(const Design& design, double effect, const Columns& drawn) {
    const Tails expected = tails(design, describe(design, design.size.n), effect);
    const auto z = [](double seen, double p) {
        return std::fabs(oracle::z_score(seen, p, oracle::share_error(p, double(studies))));
    };
    CHECK(z(drawn.share(Claim::positive), expected.predicted) < 4);
    if (expected.reversed > 1e-6) CHECK(z(drawn.share(Claim::reversed), expected.reversed) < 4);
}

}  // namespace

TEST_CASE("Two means of unequal sizes against participants", "[design]") {
    Design design = design_of(Test::two_means, 4);
    design.allocation = 2.0;
    const Columns drawn = compare(design, 0.7, [](auto& g) { return oracle::plain_pooled(g, 4, 8, 0.7); });
    check_power(design, 0.7, drawn);
}

TEST_CASE("One mean and paired means against participants", "[design]") {
    for (const Test test : {Test::one_mean, Test::paired_means}) {
        const Design design = design_of(test, 5);
        const Columns drawn = compare(design, -0.4, [](auto& g) { return oracle::plain_one_mean(g, 5, -0.4); });
        check_power(design, -0.4, drawn);
    }
}

TEST_CASE("Welch's test against participants", "[design]") {
    Design design = design_of(Test::two_means, 4);
    design.welch = true;
    design.allocation = 2.5;
    const Columns drawn = compare(design, 0.6, [](auto& g) { return oracle::plain_welch(g, 4, 10, 0.6); });
    check_power(design, 0.6, drawn);
}

TEST_CASE("The correlation coefficient against bivariate normal pairs", "[design]") {
    for (const double rho : {0.0, 0.5, -0.8}) {
        for (const std::uint32_t n : {4u, 9u}) {
            INFO("rho " << rho << " n " << n);
            const Design design = design_of(Test::correlation, n);
            const Columns drawn =
                compare(design, rho, [&](auto& g) { return oracle::plain_correlation(g, n, rho); });
            check_power(design, rho, drawn);
        }
    }
}

TEST_CASE("Several means against participants", "[design]") {
    for (const std::uint32_t groups : {2u, 3u, 4u, 5u}) {
        INFO("groups " << groups);
        Design design = design_of(Test::several_means, 4);
        design.groups = groups;
        const Columns drawn = compare(
            design, 0.4, [&](auto& g) { return oracle::plain_several_means(g, groups, 4, 0.4); });
        check_power(design, 0.4, drawn);
    }
}

TEST_CASE("Two proportions: every pair of counts as often as the binomials say", "[design]") {
    Design design = design_of(Test::two_proportions, 7);
    design.allocation = 1.5;
    design.base_rate = 0.3;
    const Columns drawn = sampled(design, 0.9);
    check_power(design, 0.9, drawn);
    // The log odds ratio is a sum over both groups, so its distribution over all 8 * 12 pairs is exact.
    const double treated = 1.0 / (1.0 + std::exp(-(std::log(0.3 / 0.7) + 0.9)));
    const auto pmf = [](int x, int n, double p) {
        return std::exp(std::lgamma(n + 1.0) - std::lgamma(x + 1.0) - std::lgamma(n - x + 1.0) + x * std::log(p) +
                        (n - x) * std::log1p(-p));
    };
    std::vector<std::pair<double, double>> exact;  // estimate, chance
    for (int x = 0; x <= 7; ++x) {
        for (int y = 0; y <= 11; ++y) {
            const double h = x == 0 || x == 7 || y == 0 || y == 11 ? 0.5 : 0.0;
            exact.emplace_back(std::log((x + h) * (11 - y + h) / ((7 - x + h) * (y + h))),
                               pmf(x, 7, treated) * pmf(y, 11, 0.3));
        }
    }
    double chi = 0.0, cells = 0.0;
    std::vector<double> sorted = drawn.estimate;
    std::sort(sorted.begin(), sorted.end());
    std::sort(exact.begin(), exact.end());
    for (std::size_t i = 0; i < exact.size();) {
        const double value = exact[i].first;
        double chance = 0.0;
        for (; i < exact.size() && exact[i].first < value + 1e-9; ++i) chance += exact[i].second;
        const auto low = std::lower_bound(sorted.begin(), sorted.end(), value - 1e-9);
        const auto high = std::upper_bound(sorted.begin(), sorted.end(), value + 1e-9);
        const double expected = chance * double(studies);
        if (expected < 10.0) continue;
        chi += std::pow(static_cast<double>(high - low) - expected, 2) / expected;
        cells += 1.0;
    }
    CHECK(cells > 40);
    CHECK(std::fabs(chi - cells) < 4 * std::sqrt(2 * cells));
}

TEST_CASE("Equivalent claims against participants", "[design]") {
    const double plain_studies = 150000.0;
    const auto share = [&](std::uint32_t seed, auto plain, auto equivalent) {
        std::mt19937_64 generator(seed);
        double count = 0.0;
        for (int i = 0; i < int(plain_studies); ++i) count += equivalent(plain(generator));
        return count / plain_studies;
    };
    Design design = design_of(Test::two_means, 20);
    design.equivalence = {0.8, 0.1};
    for (const bool welch : {false, true}) {
        design.welch = welch;
        const double seen = sampled(design, 0.1).share(Claim::equivalent);
        const double plain = share(
            5, [&](auto& g) { return welch ? oracle::plain_welch(g, 20, 20, 0.1) : oracle::plain_pooled(g, 20, 20, 0.1); },
            [&](const oracle::PlainResult& r) {
                const double c = t_critical(r.df, 0.1);
                return std::fabs(r.statistic) <= t_critical(r.df, 0.025) && (r.numerator + 0.8) / r.error > c &&
                       (r.numerator - 0.8) / r.error < -c;
            });
        CHECK(seen > 0.2);
        CHECK(std::fabs(seen - plain) < 4 * std::sqrt(seen * (1 - seen) * (1 / plain_studies + 1 / double(studies))));
    }
}

TEST_CASE("At its bound an exact equivalence test claims with its alpha", "[design]") {
    const auto z = [](double seen, double p) { return std::fabs(seen - p) / oracle::share_error(p, double(studies)); };
    Design design = design_of(Test::correlation, 300);
    design.alpha = 1e-9;  // so that the main test takes nothing away
    design.equivalence = {0.3, 0.05};
    CHECK(z(sampled(design, 0.3).share(Claim::equivalent), 0.05) < 4);
    design = design_of(Test::several_means, 15);
    design.alpha = 1e-9;
    design.equivalence = {0.3, 0.05};
    CHECK(z(sampled(design, 0.3).share(Claim::equivalent), 0.05) < 4);
    design = design_of(Test::known_variance, 40);
    design.alpha = 1e-9;
    design.equivalence = {0.5, 0.05};  // far from the other bound
    CHECK(z(sampled(design, 0.5).share(Claim::equivalent), 0.05) < 4);
}

TEST_CASE("Means and variances of statistics and estimates are the theoretical ones", "[design]") {
    const auto moments = [](const std::vector<double>& column, double mean, double variance) {
        oracle::Sample sample;
        double fourth = 0.0;
        for (const double x : column) sample.add(x);
        for (const double x : column) fourth += std::pow(x - sample.mean(), 4) / double(studies);
        CHECK(std::fabs(oracle::z_score(sample.mean(), mean, sample.standard_error())) < 4);
        const double error = std::sqrt((fourth - sample.variance() * sample.variance()) / double(studies));
        if (variance > 0.0) CHECK(std::fabs(oracle::z_score(sample.variance(), variance, error)) < 4);
    };
    // Noncentral t and F: Johnson, Kotz & Balakrishnan (1995), eqs. 31.15, 30.4.
    const auto check_t = [&](const Design& design, double effect, double df, double noncentrality) {
        const double ratio = std::exp(std::lgamma((df - 1) / 2) - std::lgamma(df / 2)) * std::sqrt(df / 2);
        const double mean = noncentrality * ratio;
        moments(sampled(design, effect).statistic, mean, df / (df - 2) * (1 + noncentrality * noncentrality) - mean * mean);
    };
    Design two = design_of(Test::two_means, 9);
    two.allocation = 2.0;
    check_t(two, 0.5, 25, 0.5 * std::sqrt(6.0));
    check_t(design_of(Test::one_mean, 14), 0.4, 13, 0.4 * std::sqrt(14.0));
    for (const std::uint32_t groups : {3u, 4u, 6u}) {
        Design design = design_of(Test::several_means, 8);
        design.groups = groups;
        const double a = groups - 1.0, b = groups * 7.0, lambda = groups * 8 * 0.09;
        const double mean = b * (a + lambda) / (a * (b - 2));
        const double variance = 2 * (b / a) * (b / a) * ((a + lambda) * (a + lambda) + (a + 2 * lambda) * (b - 2)) / ((b - 2) * (b - 2) * (b - 4));
        moments(sampled(design, 0.3).statistic, mean, variance);
    }
    // E[r] = 2 / (n - 1) (Gamma(n/2) / Gamma((n-1)/2))^2 rho 2F1(1/2, 1/2; (n+1)/2; rho^2) (the same, eq. 32.13).
    const double n = 10, rho = 0.6;
    double series = 1.0, term = 1.0;
    for (int k = 0; k < 200; ++k) {
        term *= (0.5 + k) * (0.5 + k) / ((n + 1) / 2 + k) / (k + 1) * rho * rho;
        series += term;
    }
    const double gammas = std::exp(std::lgamma(n / 2) - std::lgamma((n - 1) / 2));
    moments(sampled(design_of(Test::correlation, 10), rho).estimate, 2 / (n - 1) * gammas * gammas * rho * series, 0.0);
    moments(sampled(design_of(Test::known_variance, 7), 0.2).statistic, 0.2 * std::sqrt(7.0), 1.0);
    // Welch: the numerator over the pooled deviation is Hedges' d, whatever the test.
    Design welch = design_of(Test::two_means, 9);
    welch.welch = true;
    const double ratio = std::exp(std::lgamma(7.5) - std::lgamma(8.0)) * std::sqrt(8.0);
    moments(sampled(welch, 0.5).estimate, 0.5 * ratio, 0.0);
}
