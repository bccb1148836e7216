// False discovery rates: how much of what is claimed is not so.
//
// Null questions are those that are not real and those whose effect is negligible.
#include "analysis/estimand/families.h"

namespace lacuna {

/// false_discovery_rate = findings whose question is null / findings, over the scope's studies.
/// (1 - positive predictive value of Ioannidis 2005, PLoS Medicine 2:e124.)
void add_false_discovery_rate(const Part& part, const std::string& stratum, Estimands& out) {
    for (Scope scope : reported_scopes) {
        out.push_back({"false_discovery_rate", scope, stratum,
                       sum_of(part.studies(scope, null_truth(), part.findings())),
                       sum_of(part.studies(scope, all_truths(), part.findings()))});
    }
}

/// false_discovery_rate_manuscripts = manuscripts of class supportive or mixed on null questions /
/// manuscripts of these classes, over the scope's manuscripts.
void add_false_discovery_rate_manuscripts(const Part& part, Estimands& out) {
    const Layout& layout = part.layout();
    for (Scope scope : reported_scopes) {
        const auto claiming = [&](bool real) {
            return Columns{layout.manuscripts(scope, real, ManuscriptClass::supportive),
                           layout.manuscripts(scope, real, ManuscriptClass::mixed)};
        };
        out.push_back({"false_discovery_rate_manuscripts", scope, "all", sum_of(claiming(false)),
                       sum_of(claiming(false) + claiming(true))});
    }
}

/// false_discovery_rate_questions = null questions that count as established / all that do, by at
/// least one finding among the scope's studies; ..._majority: by findings in more than half of them.
void add_false_discovery_rate_questions(const Part& part, Estimands& out) {
    const Layout& layout = part.layout();
    const auto add = [&](const std::string& metric, Standing standing) {
        for (Scope scope : reported_scopes) {
            const Columns null{layout.questions(scope, false, standing)};
            const Columns real{layout.questions(scope, true, standing)};
            out.push_back({metric, scope, "all", sum_of(null), sum_of(null + real)});
        }
    };
    add("false_discovery_rate_questions", Standing::any_finding);
    add("false_discovery_rate_questions_majority", Standing::majority);
}

}  // namespace lacuna
