// One door to all study designs: what a study of size n can show, its power, and the size a power needs.
// To add a design: its pair of files, and its case in each switch of design.cpp.
#pragma once

#include <cstdint>

#include "sim/design/test_plan.h"
#include "sim/model/scenario.h"
#include "sim/stats/distribution.h"

namespace lacuna {

/// The largest n that is planned or drawn.
inline constexpr std::uint32_t largest_n = 10'000'000;

/// The smallest n with which the test can be made, and its estimate has a mean.
std::uint32_t smallest_n(Test test);

/// The critical value of a test at `alpha`: |T| > c in a two-sided test, T > c in the predicted direction
/// otherwise. Also of a step p < alpha. df is not looked at where the variance is known.
double critical_value(Test test, double df, double alpha, int sides);

/// A study of n observations (per group in two-means), tested at the design's alpha and sides.
TestPlan describe(const Design& design, std::uint32_t n);

/// Chance of a significant result, both tails in a two-sided test (Cohen 1988 tabulates it so), and of
/// one in the predicted direction. Exact, by the noncentral t.
double power(const Design& design, const TestPlan& plan, double effect);
double power_predicted(const Design& design, const TestPlan& plan, double effect);

/// Smallest n with at least this power at `effect`. Throws InputError when no n up to largest_n has it.
std::uint32_t planned_n(const Design& design, double target_power, double effect);

/// What the study reports for a value of its statistic: the design's estimate (d or g; the mean where
/// the variance is known), and its standard error (of g: J times that of d).
double reported_estimate(const Design& design, const TestPlan& plan, double statistic);
double reported_standard_error(const Design& design, const TestPlan& plan, double statistic);

/// The smallest reported estimate that is significant.
double minimal_significant_effect(const Design& design, const TestPlan& plan);

/// P(n) of a study whose size follows `size`. Throws InputError when sizes below smallest_n or above
/// largest_n have a chance, and as planned_n and rounded do.
IntegerDistribution size_distribution(const Design& design, const SizePlan& size);

}  // namespace lacuna
