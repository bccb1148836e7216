#include "analysis/estimand/families.h"

namespace lacuna {

/// positive_share = findings / studies, over the scope's studies.
void add_positive_share(const Part& part, const std::string& stratum, Estimands& out) {
    for (Scope scope : reported_scopes) {
        out.push_back({"positive_share", scope, stratum, sum_of(part.studies(scope, all_truths(), part.findings())),
                       sum_of(part.studies(scope, all_truths(), all_claims()))});
    }
}

}  // namespace lacuna
