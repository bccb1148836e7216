// Standard errors of ratios and of paired differences.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <fstream>
#include <map>
#include <random>
#include <sstream>
#include <utility>

#include "tests/unit/estimand/row_builder.h"

using namespace lacuna;

namespace {

using Rows = std::vector<std::vector<double>>;  // per regime: (a, b)

Accumulator accumulate(const std::vector<Rows>& literatures) {
    Accumulator accumulator(std::vector<Estimands>(literatures.front().size(), first_two_columns()));
    for (const Rows& rows : literatures) accumulator.add(rows);
    return accumulator;
}

/// Lines of a CSV file without its comments and header.
std::vector<std::vector<std::string>> read_csv(const std::string& name) {
    std::ifstream file(std::string(LACUNA_REFERENCE) + "/" + name);
    REQUIRE(file);
    std::vector<std::vector<std::string>> rows;
    std::string line;
    bool header = true;
    while (std::getline(file, line)) {
        if (line.empty() || line[0] == '#') continue;
        if (std::exchange(header, false)) continue;
        std::vector<std::string> fields;
        std::stringstream parts(line);
        for (std::string field; std::getline(parts, field, ',');) fields.push_back(field);
        rows.push_back(fields);
    }
    return rows;
}

/// Literatures with a random number b of studies and a of events; regime 1 keeps part of the events.
std::vector<Rows> random_literatures(unsigned seed, int count, double rate, double rate_two) {
    std::mt19937_64 random(seed);
    std::vector<Rows> literatures;
    for (int i = 0; i < count; ++i) {
        const int studies = std::poisson_distribution<int>(120)(random);
        const int events = std::binomial_distribution<int>(studies, rate)(random);
        const int kept = std::binomial_distribution<int>(events, rate_two / rate)(random);
        literatures.push_back({{double(events), double(studies)}, {double(kept), double(studies)}});
    }
    return literatures;
}

}  // namespace

TEST_CASE("ratio and paired difference of three literatures (values by NumPy from the definitions)",
          "[accumulator]") {
    const Accumulator all = accumulate({{{3, 10}, {4, 8}}, {{5, 12}, {5, 10}}, {{2, 9}, {1, 9}}});
    const Result ratio = all.results()[0];
    CHECK(*ratio.estimate.value == Approx(0.3225806451612903).epsilon(1e-14));
    CHECK(*ratio.estimate.mcse == Approx(0.05781558536145307).epsilon(1e-12));
    const PairedDifference difference = all.differences()[0];
    CHECK(*difference.estimate.value == Approx(0.047789725209080036).epsilon(1e-12));
    CHECK(*difference.estimate.mcse == Approx(0.0908589918200641).epsilon(1e-12));
    CHECK(difference.estimate.n == 3);
}

TEST_CASE("means and rates over literatures: Morris, White & Crowther (2019), Table 6", "[accumulator]") {
    std::map<std::string, std::pair<double, double>> worked;
    for (const auto& row : read_csv("mcse_worked.csv")) {
        if (row.size() >= 4 && row[0].size() == 1) worked[row[0] + row[1]] = {std::stod(row[2]), std::stod(row[3])};
    }
    std::vector<Rows> bias, coverage;
    for (const auto& row : read_csv("mcse_sample.csv")) {
        Rows errors, covered;
        for (std::size_t column : {1u, 3u}) {
            const double error = std::stod(row[column]) - 0.5;
            errors.push_back({error, 1.0});
            covered.push_back({std::fabs(error) <= 1.959964 * std::stod(row[column + 1]) ? 1.0 : 0.0, 1.0});
        }
        bias.push_back(errors);
        coverage.push_back(covered);
    }
    REQUIRE(bias.size() == 200);
    const auto bias_results = accumulate(bias).results(), coverage_results = accumulate(coverage).results();
    for (std::size_t method : {0u, 1u}) {
        const std::string name = method == 0 ? "A" : "B";
        CHECK(*bias_results[method].estimate.value == Approx(worked[name + "bias"].first).epsilon(1e-9));
        CHECK(*bias_results[method].estimate.mcse == Approx(worked[name + "bias"].second).epsilon(1e-10));
        CHECK(*coverage_results[method].estimate.value == Approx(worked[name + "coverage"].first).epsilon(1e-12));
        // The table divides a proportion's variance by n, ours, as for any mean, by n - 1.
        CHECK(*coverage_results[method].estimate.mcse * std::sqrt(199.0 / 200.0) ==
              Approx(worked[name + "coverage"].second).epsilon(1e-10));
    }
}

TEST_CASE("the standard errors agree with the jackknife", "[accumulator]") {
    const auto literatures = random_literatures(7, 400, 0.3, 0.2);
    const Accumulator all = accumulate(literatures);
    double a[2] = {}, b[2] = {};
    for (const Rows& rows : literatures) {
        for (int r = 0; r < 2; ++r) a[r] += rows[r][0], b[r] += rows[r][1];
    }
    const auto n = static_cast<double>(literatures.size());
    double sum = 0, square = 0, sum_d = 0, square_d = 0;
    for (const Rows& rows : literatures) {
        const double r0 = (a[0] - rows[0][0]) / (b[0] - rows[0][1]);
        const double d = (a[1] - rows[1][0]) / (b[1] - rows[1][1]) - r0;
        sum += r0, square += r0 * r0, sum_d += d, square_d += d * d;
    }
    const double jackknife = std::sqrt((n - 1) / n * (square - sum * sum / n));
    const double jackknife_d = std::sqrt((n - 1) / n * (square_d - sum_d * sum_d / n));
    // Linearisation and jackknife differ by terms of order 1/n (Cochran 1977, section 6.17).
    CHECK(*all.results()[0].estimate.mcse == Approx(jackknife).epsilon(4 / n));
    CHECK(*all.differences()[0].estimate.mcse == Approx(jackknife_d).epsilon(4 / n));
}

TEST_CASE("calibration: z-scores of ratio and difference have mean 0 and SD 1 over 2000 seeds", "[accumulator]") {
    constexpr int seeds = 2000;
    double sum[2] = {}, square[2] = {};
    for (unsigned seed = 0; seed < seeds; ++seed) {
        // Events at rate .3, kept with chance 2/3: the true rates are .3 and .2.
        const Accumulator all = accumulate(random_literatures(1000 + seed, 200, 0.3, 0.2));
        const Estimate ratio = all.results()[0].estimate, difference = all.differences()[0].estimate;
        const double z[2] = {(*ratio.value - 0.3) / *ratio.mcse, (*difference.value + 0.1) / *difference.mcse};
        for (int i = 0; i < 2; ++i) sum[i] += z[i], square[i] += z[i] * z[i];
    }
    for (int i = 0; i < 2; ++i) {
        INFO(i);
        const double mean = sum[i] / seeds, sd = std::sqrt(square[i] / seeds - mean * mean);
        // Standard errors: 1/sqrt(seeds) of the mean, 1/sqrt(2 seeds) of the SD; with 200 literatures t
        // on 199 df has SD 1.005, a tenth of the bound.
        CHECK(std::fabs(mean) < 4 / std::sqrt(double(seeds)));
        CHECK(std::fabs(sd - 1) < 4 / std::sqrt(2.0 * seeds));
    }
}

TEST_CASE("identical regimes differ by exactly 0 with an error of exactly 0", "[accumulator]") {
    std::mt19937_64 random(3);
    std::uniform_real_distribution<double> uniform(0.1, 90.0);
    std::vector<Rows> literatures;
    for (int i = 0; i < 777; ++i) {
        const std::vector<double> row{uniform(random), uniform(random) * 1e3};
        literatures.push_back({row, row, {row[0] + 1, row[1]}});
    }
    const auto differences = accumulate(literatures).differences();
    CHECK(*differences[0].estimate.value == 0.0);
    CHECK(*differences[0].estimate.mcse == 0.0);
    CHECK(differences[0].spread->p05 == 0.0);
    CHECK(differences[0].spread->p95 == 0.0);
    CHECK(*differences[1].estimate.value > 0.0);
    CHECK(*differences[1].estimate.mcse > 0.0);
}

TEST_CASE("a large common level does not wash out the standard error", "[accumulator]") {
    // Mean of 1e9 + (0, 1, ..., 99): SD of 0..99 is sqrt(100 * 101 / 12), so the error is a tenth of it.
    std::vector<Rows> literatures;
    for (int i = 0; i < 100; ++i) literatures.push_back({{1e9 + i, 1.0}});
    CHECK(*accumulate(literatures).results()[0].estimate.mcse ==
          Approx(std::sqrt(100.0 * 101.0 / 12.0) / 10.0).epsilon(1e-9));
}

TEST_CASE("one literature: a value without a standard error or spread", "[accumulator]") {
    const Accumulator all = accumulate({{{3, 10}, {4, 8}}});
    CHECK(*all.results()[0].estimate.value == 0.3);
    CHECK(!all.results()[0].estimate.mcse);
    CHECK(!all.results()[0].spread);
    CHECK(*all.differences()[0].estimate.value == Approx(0.2).epsilon(1e-14));
    CHECK(!all.differences()[0].estimate.mcse);
}

TEST_CASE("literatures with an empty denominator do not enter", "[accumulator]") {
    // The mean of 1, 2 and 6 with its error sqrt(7 / 3), whatever stands between them.
    const Accumulator all = accumulate({{{0, 0}}, {{1, 1}}, {{0, 0}}, {{2, 1}}, {{6, 1}}, {{0, 0}}, {{0, 0}}});
    CHECK(*all.results()[0].estimate.value == 3.0);
    CHECK(*all.results()[0].estimate.mcse == Approx(std::sqrt(7.0 / 3.0)).epsilon(1e-14));
    CHECK(all.results()[0].estimate.n == 3);
    CHECK(all.literatures() == 7);
    const Accumulator lone = accumulate({{{0, 0}}, {{1, 4}}, {{0, 0}}});
    CHECK(*lone.results()[0].estimate.value == 0.25);
    CHECK(!lone.results()[0].estimate.mcse);
    const Accumulator none = accumulate({{{0, 0}, {1, 2}}, {{0, 0}, {1, 2}}});
    CHECK(!none.results()[0].estimate.value);
    CHECK(!none.differences()[0].estimate.value);
}

TEST_CASE("counts give the same value in any order of literatures, errors the same to rounding", "[accumulator]") {
    auto literatures = random_literatures(11, 500, 0.3, 0.2);
    const Accumulator forward = accumulate(literatures);
    std::reverse(literatures.begin(), literatures.end());
    const Accumulator backward = accumulate(literatures);
    CHECK(*forward.results()[0].estimate.value == *backward.results()[0].estimate.value);
    CHECK(*forward.results()[0].estimate.mcse == Approx(*backward.results()[0].estimate.mcse).epsilon(1e-12));
    CHECK(forward.results()[0].spread->p95 == backward.results()[0].spread->p95);
}

TEST_CASE("quantiles over literatures are NumPy's default (type 7)", "[spread]") {
    const auto spread = spread_of({0.3, 0.1, std::nan(""), 0.25, 0.6, 0.45});
    REQUIRE(spread);
    CHECK(spread->p05 == Approx(0.13).epsilon(1e-14));
    CHECK(spread->p25 == Approx(0.25).epsilon(1e-14));
    CHECK(spread->p50 == Approx(0.3).epsilon(1e-14));
    CHECK(spread->p75 == Approx(0.45).epsilon(1e-14));
    CHECK(spread->p95 == Approx(0.57).epsilon(1e-14));
    CHECK(!spread_of({std::nan("")}));
}

TEST_CASE("the spread keeps all literatures up to its limit and then every 2^k-th", "[spread]") {
    SpreadSample sample;
    for (std::size_t i = 0; i < SpreadSample::most; ++i) sample.add(static_cast<double>(i));
    CHECK(sample.values().size() == SpreadSample::most);
    for (std::size_t i = SpreadSample::most; i < 5 * SpreadSample::most; ++i) sample.add(static_cast<double>(i));
    CHECK(sample.values().size() == 5 * SpreadSample::most / 8);
    for (std::size_t i = 0; i < sample.values().size(); ++i) REQUIRE(sample.values()[i] == 8.0 * double(i));
}
