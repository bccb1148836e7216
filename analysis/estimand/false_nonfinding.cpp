#include "analysis/estimand/families.h"

namespace lacuna {

/// false_nonfinding_rate = studies of real questions among those that find nothing / studies that
/// find nothing, over the scope's studies.
void add_false_nonfinding_rate(const Part& part, Estimands& out) {
    for (Scope scope : reported_scopes) {
        out.push_back({"false_nonfinding_rate", scope, "all",
                       sum_of(part.studies(scope, real_truths(), part.nonfindings())),
                       sum_of(part.studies(scope, all_truths(), part.nonfindings()))});
    }
}

}  // namespace lacuna
