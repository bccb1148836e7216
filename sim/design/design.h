// One door to all study designs: what a study of size n can show, its power, and the size a power needs.
// To add a design: its pair of files, and its case in each switch of design.cpp.
#pragma once

#include <cstdint>

#include "sim/design/tails.h"
#include "sim/design/test_plan.h"
#include "sim/model/scenario.h"
#include "sim/stats/distribution.h"

namespace lacuna {

/// The largest n that is planned or drawn.
inline constexpr std::uint32_t largest_n = 10'000'000;

/// The smallest n with which the test can be made, and its estimate has a mean.
std::uint32_t smallest_n(const Design& design);

/// The same for one look at the data: smallest_n is as many times that as there are looks.
std::uint32_t smallest_at_a_look(const Design& design);

/// The critical value of a test at `alpha`: |T| > c in a two-sided test, T > c in the predicted direction
/// otherwise. Also of a step p < alpha. Welch's depends on the data: here, at the plan's degrees of freedom.
double critical_value(const Design& design, const TestPlan& plan, double alpha, int sides);

/// A study of n observations (per group; of the first group where groups differ), tested at the design's
/// alpha and sides.
TestPlan describe(const Design& design, std::uint32_t n);

/// Chance of a significant result in the predicted direction, and in the other (0 in a one-sided test).
/// Exact, by noncentral distributions or enumeration.
Tails tails(const Design& design, const TestPlan& plan, double effect);

/// Their sum, as handbooks tabulate it (Cohen 1988), and the first.
double power(const Design& design, const TestPlan& plan, double effect);
double power_predicted(const Design& design, const TestPlan& plan, double effect);

/// Smallest n with at least this power at `effect`. Throws InputError when no n up to largest_n has it.
std::uint32_t planned_n(const Design& design, double target_power, double effect);

/// The effect that a study reports for a value of its statistic (for Welch's test, where it depends on more
/// than that, with equal variances in the sample; for proportions, with the control at its base rate).
double reported_estimate(const Design& design, const TestPlan& plan, double statistic);

/// Standard error that goes with a reported estimate (of g: J times that of d).
double reported_standard_error(const Design& design, const TestPlan& plan, double estimate);

/// The estimate with the exact small-sample correction, where the design has one and does not report it.
double corrected_estimate(const Design& design, const TestPlan& plan, double estimate);

/// What the equivalence test of a study compares with: Student's (Welch's, the normal) critical value of each
/// one-sided test in designs of two groups or of means; in others the value of the statistic (|t| of a
/// correlation, F) below which the study is equivalent, by its exact distribution at the bound.
double equivalence_critical(const Design& design, const TestPlan& plan);

/// The smallest reported estimate that is significant.
double minimal_significant_effect(const Design& design, const TestPlan& plan);

/// P(n) of a study whose size follows `size`, which must not plan for each question. Throws InputError when
/// sizes below smallest_n or above largest_n have a chance, and as planned_n and rounded do.
IntegerDistribution size_distribution(const Design& design, const SizePlan& size);

}  // namespace lacuna
