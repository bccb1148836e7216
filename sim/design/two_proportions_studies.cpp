#include <cmath>

#include "sim/design/studies.h"
#include "sim/design/two_proportions.h"
#include "sim/variate/binomial.h"

namespace lacuna {

void draw_two_proportions_studies(const StudyRound& round, const Design& design, const TestTable& table,
                                  SamplingScratch& scratch, StudyBatch batch) {
    const std::size_t count = round.entities.count;
    for (auto* column : {&scratch.z, &scratch.rate}) column->resize(count + 16);
    for (auto* column : {&scratch.n, &scratch.x, &scratch.other_x}) column->resize(count + 16);
    const auto draw = [&](Purpose purpose, const std::vector<std::uint32_t>& size, std::vector<std::uint32_t>& x) {
        uniforms(round.key, round.address(purpose), round.entities, scratch.z.data());
        for (std::size_t i = 0; i < count; ++i) scratch.n[i] = size[batch.row[i]];
        binomials(scratch.n.data(), scratch.rate.data(), scratch.z.data(), count, x.data());
    };
    for (std::size_t i = 0; i < count; ++i) scratch.rate[i] = two_proportions::rate(design.base_rate, batch.theta[i]);
    draw(Purpose::study_data, table.n1, scratch.x);
    std::fill(scratch.rate.begin(), scratch.rate.end(), design.base_rate);
    draw(Purpose::study_other_data, table.n2, scratch.other_x);
    for (std::size_t i = 0; i < count; ++i) {
        const std::uint32_t row = batch.row[i];
        const std::uint32_t n1 = table.n1[row], n2 = table.n2[row];
        const double z = two_proportions::statistic(scratch.x[i], n1, scratch.other_x[i], n2);
        const two_proportions::LogOddsRatio ratio =
            two_proportions::log_odds_ratio(scratch.x[i], n1, scratch.other_x[i], n2);
        batch.statistic[i] = z;
        batch.estimate[i] = ratio.estimate;
        batch.standard_error[i] = ratio.standard_error;
        Claim claim = claim_of(z, table.critical[row], design.sides);
        if (claim == Claim::inconclusive && design.equivalence.tested() &&
            std::fabs(ratio.estimate) < design.equivalence.bound - table.equivalence_critical[row] * ratio.standard_error) {
            claim = Claim::equivalent;
        }
        batch.claim[i] = static_cast<std::uint8_t>(claim);
    }
}

}  // namespace lacuna
