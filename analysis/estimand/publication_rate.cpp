// What part of what was done reaches the published record; scope published throughout.
#include "analysis/estimand/families.h"

namespace lacuna {

namespace {

std::string claim_stratum(Claim claim) {
    return "claim=" + std::string(claim_names[static_cast<std::size_t>(claim)]);
}

}  // namespace

/// publication_rate = published studies / conducted studies.
void add_publication_rate(const Part& part, const std::string& stratum, Estimands& out) {
    out.push_back({"publication_rate", Scope::published, stratum,
                   sum_of(part.studies(Scope::published, all_truths(), all_claims())),
                   sum_of(part.studies(Scope::conducted, all_truths(), all_claims()))});
}

/// publication_rate by what a study claims (of studies), and by a manuscript's class (of manuscripts:
/// published manuscripts / those that could have been written).
void add_publication_rate_by_result(const Part& part, Estimands& out) {
    for (Claim claim : all_claims()) {
        out.push_back({"publication_rate", Scope::published, claim_stratum(claim),
                       sum_of(part.studies(Scope::published, all_truths(), {claim})),
                       sum_of(part.studies(Scope::conducted, all_truths(), {claim}))});
    }
    const Layout& layout = part.layout();
    for (std::size_t c = 0; c < class_names.size(); ++c) {
        const auto manuscripts = [&](Scope scope) {
            return Columns{layout.manuscripts(scope, false, ManuscriptClass(c)),
                           layout.manuscripts(scope, true, ManuscriptClass(c))};
        };
        out.push_back({"publication_rate", Scope::published, "class=" + std::string(class_names[c]),
                       sum_of(manuscripts(Scope::published)), sum_of(manuscripts(Scope::conducted))});
    }
}

/// missing_share = conducted studies that are not published / conducted studies (the file drawer),
/// over all and by claim.
void add_missing_share(const Part& part, Estimands& out) {
    const auto add = [&](const std::string& stratum, const Claims& claims) {
        const Columns conducted = part.studies(Scope::conducted, all_truths(), claims);
        const Columns published = part.studies(Scope::published, all_truths(), claims);
        out.push_back(
            {"missing_share", Scope::published, stratum, difference_of(conducted, published), sum_of(conducted)});
    };
    add("all", all_claims());
    for (Claim claim : all_claims()) add(claim_stratum(claim), {claim});
}

}  // namespace lacuna
