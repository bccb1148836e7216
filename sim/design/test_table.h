// Everything the sampling of a study needs that depends on its size alone, one row per possible size,
// as columns for the vector kernels. Rows of several lab kinds stand one after the other; rows of looks
// at the data stand behind them all.
#pragma once

#include <cstddef>
#include <cstdint>
#include <optional>
#include <vector>

#include "sim/design/plan_table.h"
#include "sim/design/test_plan.h"
#include "sim/design/welch.h"
#include "sim/model/scenario.h"

namespace lacuna {

/// A step of a p rule: p < `p`, of the two-sided test or of the one in the predicted direction.
struct Cut {
    double p;
    int sides;
    bool operator==(const Cut&) const = default;
};

/// Scaled chi-squared variates by Marsaglia & Tsang (sim/variate/gamma.h): per_cube (1 + c x)^3 of an accepted
/// normal x. On one degree of freedom c is negative and the variate is x^2; on none both are 0.
struct ChiColumns {
    std::vector<double> c, per_cube;

    /// Adds a row: a chi-squared of `df` degrees of freedom (a whole number), over `divisor`.
    void add(double df, double divisor);
};

/// The looks of each size (by its row): `count` rows from `first` on, in order. Their chi-squared is that of
/// the look's new observations.
struct LookRows {
    std::vector<std::uint32_t> first, count;
    bool empty() const { return first.empty(); }
};

struct TestTable {
    // One entry per row.
    std::vector<std::uint32_t> n1, n2;      // n2 = 0 for designs with one group
    std::vector<std::uint32_t> participants;
    std::vector<double> df;                 // infinity where the variance is known
    std::vector<double> noncentrality;      // per unit of effect
    std::vector<double> to_estimate;        // reported estimate = statistic * to_estimate, in designs of one or two means; sqrt(F) * to_estimate
    std::vector<double> correction;         // small-sample correction J
    std::vector<double> critical;           // significant: statistic > critical (or < -critical, two-sided)
    std::vector<double> equivalence_critical;  // of a one-sided test of equivalence; what it bounds, the design knows
    std::vector<double> df_effect;          // of an F statistic's numerator
    std::vector<double> size1, size2;       // n1 and n2, for vector code
    ChiColumns variance;                    // of the sample, over the true one
    ChiColumns other;                       // see sim/design/studies.h
    std::vector<std::vector<double>> cut_critical;  // [cut][row]: critical value of a p rule's step

    // Of Welch's test: critical values as functions of its degrees of freedom.
    CriticalCurve curve, equivalence_curve;
    std::vector<CriticalCurve> cut_curves;  // per cut

    // Rows of looks stand behind the sizes; `futility` of such a row is the bound of |T| or T below which the
    // look stops the study.
    std::vector<double> futility;
    LookRows looks;                        // of designs with interim looks
    std::vector<LookRows> unplanned_looks;  // of kinds with optional stopping; empty for others

    // Sizes by the alias method (sim/variate/alias.h): each kind has `sizes` rows from `first_row`
    // on; of its column that stands at `row`, `keep` stays there and the rest goes to row `other_row`.
    std::vector<double> keep;
    std::vector<std::uint64_t> other_row;
    struct Kind {
        std::uint32_t first_row = 0;
        std::uint32_t sizes = 0;
        std::optional<PlanTable> plan;    // of studies planned for each question: position to row
        bool in_planned_effects = false;  // effects are in units of the effect that is planned for
    };
    std::vector<Kind> kinds;

    /// What describes the study in `row` (the design's own sizes and bounds, as a plan).
    TestPlan plan(std::size_t row) const;
};

/// The table of a science, with critical values for `cuts` (each at most once).
TestTable test_table(const Science& science, const std::vector<Cut>& cuts);

}  // namespace lacuna
