// From expected totals to the estimands.
#pragma once

#include <array>

#include "sim/theory/study_law.h"
#include "sim/theory/theory.h"

namespace lacuna {

/// Expected totals of studies by truth of their question and by claim. Estimates are oriented by the
/// sign of the question's effect.
struct Total {
    Sums sums;
    double abs_effect = 0.0;
};

struct ScopeTotals {
    std::array<std::array<Total, 4>, 3> studies{};       // [truth][claim]
    std::array<std::array<double, 3>, 2> manuscripts{};  // [real][class]
    std::array<double, 2> established{};                 // [real]: questions with a finding in the scope
};

/// All metrics of all scopes whose denominator is not zero. `of_questions`: whether `established` counts
/// questions, as it does when no question has two lines.
std::vector<ExpectedValue> metrics(const std::array<ScopeTotals, 3>& totals, Findings findings, bool of_questions);

}  // namespace lacuna
