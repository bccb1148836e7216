#include "analysis/estimand/families.h"

namespace lacuna {

/// wrong_sign_rate = findings about real questions whose sign is not the effect's / findings about
/// real questions, over the scope's studies: type S error of Gelman & Carlin (2014, Perspectives on
/// Psychological Science 9:641). Wrong are positive findings where the effect is negative and
/// reversed ones where it is positive; where only positive claims are findings, reversed are none.
void add_wrong_sign_rate(const Part& part, Estimands& out) {
    for (Scope scope : reported_scopes) {
        Columns wrong;
        for (Claim claim : part.findings()) {
            const Truth against = claim == Claim::positive ? Truth::real_negative : Truth::real;
            wrong = wrong + part.studies(scope, {against}, {claim});
        }
        out.push_back({"wrong_sign_rate", scope, "all", sum_of(wrong),
                       sum_of(part.studies(scope, real_truths(), part.findings()))});
    }
}

}  // namespace lacuna
