#include <algorithm>
#include <cmath>

#include "sim/design/errors.h"
#include "sim/design/studies.h"

namespace lacuna {

void draw_correlation_studies(const StudyRound& round, const Design& design, const TestTable& table,
                              SamplingScratch& scratch, StudyBatch batch) {
    const std::size_t count = round.entities.count;
    for (auto* column : {&scratch.z, &scratch.v, &scratch.other_z, &scratch.other_v}) column->resize(count + 16);
    draw_errors(round, study_errors, table.variance, batch.row, scratch, scratch.z.data(), scratch.v.data());
    draw_errors(round, study_other_errors, table.other, batch.row, scratch, scratch.other_z.data(),
                scratch.other_v.data());
    for (std::size_t i = 0; i < count; ++i) {
        const std::uint32_t row = batch.row[i];
        const double rho = batch.theta[i];
        const double slope = rho / std::sqrt((1.0 - rho) * (1.0 + rho));
        const double t = (slope * std::sqrt(scratch.other_v[i]) + scratch.z[i]) / std::sqrt(scratch.v[i]);
        batch.statistic[i] = t;
        batch.estimate[i] = t / std::sqrt(t * t + table.df[row]);
        Claim claim = claim_of(t, table.critical[row], design.sides);
        if (claim == Claim::inconclusive && std::fabs(t) < table.equivalence_critical[row]) claim = Claim::equivalent;
        batch.claim[i] = static_cast<std::uint8_t>(claim);
    }
}

}  // namespace lacuna
