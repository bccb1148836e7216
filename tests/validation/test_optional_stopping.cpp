// Optional stopping through the engine: the recursion of Armitage, McPherson & Rowe (1969) where the variance is
// known, and simulated t tests (reference/optional_stopping_t_mc.csv, with Simmons, Nelson & Simonsohn 2011, Figure 2).
#include <fmt/format.h>

#include <catch2/catch.hpp>
#include <cmath>

#include "tests/oracle/recorded_run.h"
#include "tests/oracle/reference_csv.h"
#include "tests/oracle/run_scenario.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;
using oracle::number;

namespace {

/// 50 literatures of as many one-study lines as questions, all of them stopping when they find.
oracle::Simulated stopping(const char* test, double alpha, double effect, double start, double batch, double limit,
                           std::uint64_t each) {
    return oracle::simulate_text(fmt::format(R"(
[run]
seed = 12
literatures = 50
[field]
questions = {0}
labs = 1
true_rate = {1}
effect = {2}
[design]
test = "{3}"
alpha = {4}
size = {{ plan = "fixed", n = 20 }}
[[lab]]
name = "stopping"
lines = {0}
[lab.practices]
optional_stopping = {{ chance = 1.0, start = {5}, batch = {6}, limit = {7} }}
)",
                                             each, effect == 0.0 ? 0.0 : 1.0, effect == 0.0 ? 0.5 : effect, test, alpha,
                                             start, batch, limit));
}

}  // namespace

TEST_CASE("Looks at a constant level with known variance: every row of the recursion, up to 1000 looks", "[validation]") {
    int rows = 0;
    for (const auto& row : oracle::read_reference("repeated_looks_type1.csv").rows) {
        const double k = number(row, "k");
        ++rows;
        const auto simulated = stopping("known-variance", number(row, "alpha"), 0.0, 1, 1, k, k > 100 ? 1000 : 5000);
        INFO("looks " << k << " alpha " << row.at("alpha"));
        CHECK(std::fabs(simulated.z("type1_error", Scope::conducted, number(row, "type1"))) < 4);
    }
    CHECK(rows == 93);
    for (const auto& row : oracle::read_reference("optional_stopping_z.csv").rows) {
        const auto simulated = stopping("known-variance", number(row, "alpha"), 0.0, number(row, "n0"), number(row, "step"),
                                        number(row, "n_last"), 10000);
        INFO("start " << row.at("n0") << " batch " << row.at("step"));
        CHECK(std::fabs(simulated.z("type1_error", Scope::conducted, number(row, "type1"))) < 4);
    }
}

TEST_CASE("Looks at two means by t tests: rates, sizes and effects of the reference simulation", "[validation]") {
    int rows = 0;
    for (const auto& row : oracle::read_reference("optional_stopping_t_mc.csv").rows) {
        const std::string& looks = row.at("look_sizes");
        const double n0 = number(row, "n0"), step = number(row, "step"), count = number(row, "n_looks");
        const double last = std::stod(looks.substr(looks.find_last_of(" :") + 1));
        if (last != n0 + step * (count - 1)) continue;  // a last look out of step: checked below
        ++rows;
        const double d = number(row, "d");
        const auto simulated = stopping("two-means", number(row, "alpha"), d, n0, step, last, 8000);
        INFO("start " << n0 << " batch " << step << " limit " << last << " d " << d << " alpha " << row.at("alpha"));
        const auto agrees = [&](const char* metric, double expected, double mcse) {
            const Estimate e = simulated.estimate(metric, Scope::conducted);
            // The reference's own error, from its standard deviations where it gives none.
            CHECK(std::fabs(*e.value - expected) < 4 * std::hypot(*e.mcse, mcse));
        };
        agrees("positive_share", number(row, "p_sig"), number(row, "p_sig_mcse"));
        // Participants of both groups, of 8000 studies; the reference's error is below 45 / sqrt(n_sim) a group.
        agrees("participants", 16000.0 * number(row, "mean_n"), 16000.0 * 20.0 / std::sqrt(number(row, "n_sim")));
        if (d > 0.0) agrees("effect_bias_reports", number(row, "mean_d_all") - d, number(row, "mean_d_all_mcse"));
    }
    CHECK(rows > 40);
    // Simmons, Nelson & Simonsohn (2011), Figure 2: start 20, batches of 20, at most 50: the last look is at 50.
    const auto capped = stopping("two-means", 0.05, 0.0, 20, 20, 50, 20000);
    for (const auto& row : oracle::read_reference("optional_stopping_t_mc.csv").rows) {
        if (row.at("look_sizes") != "20 40 50" || number(row, "alpha") != 0.05 || number(row, "d") != 0.0) continue;
        CHECK(std::fabs(*capped.estimate("type1_error", Scope::conducted).value - number(row, "p_sig")) <
              4 * std::hypot(*capped.estimate("type1_error", Scope::conducted).mcse, number(row, "p_sig_mcse")));
        ++rows;
    }
    CHECK(rows > 41);
}

TEST_CASE("Some labs stop, some studies of theirs do, in batches of their planned size", "[validation]") {
    const Scenario scenario = parse_scenario(R"(
[run]
literatures = 2
[field]
questions = 4000
labs = 40
true_rate = 0.3
effect = 0.4
[design]
size = { plan = "distribution", family = "uniform", low = 10, high = 20 }
[[lab]]
name = "patient"
share = 0.5
lines = 100
[[lab]]
name = "stopping"
share = 0.5
lines = 100
studies = { rule = "fixed", count = 2 }
[lab.practices]
optional_stopping = { chance = 0.3, relative = true, start = 0.5, batch = 0.25, limit = 2 }
[store]
detail = "studies"
)",
                                             "t", {});
    const oracle::Recorded all = oracle::run(scenario, 1);
    CHECK(same(all, oracle::run(scenario, 7)));
    const auto& stopped = oracle::column<std::uint8_t>(scenario, all, "studies", "optional_stopping");
    const auto& looks = oracle::column<std::int32_t>(scenario, all, "studies", "looks");
    const auto& n1 = oracle::column<std::int32_t>(scenario, all, "studies", "n1");
    const auto& claim = oracle::column<std::uint8_t>(scenario, all, "studies", "claim");
    const auto& lab = oracle::column<std::int32_t>(scenario, all, "studies", "lab");
    const auto& literature = oracle::column<std::int32_t>(scenario, all, "studies", "literature");
    const auto& kind = oracle::column<std::uint8_t>(scenario, all, "labs", "kind");
    double of_kind = 0.0, chosen = 0.0;
    for (std::size_t s = 0; s < stopped.size(); ++s) {
        const bool may = kind[static_cast<std::size_t>(literature[s] * 40 + lab[s])] == 1;
        of_kind += may;
        chosen += stopped[s];
        if (!stopped[s]) {
            REQUIRE((looks[s] == 1 && n1[s] >= 10 && n1[s] <= 20));
            continue;
        }
        REQUIRE(may);
        REQUIRE((looks[s] >= 1 && looks[s] <= 7));  // 0.5, 0.75, ..., 2
        if (looks[s] < 7) REQUIRE(claim[s] != 0);   // it stopped because it found
        const double planned = n1[s] / (0.25 + 0.25 * looks[s]);
        REQUIRE((planned > 8.5 && planned < 21.5));  // to rounding
    }
    CHECK(std::fabs(oracle::z_score(chosen / of_kind, 0.3, oracle::share_error(0.3, of_kind))) < 4);
    // The other studies are those of the field without the practice, to the last bit.
    Scenario clean = scenario;
    clean.regimes[0].science.labs[1].practices = {};
    const oracle::Recorded before = oracle::run(clean, 2);
    const auto& estimate = oracle::column<double>(scenario, all, "studies", "estimate");
    const auto& clean_estimate = oracle::column<double>(clean, before, "studies", "estimate");
    REQUIRE(estimate.size() == clean_estimate.size());
    for (std::size_t s = 0; s < stopped.size(); ++s) {
        if (!stopped[s]) REQUIRE(estimate[s] == clean_estimate[s]);
    }
}

TEST_CASE("A study that may stop keeps to its own draws, whichever others are run so", "[validation]") {
    // With known variance one look of the planned size is the study without the practice, to rounding.
    for (const char* test : {"known-variance", "two-means", "one-mean"}) {
        INFO(test);
        Scenario scenario = parse_scenario(fmt::format(R"(
[run]
literatures = 2
[field]
questions = 1000
labs = 10
heterogeneity = 0.1
[design]
test = "{}"
size = {{ plan = "fixed", n = 9 }}
[[lab]]
name = "a"
lines = 100
[lab.practices]
optional_stopping = {{ chance = 0.5, start = 9, batch = 1, limit = 9 }}
[store]
detail = "studies"
)",
                                                       test),
                                           "t", {});
        const oracle::Recorded bent = oracle::run(scenario);
        const auto statistic = oracle::column<double>(scenario, bent, "studies", "statistic");
        const auto stopped = oracle::column<std::uint8_t>(scenario, bent, "studies", "optional_stopping");
        scenario.regimes[0].science.labs[0].practices = {};
        const oracle::Recorded clean = oracle::run(scenario);
        const auto& expected = oracle::column<double>(scenario, clean, "studies", "statistic");
        for (std::size_t s = 0; s < statistic.size(); ++s) {
            if (std::string(test) == "known-variance" || !stopped[s]) REQUIRE(statistic[s] == Approx(expected[s]).epsilon(1e-12).margin(1e-12));
        }
    }
}
