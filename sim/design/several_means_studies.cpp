#include <algorithm>
#include <cmath>

#include "sim/design/errors.h"
#include "sim/design/studies.h"

namespace lacuna {

void draw_several_means_studies(const StudyRound& round, const Design& design, const TestTable& table,
                                SamplingScratch& scratch, StudyBatch batch) {
    const std::size_t count = round.entities.count;
    for (auto* column : {&scratch.z, &scratch.v, &scratch.other_z, &scratch.other_v}) column->resize(count + 16);
    draw_errors(round, study_errors, table.variance, batch.row, scratch, scratch.z.data(), scratch.v.data());
    std::fill(scratch.other_v.begin(), scratch.other_v.end(), 0.0);
    if (design.groups > 2) {
        draw_errors(round, study_other_errors, table.other, batch.row, scratch, scratch.other_z.data(),
                    scratch.other_v.data());
    }
    const double df_effect = design.groups - 1.0;
    for (std::size_t i = 0; i < count; ++i) {
        const std::uint32_t row = batch.row[i];
        const double shifted = std::fma(batch.theta[i], table.noncentrality[row], scratch.z[i]);
        const double f = (shifted * shifted + scratch.other_v[i]) / (df_effect * scratch.v[i]);
        batch.statistic[i] = f;
        batch.estimate[i] = std::sqrt(df_effect * f / table.participants[row]);
        Claim claim = claim_of(f, table.critical[row], 1);
        if (claim == Claim::inconclusive && f < table.equivalence_critical[row]) claim = Claim::equivalent;
        batch.claim[i] = static_cast<std::uint8_t>(claim);
    }
}

}  // namespace lacuna
