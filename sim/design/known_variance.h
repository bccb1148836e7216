// One group of observations of known variance: a z test of their mean, in units of their standard
// deviation.
#pragma once

#include "sim/design/test_plan.h"

namespace lacuna::known_variance {

inline constexpr std::uint32_t smallest_n = 1;

/// noncentrality = effect sqrt(n), infinite df, no small-sample correction. The critical value is left
/// at infinity.
TestPlan plan(StudySize size);

/// 1 / sqrt(n), whatever the estimate.
double standard_error(const TestPlan& plan);

}  // namespace lacuna::known_variance
