// Small regimes for the tests of this folder.
#pragma once

#include <optional>
#include <string>

#include "sim/theory/theory.h"

namespace lacuna {

/// One lab kind that runs one line of one study of size n per question, everything published.
inline Regime one_study_regime(Test test, std::uint32_t n, double effect, double true_rate, double alpha,
                               int sides) {
    Regime regime;
    regime.science.field.effect = Distribution::fixed(effect);
    regime.science.field.true_rate = true_rate;
    regime.science.design.test = test;
    regime.science.design.alpha = alpha;
    regime.science.design.sides = sides;
    regime.science.labs.resize(1);
    regime.science.labs[0].size.n = n;
    return regime;
}

/// A journal that takes results by the p of the one-sided test: above the critical value, between the
/// two critical values, and below the lower one.
inline Journal by_direction(double alpha, double positive, double inconclusive, double negative) {
    Journal journal;
    journal.accept.kind = Acceptance::Kind::by_p;
    journal.accept.sides = 1;
    journal.accept.steps = {alpha / 2.0, 1.0 - alpha / 2.0};
    journal.accept.chance = {positive, inconclusive, negative};
    return journal;
}

inline std::optional<double> value_of(const Theory& theory, const std::string& metric, const std::string& scope) {
    for (const ExpectedValue& expected : theory.values) {
        if (expected.metric == metric && expected.scope == scope) return expected.value;
    }
    return std::nullopt;
}

}  // namespace lacuna
