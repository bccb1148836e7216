#include <algorithm>
#include <cmath>

#include "sim/design/errors.h"
#include "sim/design/studies.h"

namespace lacuna {

/// With sigma = 1 in both groups, V1 and V2 their sample variances and w_i = (1 / n_i) m^2 (which sum to 1):
/// t = (delta m + Z) / S, S^2 = w1 V1 + w2 V2, on S^4 / (w1^2 V1^2 / (n1 - 1) + w2^2 V2^2 / (n2 - 1)) degrees
/// of freedom (Welch 1947, Biometrika 34:28; Satterthwaite 1946, Biometrics Bulletin 2:110, eq. 17). The
/// reported d is by the pooled standard deviation.
void draw_welch_studies(const StudyRound& round, const Design& design, const TestTable& table,
                        SamplingScratch& scratch, StudyBatch batch) {
    const std::size_t count = round.entities.count;
    for (auto* column : {&scratch.z, &scratch.v, &scratch.other_z, &scratch.other_v}) column->resize(count + 16);
    draw_errors(round, study_errors, table.variance, batch.row, scratch, scratch.z.data(), scratch.v.data());
    draw_errors(round, study_other_errors, table.other, batch.row, scratch, scratch.other_z.data(),
                scratch.other_v.data());
    for (std::size_t i = 0; i < count; ++i) {
        const std::uint32_t row = batch.row[i];
        const double n1 = table.n1[row], n2 = table.n2[row];
        const double m = table.noncentrality[row];
        const double a = m * m / n1 * scratch.v[i];
        const double b = m * m / n2 * scratch.other_v[i];
        const double df = (a + b) * (a + b) / (a * a / (n1 - 1.0) + b * b / (n2 - 1.0));
        const double numerator = std::fma(batch.theta[i], m, scratch.z[i]);
        const double s = std::sqrt(a + b);
        const double pooled = ((n1 - 1.0) * scratch.v[i] + (n2 - 1.0) * scratch.other_v[i]) / table.df[row];
        batch.statistic[i] = numerator / s;
        batch.estimate[i] = numerator / std::sqrt(pooled) * table.to_estimate[row];
        batch.df[i] = df;
        Claim claim = claim_of(batch.statistic[i], table.curve(df), design.sides);
        if (claim == Claim::inconclusive && design.equivalence.tested() &&
            std::fabs(numerator) < design.equivalence.bound * m - table.equivalence_curve(df) * s) {
            claim = Claim::equivalent;
        }
        batch.claim[i] = static_cast<std::uint8_t>(claim);
    }
}

}  // namespace lacuna
