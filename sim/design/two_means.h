// Two independent groups, Student's t with pooled variance; effects are standardised mean differences.
#pragma once

#include "sim/design/test_plan.h"

namespace lacuna::two_means {

inline constexpr std::uint32_t smallest_n = 2;  // per group; one fewer and Cohen's d has no mean

/// df = n1 + n2 - 2, noncentrality = d sqrt(n1 n2 / (n1 + n2)), J(df) exact (Hedges 1981, Journal of
/// Educational Statistics 6:107). The critical value is left at infinity.
TestPlan plan(StudySize size);

/// Standard error of d: sqrt(1 / m^2 + d^2 / (2 (n1 + n2))), m the noncentrality per unit of d (Hedges & Olkin 1985, Statistical
/// Methods for Meta-Analysis, ch. 5, eq. 15; cited from memory).
double standard_error(const TestPlan& plan, double d);

}  // namespace lacuna::two_means
