#include <algorithm>
#include <cmath>

#include "sim/design/errors.h"
#include "sim/design/studies.h"

namespace lacuna {

namespace {

/// Adds m observations with mean `mean` and sum of squares about it `squares` to a group of n: its mean and,
/// as the result, the growth of its sum of squares (Chan, Golub & LeVeque 1983, The American Statistician
/// 37:242, eq. 1.3).
double take_in(double n, double m, double mean, double& group_mean) {
    const double difference = mean - group_mean;
    group_mean += difference * m / (n + m);
    return difference * difference * n * m / (n + m);
}

/// The rows of look k of the active entries.
void rows_of_look(const LookRows& looks, std::uint32_t k, const StudyBatch& batch, SequentialScratch& scratch) {
    scratch.row.resize(scratch.active.size() + 16);
    for (std::size_t a = 0; a < scratch.active.size(); ++a) {
        scratch.row[a] = looks.first[batch.row[scratch.active[a]]] + k;
    }
}

}  // namespace

/// Every look draws the means of its new observations and their sum of squares, and adds them to what is
/// there: nothing is approximated, and nothing computed again.
void draw_sequential_studies(const StudyRound& round, const Design& design, const TestTable& table, const LookRows& looks,
                             SamplingScratch& scratch, StudyBatch batch) {
    SequentialScratch& its = scratch.sequential;
    const std::size_t count = round.entities.count;
    const bool two_groups = design.test == Test::two_means;
    const bool variance_known = design.test == Test::known_variance;
    its.active.resize(count);
    for (std::size_t i = 0; i < count; ++i) its.active[i] = static_cast<std::uint32_t>(i);
    its.mean.assign(count, 0.0);
    its.other_mean.assign(count, 0.0);
    its.squares.assign(count, 0.0);
    for (std::uint32_t k = 0; !its.active.empty(); ++k) {
        const std::size_t active = its.active.size();
        rows_of_look(looks, k, batch, its);
        its.offsets.resize(active);
        for (std::size_t a = 0; a < active; ++a) {
            its.offsets[a] = round.entities.offsets ? round.entities.offsets[its.active[a]] : its.active[a];
        }
        StudyRound look = round;
        look.look = k;
        look.entities = {round.entities.first, active == count && !round.entities.offsets ? nullptr : its.offsets.data(),
                         active};
        for (auto* column : {&scratch.z, &scratch.v, &scratch.other_z}) column->resize(active + 16);
        if (variance_known) {  // laid out as for studies of one look, which may stand beside these
            normals(look.key, look.address(Purpose::study_data), look.entities, scratch.z.data());
            std::fill(scratch.v.begin(), scratch.v.end(), 0.0);
        } else {
            draw_errors(look, table.variance, its.row.data(), scratch, scratch.z.data(), scratch.v.data());
        }
        if (two_groups) normals(look.key, look.address(Purpose::study_other_data), look.entities, scratch.other_z.data());
        its.still.clear();
        for (std::size_t a = 0; a < active; ++a) {
            const std::uint32_t i = its.active[a];
            const std::uint32_t row = its.row[a];
            const double n1 = k == 0 ? 0.0 : table.n1[row - 1], n2 = k == 0 ? 0.0 : table.n2[row - 1];
            const double m1 = table.n1[row] - n1, m2 = table.n2[row] - n2;
            its.squares[i] += scratch.v[a];
            if (m1 > 0.0)
                its.squares[i] += take_in(n1, m1, batch.theta[i] + scratch.z[a] / std::sqrt(m1), its.mean[i]);
            if (two_groups && m2 > 0.0)  // small groups may wait for the next look
                its.squares[i] += take_in(n2, m2, scratch.other_z[a] / std::sqrt(m2), its.other_mean[i]);
            const double variance = variance_known ? 1.0 : its.squares[i] / table.df[row];
            const double t = (its.mean[i] - its.other_mean[i]) * table.noncentrality[row] / std::sqrt(variance);
            const Claim claim = claim_of(t, table.critical[row], design.sides);
            const bool futile = (design.sides == 2 ? std::fabs(t) : t) < table.futility[row];
            const bool is_last = k + 1 == looks.count[batch.row[i]];
            if (!is_last && claim == Claim::inconclusive && !futile) {
                its.still.push_back(i);
                continue;
            }
            batch.row[i] = row;
            if (batch.looks) batch.looks[i] = static_cast<std::uint16_t>(k + 1);
            batch.statistic[i] = t;
            batch.estimate[i] = t * table.to_estimate[row];
            batch.claim[i] = static_cast<std::uint8_t>(claim);
        }
        its.active.swap(its.still);
    }
}

}  // namespace lacuna
