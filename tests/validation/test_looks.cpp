// Interim looks: the level that all looks keep together, ten million studies for each boundary, and studies with
// looks against participants drawn one by one.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <random>

#include "sim/design/design.h"
#include "sim/design/looks.h"
#include "sim/design/sampling.h"
#include "sim/stats/student_t.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;

namespace {

struct Result {
    double positive = 0, reversed = 0, inconclusive = 0, participants = 0;
    std::vector<double> estimate;
};

Result simulated(const Design& design, double effect, std::size_t studies, bool keep = false) {
    Science science;
    science.design = design;
    science.labs = {LabKind{}};
    science.labs[0].size = design.size;
    const TestTable table = test_table(science, {});
    constexpr std::size_t block = 8192;
    const std::size_t room = block + 16;
    std::vector<std::uint32_t> row(room);
    std::vector<double> theta(room, effect), statistic(room), estimate(room);
    std::vector<std::uint8_t> claim(room);
    SamplingScratch scratch;
    Result result;
    for (std::size_t first = 0; first < studies; first += block) {
        const std::size_t count = std::min(block, studies - first);
        const StudyRound round{{77}, 1, 0, {first, nullptr, count}};
        draw_sizes(round, table, nullptr, nullptr, scratch, row.data());
        draw_studies(round, design, table, scratch, {row.data(), theta.data(), statistic.data(), estimate.data(), claim.data()});
        for (std::size_t i = 0; i < count; ++i) {
            result.positive += claim[i] == std::uint8_t(Claim::positive);
            result.reversed += claim[i] == std::uint8_t(Claim::reversed);
            result.inconclusive += claim[i] == std::uint8_t(Claim::inconclusive);
            result.participants += table.participants[row[i]];
        }
        if (keep) result.estimate.insert(result.estimate.end(), estimate.begin(), estimate.begin() + std::ptrdiff_t(count));
    }
    return result;
}

Design with_looks(Test test, Looks::Boundary boundary, std::uint32_t looks, int sides, std::uint32_t n) {
    Design design;
    design.test = test;
    design.sides = sides;
    design.looks.count = looks;
    design.looks.boundary = boundary;
    design.size.n = n;
    return design;
}

}  // namespace

TEST_CASE("Every boundary keeps its level: 10^7 studies each, known variance", "[validation]") {
    const double studies = 1e7;
    for (const auto boundary : {Looks::Boundary::pocock, Looks::Boundary::obrien_fleming, Looks::Boundary::spending_pocock,
                                Looks::Boundary::spending_obrien_fleming}) {
        for (const auto& [looks, sides] : {std::pair{2u, 2}, std::pair{5u, 1}, std::pair{10u, 2}}) {
            INFO("boundary " << int(boundary) << " looks " << looks << " sides " << sides);
            const Result result = simulated(with_looks(Test::known_variance, boundary, looks, sides, 2 * looks), 0.0, std::size_t(studies));
            const double significant = (result.positive + result.reversed) / studies;
            CHECK(std::fabs(oracle::z_score(significant, 0.05, oracle::share_error(0.05, studies))) < 4);
        }
    }
}

TEST_CASE("Power with looks and stops for futility is the recursion's, known variance", "[validation]") {
    const double studies = 2e6;
    for (const double futility : {-infinity, 0.5}) {
        Design design = with_looks(Test::known_variance, Looks::Boundary::obrien_fleming, 4, 2, 20);
        design.looks.futility = futility;
        const Tails expected = tails(design, describe(design, 20), 0.5);
        const Result result = simulated(design, 0.5, std::size_t(studies));
        CHECK(std::fabs(oracle::z_score(result.positive / studies, expected.predicted, oracle::share_error(expected.predicted, studies))) < 4);
        CHECK(std::fabs(oracle::z_score(result.reversed / studies, expected.reversed, oracle::share_error(expected.reversed, studies))) < 5);
    }
}

TEST_CASE("Two means with looks against participants: claims, sizes and estimates", "[validation]") {
    const std::size_t studies = 100000;
    // Looks at 4, 9 and 13 of the first group; a second one so small that it has nobody new at a look.
    const double allocation = GENERATE(1.5, 0.2);
    Design design = with_looks(Test::two_means, Looks::Boundary::pocock, 3, 2, 13);
    design.looks.futility = 0.3;
    design.allocation = allocation;
    const double effect = 0.6;
    const Result fast = simulated(design, effect, studies, true);
    const LookPlans looks(design);
    std::mt19937_64 generator(9);
    std::normal_distribution<double> normal;
    Result slow;
    for (std::size_t study = 0; study < studies; ++study) {
        std::vector<double> a, b;
        for (std::uint32_t k = 0; k < 3; ++k) {
            const TestPlan plan = looks.plan(13, k);
            while (a.size() < plan.size.n1) a.push_back(effect + normal(generator));
            while (b.size() < plan.size.n2) b.push_back(normal(generator));
            const auto mean = [](const std::vector<double>& x) {
                double sum = 0.0;
                for (const double value : x) sum += value;
                return sum / double(x.size());
            };
            const double ma = mean(a), mb = mean(b);
            double squares = 0.0;
            for (const double x : a) squares += (x - ma) * (x - ma);
            for (const double x : b) squares += (x - mb) * (x - mb);
            const double d = (ma - mb) / std::sqrt(squares / (double(a.size() + b.size()) - 2.0));
            const double t = d / std::sqrt(1.0 / double(a.size()) + 1.0 / double(b.size()));
            const double level = 2.0 * noncentral_t_upper(std::fabs(t), plan.df, 0.0);
            // Pocock, three looks: 2.2895 on the z scale (Pocock 1977), as a nominal level; futility 0.3 likewise.
            const bool significant = level <= std::erfc(2.289429 / std::sqrt(2.0));
            const bool futile = level > std::erfc(0.3 / std::sqrt(2.0));
            if (!significant && !futile && k < 2) continue;
            slow.positive += significant && t > 0;
            slow.reversed += significant && t < 0;
            slow.participants += double(a.size() + b.size());
            slow.estimate.push_back(d);
            break;
        }
    }
    const auto same_share = [&](double x, double y) {
        const double p = (x + y) / (2.0 * double(studies));
        return std::fabs(x - y) / double(studies) < 4 * std::sqrt(2 * p * (1 - p) / double(studies));
    };
    CHECK(same_share(fast.positive, slow.positive));
    CHECK(same_share(fast.reversed, slow.reversed));
    CHECK(std::fabs(fast.participants - slow.participants) / double(studies) < 4 * 12.0 * std::sqrt(2 / double(studies)));
    std::vector<double> x = fast.estimate, y = slow.estimate;
    std::sort(x.begin(), x.end());
    std::sort(y.begin(), y.end());
    double worst = 0.0;
    for (std::size_t i = 0, j = 0; i < studies && j < studies;) {
        (x[i] <= y[j] ? i : j) += 1;
        worst = std::max(worst, std::fabs(double(i) - double(j)) / double(studies));
    }
    CHECK(worst * std::sqrt(double(studies) / 2.0) < oracle::kolmogorov_bound);
}
