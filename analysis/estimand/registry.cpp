#include "analysis/estimand/registry.h"

#include "analysis/estimand/families.h"

namespace lacuna {

namespace {

/// What is asked of all studies and of each lab kind's.
void add_by_part(const Part& part, const std::string& stratum, Estimands& out) {
    add_false_discovery_rate(part, stratum, out);
    add_effect_inflation(part, stratum, out);
    add_positive_share(part, stratum, out);
    add_error_rates(part, stratum, out);
    add_publication_rate(part, stratum, out);
}

}  // namespace

Estimands all_estimands(const std::vector<std::string>& labs, Findings findings) {
    const Layout layout(labs.size());
    const Part all(layout, findings);
    Estimands out;
    add_by_part(all, "all", out);
    add_false_discovery_rate_manuscripts(all, out);
    add_false_discovery_rate_questions(all, out);
    add_wrong_sign_rate(all, out);
    add_false_nonfinding_rate(all, out);
    add_effect_size(all, out);
    add_publication_rate_by_result(all, out);
    add_missing_share(all, out);
    add_participants(all, out);
    if (labs.size() > 1) {
        for (std::size_t kind = 0; kind < labs.size(); ++kind) {
            add_by_part(Part(layout, findings, kind), "lab=" + labs[kind], out);
        }
    }
    return out;
}

}  // namespace lacuna
