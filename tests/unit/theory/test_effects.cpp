// Distributions of effects, heterogeneity, lab kinds, and what cannot be answered.
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/stats/normal.h"
#include "sim/theory/study_law.h"
#include "tests/unit/theory/regimes.h"

using namespace lacuna;

namespace {

Distribution normal(double mean, double sd) {
    Distribution d;
    d.family = Family::normal;
    d.first = mean;
    d.second = sd;
    return d;
}

/// P(N(mean, variance) > c).
double above(double c, double mean, double variance) { return normal_lower((mean - c) / std::sqrt(variance)); }

}  // namespace

TEST_CASE("With known variance, normal effects and deviations add up to a normal statistic", "[theory]") {
    // Z = sqrt(n) (effect + deviation) + error: variance 1 + n (sd^2 + tau^2).
    const double c = normal_critical(0.025);
    for (const std::uint32_t n : {1u, 9u, 400u, 250000u}) {
        for (const double sd : {0.01, 0.2, 3.0}) {
            for (const double tau : {0.0, 0.1}) {
                INFO("n " << n << " sd " << sd << " tau " << tau);
                Regime regime = one_study_regime(Test::known_variance, n, 0.0, 1.0, 0.05, 2);
                regime.science.field.effect = normal(0.3, sd);
                regime.science.field.heterogeneity = tau;
                const double shift = 0.3 * std::sqrt(n), variance = 1.0 + n * (sd * sd + tau * tau);
                const double power = above(c, shift, variance) + above(c, -shift, variance);
                CHECK(value_of(expectations(regime), "power", "conducted").value() == Approx(power).epsilon(1e-10));
            }
        }
    }
}

TEST_CASE("Uniform effects of very unequal studies: the mean of a chance over its noncentrality", "[theory]") {
    // Integral of Phi(l x - c) over x in (-2, 2), one-sided: [u Phi(u) + phi(u)] / l at u = +-2 l - c.
    Regime regime = one_study_regime(Test::known_variance, 1, 0.0, 1.0, 0.001, 1);
    regime.science.field.effect.family = Family::uniform;
    regime.science.field.effect.first = -2.0;
    regime.science.field.effect.second = 2.0;
    SizePlan& size = regime.science.labs[0].size;
    size.kind = SizePlan::Kind::distribution;
    size.distribution.family = Family::discrete;
    size.distribution.values = {1.0, 50.0, 4000.0};
    size.distribution.weights = {1.0, 2.0, 1.0};
    const double c = normal_critical(0.001);
    const auto integral = [&](double n) {
        const double l = std::sqrt(n);
        const auto at = [](double u) { return u * normal_lower(u) + normal_density(u); };
        return (at(2.0 * l - c) - at(-2.0 * l - c)) / (4.0 * l);
    };
    size.distribution.weights = {1.0, 0.0, 0.0};
    CHECK(value_of(expectations(regime), "power", "conducted").value() == Approx(integral(1.0)).epsilon(1e-10));
    size.distribution.weights = {0.0, 1.0, 0.0};
    CHECK(value_of(expectations(regime), "power", "conducted").value() == Approx(integral(50.0)).epsilon(1e-10));
    size.distribution.values = {2.0, 50.0, 80.0};
    size.distribution.weights = {1.0, 2.0, 1.0};
    const double mixed = 0.25 * integral(2.0) + 0.5 * integral(50.0) + 0.25 * integral(80.0);
    CHECK(value_of(expectations(regime), "power", "conducted").value() == Approx(mixed).epsilon(1e-10));
    size.distribution.values = {1.0, 50.0, 4000.0};
    const double unequal = 0.25 * integral(1.0) + 0.5 * integral(50.0) + 0.25 * integral(4000.0);
    CHECK(value_of(expectations(regime), "power", "conducted").value() == Approx(unequal).epsilon(1e-10));
}

TEST_CASE("Heterogeneity of t studies is an average over their true effects", "[theory]") {
    Regime regime = one_study_regime(Test::two_means, 14, 0.4, 1.0, 0.05, 2);
    const StudyLaw homogeneous(regime.science, regime.science.labs[0], {0.01}, {});
    Sums averaged;
    for (const Node& theta : quadrature(normal(0.4, 0.3))) {
        for (const Cell& cell : homogeneous.cells(theta.x)) {
            if (cell.claim == Claim::positive && cell.level_two == 1) averaged.add(cell.sums, theta.weight);
        }
    }
    regime.science.field.heterogeneity = 0.3;
    const StudyLaw heterogeneous(regime.science, regime.science.labs[0], {0.01}, {});
    bool seen = false;
    double total = 0.0;
    for (const Cell& cell : heterogeneous.cells(0.4)) {
        total += cell.sums.studies;
        if (cell.claim != Claim::positive || cell.level_two != 1) continue;
        seen = true;
        CHECK(cell.sums.studies == Approx(averaged.studies).epsilon(1e-10));
        CHECK(cell.sums.estimate == Approx(averaged.estimate).epsilon(1e-10));
        CHECK(cell.sums.abs_estimate == Approx(averaged.abs_estimate).epsilon(1e-10));
    }
    CHECK(seen);
    CHECK(total == Approx(1.0).epsilon(1e-12));
}

TEST_CASE("Negligible effects count as null", "[theory]") {
    // Effects N(0, 1), |effect| <= 0.5 null; Z = effect + error; one-sided at c: P(Z > c and |effect| <= 0.5)
    // over P(Z > c), by quadrature over the error.
    Regime regime = one_study_regime(Test::known_variance, 1, 0.0, 1.0, 0.05, 1);
    regime.science.field.effect = normal(0.0, 1.0);
    regime.science.field.negligible = 0.5;
    const double c = normal_critical(0.05);
    double null = 0.0;
    for (const Node& error : quadrature(normal(0.0, 1.0), 400, {c - 0.5, c + 0.5})) {
        null += error.weight * normal_between(std::max(-0.5, c - error.x), 0.5);
    }
    const Theory theory = expectations(regime);
    CHECK(value_of(theory, "false_discovery_rate", "conducted").value() ==
          Approx(null / above(c, 0.0, 2.0)).epsilon(1e-10));
    // Real effects of either sign: a positive finding about a negative one has the wrong sign.
    CHECK(value_of(theory, "wrong_sign_rate", "conducted").value() > 0.01);
}

TEST_CASE("Effects of either sign are oriented", "[theory]") {
    Regime plus = one_study_regime(Test::two_means, 20, 0.5, 0.4, 0.05, 2);
    Regime minus = plus;
    minus.science.field.effect = Distribution::fixed(-0.5);
    const Theory up = expectations(plus), down = expectations(minus);
    REQUIRE(up.values.size() == down.values.size());
    for (std::size_t i = 0; i < up.values.size(); ++i) {
        INFO(up.values[i].metric << ' ' << up.values[i].scope);
        CHECK(down.values[i].value == Approx(up.values[i].value).epsilon(1e-12));
    }
    // Findings of predicted direction only are all wrong when the effect is negative.
    minus.science.design.findings = Findings::predicted;
    CHECK(value_of(expectations(minus), "wrong_sign_rate", "conducted").value() == Approx(1.0));
}

TEST_CASE("Lab kinds weigh by share, lines and studies", "[theory]") {
    Regime regime = one_study_regime(Test::two_means, 10, 0.5, 0.4, 0.05, 2);
    const double small = value_of(expectations(regime), "power", "conducted").value();
    regime.science.labs[0].size.n = 80;
    const double large = value_of(expectations(regime), "power", "conducted").value();
    regime.science.labs.push_back(regime.science.labs[0]);
    regime.science.labs[0].size.n = 10;
    regime.science.labs[0].share = 0.75;
    regime.science.labs[0].studies.count = 2;
    regime.science.labs[1].share = 0.25;
    regime.science.labs[1].lines = Distribution::fixed(3.6);  // rounds to 4
    // 0.75 * 1 line * 2 studies against 0.25 * 4 lines * 1 study.
    CHECK(value_of(expectations(regime), "power", "conducted").value() ==
          Approx((1.5 * small + 1.0 * large) / 2.5).epsilon(1e-12));
}

TEST_CASE("Manuscripts and questions where studies are all three", "[theory]") {
    Regime regime = one_study_regime(Test::two_means, 20, 0.5, 0.3, 0.05, 2);
    regime.rules.writing.null = 0.3;
    for (const char* scope : {"conducted", "published"}) {
        const Theory theory = expectations(regime);
        const double of_studies = value_of(theory, "false_discovery_rate", scope).value();
        CHECK(value_of(theory, "false_discovery_rate_manuscripts", scope).value() ==
              Approx(of_studies).epsilon(1e-14));
        CHECK(value_of(theory, "false_discovery_rate_questions", scope).value() ==
              Approx(of_studies).epsilon(1e-14));
    }
    // Three studies a line: a null question is established with chance 1 - .95^3.
    regime.science.labs[0].studies.count = 3;
    const double power = value_of(expectations(regime), "power", "conducted").value();
    const double null = 0.7 * (1.0 - std::pow(0.95, 3)), real = 0.3 * (1.0 - std::pow(1.0 - power, 3));
    CHECK(value_of(expectations(regime), "false_discovery_rate_questions", "conducted").value() ==
          Approx(null / (null + real)).epsilon(1e-11));
    // 100 labs with 10 lines fill 1000 questions; one line more, and some question has two.
    regime.science.labs[0].lines = Distribution::fixed(10.0);
    CHECK(value_of(expectations(regime), "false_discovery_rate_questions", "conducted").has_value());
    regime.science.field.questions = 999;
    CHECK_FALSE(value_of(expectations(regime), "false_discovery_rate_questions", "conducted").has_value());
}

TEST_CASE("g is d times its correction", "[theory]") {
    Regime regime = one_study_regime(Test::two_means, 2, 0.8, 1.0, 0.05, 2);
    const auto all_reports = [&] {
        return value_of(expectations(regime), "effect_inflation_reports", "conducted").value();
    };
    // E[d] = delta / J(2), J(2) = 1 / sqrt(pi).
    CHECK(all_reports() == Approx(std::sqrt(M_PI)).epsilon(1e-12));
    regime.science.design.estimate = EffectEstimate::g;
    CHECK(all_reports() == Approx(1.0).epsilon(1e-12));
}

TEST_CASE("Empty denominators leave a metric out", "[theory]") {
    Regime regime = one_study_regime(Test::two_means, 20, 0.5, 0.0, 0.05, 2);
    CHECK_FALSE(value_of(expectations(regime), "power", "conducted").has_value());
    CHECK_FALSE(value_of(expectations(regime), "effect_inflation", "conducted").has_value());
    CHECK(value_of(expectations(regime), "false_discovery_rate", "conducted").value() == 1.0);
    regime.rules.journals.resize(1);
    regime.rules.journals[0].accept = {Acceptance::Kind::by_class, 0.0, 0.0, 0.0, {}, {}, 2};
    CHECK_FALSE(value_of(expectations(regime), "false_discovery_rate", "published").has_value());
    CHECK(value_of(expectations(regime), "missing_share", "published").value() == 1.0);
    regime.science.labs[0].lines = Distribution::fixed(0.0);
    CHECK(expectations(regime).values.empty());
}

TEST_CASE("What would take too long says so", "[theory]") {
    Regime regime = one_study_regime(Test::two_means, 20, 0.5, 0.5, 0.05, 2);
    regime.science.labs[0].studies.count = 5000;
    CHECK(expectations(regime).unavailable.find("1000 studies") != std::string::npos);
    CHECK(expectations(regime).values.empty());
}
