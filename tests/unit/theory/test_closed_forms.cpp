// Theory of one-study lines against published formulas and closed forms.
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/design/design.h"
#include "sim/stats/normal.h"
#include "tests/oracle/reference_csv.h"
#include "tests/unit/theory/regimes.h"

using namespace lacuna;
using oracle::number;

TEST_CASE("Two-group literatures under a filter (reference/literature_closed_form.csv)", "[theory]") {
    for (const auto& row : oracle::read_reference("literature_closed_form.csv").rows) {
        const double d = number(row, "d"), alpha = number(row, "alpha");
        INFO("n " << row.at("n") << " d " << d << " pi1 " << row.at("pi1") << " alpha " << alpha << " w_ns "
                  << row.at("w_ns") << " w_neg " << row.at("w_neg"));
        Regime regime = one_study_regime(Test::two_means, static_cast<std::uint32_t>(number(row, "n")), d,
                                         number(row, "pi1"), alpha, 2);
        regime.rules.journals = {by_direction(alpha, 1.0, number(row, "w_ns"), number(row, "w_neg"))};
        const Theory theory = expectations(regime);
        const auto is = [&](const char* metric, const char* scope, double expected) {
            CHECK(value_of(theory, metric, scope).value() == Approx(expected).margin(1e-8).epsilon(1e-9));
        };
        is("power", "conducted", number(row, "power"));
        is("publication_rate", "published", number(row, "p_publish"));
        is("missing_share", "published", 1.0 - number(row, "p_publish"));
        is("positive_share", "published", number(row, "frac_sig"));
        is("false_discovery_rate", "published", number(row, "fdr_sig"));
        is("effect_inflation_reports", "published", number(row, "inflation_true"));
        is("effect_bias_reports", "published", number(row, "mean_d_pub_true") - d);
        is("effect_inflation", "published", number(row, "inflation_true_sig"));
        regime.science.design.findings = Findings::predicted;
        CHECK(value_of(expectations(regime), "false_discovery_rate", "published").value() ==
              Approx(number(row, "fdr_pos")).margin(1e-8).epsilon(0));
    }
}

TEST_CASE("False discovery rate by power, alpha and true rate (Ioannidis 2005; reference/ppv_bias_grid.csv)",
          "[theory]") {
    for (const auto& row : oracle::read_reference("ppv_bias_grid.csv").rows) {
        if (number(row, "u") != 0.0) continue;  // direct bias belongs to practices
        const double target = number(row, "power"), alpha = number(row, "alpha");
        INFO("power " << target << " alpha " << alpha << " R " << row.at("R"));
        // One-sided with known variance, n = 1: power = Phi(effect - z_alpha), so the effect is z_alpha + z_beta.
        const double effect = normal_critical(alpha) - normal_critical(target);
        Regime regime = one_study_regime(Test::known_variance, 1, effect, number(row, "prior"), alpha, 1);
        CHECK(value_of(expectations(regime), "false_discovery_rate", "conducted").value() ==
              Approx(number(row, "fdr")).epsilon(1e-10));
        // Two-sided, 30 per group: the effect at which the t test has this power, by bisection.
        regime = one_study_regime(Test::two_means, 30, 0.0, number(row, "prior"), alpha, 2);
        const TestPlan plan = describe(regime.science.design, 30);
        double low = 0.0, high = 3.0;
        for (int i = 0; i < 60; ++i) {
            const double middle = 0.5 * (low + high);
            (power(regime.science.design, plan, middle) < target ? low : high) = middle;
        }
        regime.science.field.effect = Distribution::fixed(high);
        const Theory theory = expectations(regime);
        CHECK(value_of(theory, "false_discovery_rate", "published").value() ==
              Approx(number(row, "fdr")).epsilon(1e-9));
        CHECK(value_of(theory, "power", "conducted").value() == Approx(target).epsilon(1e-11));
        CHECK(value_of(theory, "type1_error", "conducted").value() == Approx(alpha).epsilon(1e-11));
    }
}

TEST_CASE("A weighted filter of z values (reference/publication_filter_normal.csv)", "[theory]") {
    for (const auto& row : oracle::read_reference("publication_filter_normal.csv").rows) {
        const double theta = number(row, "theta"), alpha = number(row, "alpha");
        INFO("theta " << theta << " alpha " << alpha << " weights " << row.at("w_pos") << ' ' << row.at("w_neg")
                      << ' ' << row.at("w_ns"));
        Regime regime = one_study_regime(Test::known_variance, 1, theta, 1.0, alpha, 2);
        regime.rules.journals = {
            by_direction(alpha, number(row, "w_pos"), number(row, "w_ns"), number(row, "w_neg"))};
        const Theory theory = expectations(regime);
        const auto is = [&](const char* metric, double expected) {
            CHECK(value_of(theory, metric, "published").value() == Approx(expected).margin(1e-9).epsilon(0));
        };
        is("publication_rate", number(row, "p_publish"));
        is("positive_share", number(row, "frac_sig_published"));
        if (theta > 0.0)
            is("effect_bias_reports", number(row, "bias"));
        else
            CHECK_FALSE(value_of(theory, "effect_bias_reports", "published").has_value());
    }
}

TEST_CASE("Gelman & Carlin (2014): a true effect of 2 with standard error 8.1", "[theory]") {
    // Perspectives on Psychological Science 9:641: power .06, type S .24, type M 9.7 by simulation (exact
    // 9.537, reference/README.md).
    const Theory theory = expectations(one_study_regime(Test::known_variance, 1, 2.0 / 8.1, 1.0, 0.05, 2));
    CHECK(value_of(theory, "power", "conducted").value() == Approx(0.06).margin(0.005));
    CHECK(value_of(theory, "wrong_sign_rate", "conducted").value() == Approx(0.24).margin(0.005));
    CHECK(value_of(theory, "exaggeration_ratio", "conducted").value() == Approx(9.537).margin(0.0005));
}

TEST_CASE("The field of configs/published-rates.toml (reference/published_rates_scipy.csv)", "[theory]") {
    Regime regime = one_study_regime(Test::two_means, 0, 0.4, 0.3, 0.05, 2);
    regime.science.design.findings = Findings::predicted;
    SizePlan& size = regime.science.labs[0].size;
    size.kind = SizePlan::Kind::distribution;
    size.round_down = true;
    size.distribution.family = Family::lognormal;
    size.distribution.first = 25.0;
    size.distribution.second = 0.5;
    size.distribution.min = 8.0;
    size.distribution.max = 200.0;
    size.distribution.clamp = true;
    Journal journal;
    journal.accept.supportive = 0.95;
    journal.accept.null = 0.2;
    regime.rules.journals = {journal};
    const Theory theory = expectations(regime);
    for (const auto& row : oracle::read_reference("published_rates_scipy.csv").rows) {
        INFO(row.at("metric"));
        CHECK(value_of(theory, row.at("metric"), row.at("scope")).value() ==
              Approx(number(row, "value")).margin(1e-9).epsilon(0));
    }
}
