#include "sim/design/one_mean.h"

#include <cmath>
#include <limits>

#include "sim/stats/student_t.h"

namespace lacuna::one_mean {

TestPlan plan(StudySize size) {
    const double n = size.n1;
    return {size, n, n - 1.0, std::sqrt(n), small_sample_correction(n - 1.0), std::numeric_limits<double>::infinity()};
}

double standard_error(const TestPlan& plan, double d) {
    return std::sqrt(1.0 / (plan.noncentrality * plan.noncentrality) + d * d / (2.0 * plan.participants));
}

}  // namespace lacuna::one_mean
