// Simulated literatures against closed forms and published values, through the config and the engine.
#include <filesystem>
#include <fmt/format.h>

#include <catch2/catch.hpp>
#include <cmath>

#include "sim/stats/student_t.h"
#include "sim/theory/theory.h"
#include "tests/oracle/reference_csv.h"
#include "tests/oracle/run_scenario.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;
using oracle::bound_in_standard_errors;
using oracle::number;

namespace {

/// A field of one-study questions, 50 literatures.
std::string one_study_field(std::uint64_t studies, const std::string& field, const std::string& design,
                            const std::string& rest) {
    const std::uint64_t each = studies / 50;
    return fmt::format(
        "[run]\nseed = 77\nliteratures = 50\n[field]\nquestions = {0}\nlabs = 1\n{1}\n[design]\n{2}\n"
        "[[lab]]\nname = \"lab\"\nlines = {0}\n{3}\n",
        each, field, design, rest);
}

/// The effect at which a two-sided z test of one observation has this power.
double effect_of_power(double power, double alpha) {
    const double c = t_critical(infinity, 0.5 * alpha);
    const auto chance = [c](double d) {
        return 0.5 * std::erfc((c - d) / std::sqrt(2.0)) + 0.5 * std::erfc((c + d) / std::sqrt(2.0));
    };
    double low = 0.0;
    double high = 20.0;
    while (high - low > 1e-13) (chance(0.5 * (low + high)) < power ? low : high) = 0.5 * (low + high);
    return 0.5 * (low + high);
}

}  // namespace

TEST_CASE("False discovery rate from true rate, alpha and power: Ioannidis (2005), no bias, every row",
          "[validation]") {
    const auto table = oracle::read_reference("ppv_bias_grid.csv");
    std::size_t rows = 0;
    for (const auto& row : table.rows) {
        if (number(row, "u") != 0.0) continue;
        ++rows;
        const double alpha = number(row, "alpha");
        const auto simulated = oracle::simulate_text(one_study_field(
            2'000'000,
            fmt::format("true_rate = {}\neffect = {}", number(row, "prior"),
                        effect_of_power(number(row, "power"), alpha)),
            fmt::format("test = \"known-variance\"\nalpha = {}\nsize = {{ plan = \"fixed\", n = 1 }}", alpha), ""));
        INFO("power " << row.at("power") << " alpha " << row.at("alpha") << " R " << row.at("R"));
        // More than 100 checks in this file: five standard errors.
        CHECK(std::fabs(simulated.z("false_discovery_rate", Scope::conducted, number(row, "fdr"))) < 5);
        CHECK(std::fabs(simulated.z("power", Scope::conducted, number(row, "p_claim_true"))) < 5);
        CHECK(std::fabs(simulated.z("type1_error", Scope::conducted, number(row, "p_claim_null"))) < 5);
    }
    CHECK(rows > 50);
}

TEST_CASE("Published literatures of true and null effects: all closed forms of the reference table",
          "[validation]") {
    const auto table = oracle::read_reference("literature_closed_form.csv");
    REQUIRE(table.rows.size() == 384);
    for (const auto& row : table.rows) {
        const double alpha = number(row, "alpha");
        const double w_ns = number(row, "w_ns");
        const double w_neg = number(row, "w_neg");
        // One-sided p below alpha/2: published; above 1 - alpha/2: w_neg; between: w_ns.
        const auto simulated = oracle::simulate_text(one_study_field(
            1'000'000, fmt::format("true_rate = {}\neffect = {}", number(row, "pi1"), number(row, "d")),
            fmt::format("alpha = {}\nsize = {{ plan = \"fixed\", n = {} }}", alpha, row.at("n")),
            fmt::format("[[journal]]\nname = \"j\"\naccept = {{ by = \"p\", sides = 1, steps = [{}, {}], chance = "
                        "[1.0, {}, {}] }}",
                        alpha / 2, 1 - alpha / 2, w_ns, w_neg)));
        INFO("n " << row.at("n") << " d " << row.at("d") << " pi1 " << row.at("pi1") << " alpha " << row.at("alpha")
                  << " w_ns " << row.at("w_ns") << " w_neg " << row.at("w_neg"));
        const auto agrees = [&](const char* metric, Scope scope, double expected) {
            const Estimate e = simulated.estimate(metric, scope);
            REQUIRE(e.value.has_value());
            // A rate that cannot vary (all published are findings) has no error and must be exact.
            if (e.mcse.value() == 0.0) {
                CHECK(*e.value == Approx(expected).margin(1e-12));
            } else {
                CHECK(std::fabs(*e.value - expected) < 5 * *e.mcse);
            }
        };
        agrees("power", Scope::conducted, number(row, "power"));
        agrees("publication_rate", Scope::published, number(row, "p_publish"));
        agrees("positive_share", Scope::published, number(row, "frac_sig"));
        agrees("effect_inflation_reports", Scope::published, number(row, "inflation_true"));
        // Rare findings: with fewer than about 50 of a kind the ratio's error is not normal yet.
        if (1e6 * number(row, "pi1") * number(row, "power") < 500) continue;
        agrees("false_discovery_rate", Scope::published, number(row, "fdr_sig"));
        agrees("effect_inflation", Scope::published, number(row, "inflation_true_sig"));
    }
}

TEST_CASE("Gelman & Carlin (2014): type S and type M of underpowered designs, through the engine", "[validation]") {
    const auto table = oracle::read_reference("selection_published.csv");
    REQUIRE(table.rows.size() == 4);
    for (const auto& row : table.rows) {
        const double d = number(row, "D") / number(row, "SE");
        const auto simulated = oracle::simulate_text(
            one_study_field(20'000'000, fmt::format("true_rate = 1.0\neffect = {}", d),
                            "test = \"known-variance\"\nalpha = 0.05\nsize = { plan = \"fixed\", n = 1 }", ""));
        INFO("D " << row.at("D") << " SE " << row.at("SE"));
        CHECK(std::fabs(simulated.z("power", Scope::conducted, number(row, "power_here"))) <
              bound_in_standard_errors);
        CHECK(std::fabs(simulated.z("wrong_sign_rate", Scope::conducted, number(row, "typeS_here"))) <
              bound_in_standard_errors);
        CHECK(std::fabs(simulated.z("exaggeration_ratio", Scope::conducted, number(row, "exagg_here"))) <
              bound_in_standard_errors);
        // The published, rounded values: type S to its two digits.
        CHECK(simulated.estimate("wrong_sign_rate", Scope::conducted).value.value() ==
              Approx(number(row, "typeS_published")).margin(0.01));
    }
}

TEST_CASE("published-rates.toml: 10^8 studies agree with the quadrature over sizes", "[validation]") {
    const Scenario scenario = load_scenario(std::string(LACUNA_CONFIGS) + "/published-rates.toml", {});
    const oracle::Simulated simulated(scenario);
    REQUIRE(simulated.outcome.studies == 100'000'000);
    const Theory theory = expectations(scenario.regimes[0]);
    std::size_t checked = 0;
    for (const ExpectedValue& expected : theory.values) {
        for (std::size_t s = 0; s < scope_names.size(); ++s) {
            if (expected.scope != scope_names[s] || expected.scope == "written") continue;
            const Estimate e = simulated.estimate(expected.metric, Scope(s));
            INFO(expected.metric << " " << expected.scope << " " << *e.value << " " << expected.value << " "
                                 << *e.mcse);
            CHECK(std::fabs(*e.value - expected.value) <= bound_in_standard_errors * *e.mcse);
            ++checked;
        }
    }
    CHECK(checked >= 15);
    // The baseline script printed 0.16114 and 1.80850 at 10^7 studies, with standard errors of about
    // 0.0003 and 0.0007 (binomial; spread of the estimates): the same field.
    CHECK(simulated.estimate("false_discovery_rate", Scope::published).value.value() ==
          Approx(0.16114).margin(4 * 0.0003));
    CHECK(simulated.estimate("effect_inflation", Scope::published).value.value() ==
          Approx(1.80850).margin(4 * 0.0007));
}

TEST_CASE("Mixed scenarios: simulation against the quadrature, which shares no code with the chain", "[validation]") {
    // Drawn at random over designs, sides, findings, units, line rules, journals, lab kinds, distributions.
    std::size_t checks = 0;
    double squares = 0.0;
    for (const auto& file : std::filesystem::directory_iterator(std::string(LACUNA_REFERENCE) + "/../validation/mixed")) {
        const Scenario scenario = load_scenario(file.path().string(), {});
        const Theory theory = expectations(scenario.regimes[0]);
        REQUIRE(theory.unavailable.empty());
        const oracle::Simulated simulated(scenario);
        for (const ExpectedValue& expected : theory.values) {
            if (expected.scope == "written") continue;
            const Scope scope = expected.scope == "published" ? Scope::published : Scope::conducted;
            const Estimate e = simulated.estimate(expected.metric, scope);
            if (!e.value || !e.mcse || *e.mcse == 0.0) continue;
            const double z = (*e.value - expected.value) / *e.mcse;
            INFO(file.path().filename() << " " << expected.metric << " " << expected.scope << ": " << *e.value
                                        << " against " << expected.value);
            CHECK(std::fabs(z) < 5);  // more than 100 checks
            ++checks;
            squares += z * z;
        }
    }
    CHECK(checks > 300);
    // Errors are neither too small nor too large: the mean square is 1, and even if each scenario's metrics
    // all moved together its standard error would be below sqrt(2 / 13) = 0.4.
    CHECK(std::fabs(squares / static_cast<double>(checks) - 1.0) < 4 * 0.4);
    CHECK(squares / static_cast<double>(checks) > 0.5);
}
