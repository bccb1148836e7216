#include "analysis/estimand/families.h"

namespace lacuna {

/// type1_error = findings / studies among the scope's studies of null questions (realised, not nominal).
/// power = findings / studies among the scope's studies of real questions (realised; with two-sided
/// findings it counts those in the wrong direction, as the handbooks tabulate power).
void add_error_rates(const Part& part, const std::string& stratum, Estimands& out) {
    const auto add = [&](const std::string& metric, const Truths& truths) {
        for (Scope scope : reported_scopes) {
            out.push_back({metric, scope, stratum, sum_of(part.studies(scope, truths, part.findings())),
                           sum_of(part.studies(scope, truths, all_claims()))});
        }
    };
    add("type1_error", null_truth());
    add("power", real_truths());
}

}  // namespace lacuna
