#include "sim/design/two_means.h"

#include <cmath>
#include <limits>

#include "sim/stats/student_t.h"

namespace lacuna::two_means {

namespace {

/// 1 / n1 + 1 / n2: the squared standard error of a mean difference in units of sigma.
double inverse_sizes(StudySize size) {
    const double n1 = size.n1, n2 = size.n2;
    return (n1 + n2) / (n1 * n2);
}

}  // namespace

TestPlan plan(StudySize size) {
    const double participants = static_cast<double>(size.n1) + static_cast<double>(size.n2);
    const double df = participants - 2.0;
    return {size,
            participants,
            df,
            1.0 / std::sqrt(inverse_sizes(size)),
            small_sample_correction(df),
            std::numeric_limits<double>::infinity()};
}

double standard_error(const TestPlan& plan, double d) {
    return std::sqrt(1.0 / (plan.noncentrality * plan.noncentrality) + d * d / (2.0 * plan.participants));
}

}  // namespace lacuna::two_means
