#include "sim/design/known_variance.h"

#include <cmath>
#include <limits>

namespace lacuna::known_variance {

TestPlan plan(StudySize size) {
    const double n = size.n1;
    const double infinite = std::numeric_limits<double>::infinity();
    return {size, n, infinite, std::sqrt(n), 1.0, infinite};
}

double standard_error(const TestPlan& plan) { return 1.0 / plan.noncentrality; }

}  // namespace lacuna::known_variance
