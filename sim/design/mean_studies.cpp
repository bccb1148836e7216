#include <algorithm>
#include <cmath>

#include "sim/design/errors.h"
#include "sim/design/studies.h"

namespace lacuna {

/// In units of the standard error's sigma the mean difference is delta m + Z; both one-sided tests at the
/// bound b reject when |delta m + Z| < b m - c S, S the sample's standard deviation (Schuirmann 1987,
/// Journal of Pharmacokinetics and Biopharmaceutics 15:657).
void draw_mean_studies(const StudyRound& round, const Design& design, const TestTable& table,
                       SamplingScratch& scratch, StudyBatch batch) {
    const std::size_t count = round.entities.count;
    scratch.z.resize(count + 16);
    scratch.v.resize(count + 16);
    draw_errors(round, study_errors, table.variance, batch.row, scratch, scratch.z.data(), scratch.v.data());
    const bool variance_known = design.test == Test::known_variance;
    for (std::size_t i = 0; i < count; ++i) {
        const std::uint32_t row = batch.row[i];
        const double s = variance_known ? 1.0 : std::sqrt(scratch.v[i]);
        const double numerator = std::fma(batch.theta[i], table.noncentrality[row], scratch.z[i]);
        const double t = numerator / s;
        batch.statistic[i] = t;
        batch.estimate[i] = t * table.to_estimate[row];
        Claim claim = claim_of(t, table.critical[row], design.sides);
        const double margin = design.equivalence.bound * table.noncentrality[row];
        if (claim == Claim::inconclusive && std::fabs(numerator) < margin - table.equivalence_critical[row] * s) {
            claim = Claim::equivalent;
        }
        batch.claim[i] = static_cast<std::uint8_t>(claim);
    }
}

}  // namespace lacuna
