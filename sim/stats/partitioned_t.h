// The noncentral t over a fixed partition of its range, for many noncentralities: one pass over S gives
// all parts, and what does not depend on the noncentrality is worked out once.
#pragma once

#include <vector>

#include "sim/stats/distribution.h"
#include "sim/stats/student_t.h"

namespace lacuna {

class PartitionedT {
public:
    /// `ends`: ascending, two or more; the outer two may be infinite. df > 1, or infinite.
    PartitionedT(std::vector<double> ends, double df);

    /// Of the parts (ends[i], ends[i + 1]], as noncentral_t_between gives them.
    std::vector<TruncatedT> operator()(double noncentrality) const;

private:
    std::vector<double> ends_;
    double df_;
    std::vector<Node> scales_;  // values of S and their weights; empty when they depend on noncentrality
};

}  // namespace lacuna
