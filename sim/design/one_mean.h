// One group of observations, or the differences of pairs: Student's one-sample t; effects are means in units
// of the (differences') standard deviation.
#pragma once

#include "sim/design/test_plan.h"

namespace lacuna::one_mean {

inline constexpr std::uint32_t smallest_n = 3;  // with one fewer Cohen's d has no mean

/// df = n - 1, noncentrality = d sqrt(n), J(df) exact (Hedges 1981, Journal of Educational Statistics 6:107).
/// The critical value is left at infinity.
TestPlan plan(StudySize size);

/// Standard error of d: sqrt(1 / m^2 + d^2 / (2 n)), m the noncentrality per unit of d: the large-sample
/// variance of a standardised mean (common practice; Hedges & Olkin 1985 have the two-group form).
double standard_error(const TestPlan& plan, double d);

}  // namespace lacuna::one_mean
