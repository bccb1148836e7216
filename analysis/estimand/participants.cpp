// What the record costs in participants.
#include "analysis/estimand/families.h"

namespace lacuna {

/// participants = mean over literatures of the participants in the scope's studies.
/// Scope published: participants_unpublished = mean over literatures of those in conducted studies
/// that are not published; participants_per_true_discovery = participants in conducted studies /
/// published findings about real questions.
void add_participants(const Part& part, Estimands& out) {
    for (Scope scope : reported_scopes) {
        out.push_back({"participants", scope, "all", sum_of(part.participants(scope)), one()});
    }
    const Columns conducted = part.participants(Scope::conducted);
    out.push_back({"participants_unpublished", Scope::published, "all",
                   difference_of(conducted, part.participants(Scope::published)), one()});
    out.push_back({"participants_per_true_discovery", Scope::published, "all", sum_of(conducted),
                   sum_of(part.studies(Scope::published, real_truths(), part.findings()))});
}

}  // namespace lacuna
