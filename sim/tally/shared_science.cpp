#include "sim/tally/shared_science.h"

#include "sim/tally/layout.h"

namespace lacuna {

void share_conducted_sums(const ScienceGroups& groups, std::size_t kinds, std::vector<std::vector<double>>& rows) {
    const Layout layout(kinds);
    for (std::size_t r = 0; r < rows.size(); ++r) {
        const std::vector<double>& first = rows[groups.firsts[groups.science_of[r]]];
        for (std::size_t kind = 0; kind < kinds; ++kind) {
            for (std::size_t claim = 0; claim < claim_names.size(); ++claim) {
                for (Sum what : {Sum::estimate, Sum::abs_estimate, Sum::abs_effect}) {
                    const std::size_t at = layout.sum(kind, Scope::conducted, Claim(claim), what);
                    rows[r][at] = first[at];
                }
            }
        }
    }
}

}  // namespace lacuna
