#include "sim/design/studies.h"

#include <algorithm>
#include <cmath>

#include "sim/base/fault.h"

namespace lacuna {

bool fills_df(const Design& design) { return design.welch; }

bool fills_standard_error(const Design& design) { return design.test == Test::two_proportions; }

void draw_studies(const StudyRound& round, const Design& design, const TestTable& table, SamplingScratch& scratch,
                  StudyBatch batch) {
    if (design.looks.count > 1) return draw_sequential_studies(round, design, table, table.looks, scratch, batch);
    switch (design.test) {
        case Test::two_means:
        case Test::paired_means:
        case Test::one_mean:
        case Test::known_variance:
            if (design.welch) return draw_welch_studies(round, design, table, scratch, batch);
            if (design.equivalence.tested() || design.test == Test::known_variance)
                return draw_mean_studies(round, design, table, scratch, batch);
            return draw_simple_studies(round, design, table, scratch, batch);
        case Test::correlation:
            return draw_correlation_studies(round, design, table, scratch, batch);
        case Test::two_proportions:
            return draw_two_proportions_studies(round, design, table, scratch, batch);
        case Test::several_means:
            return draw_several_means_studies(round, design, table, scratch, batch);
    }
    throw Defect("draw_studies: unknown design");
}

void count_cuts(const TestTable& table, const std::vector<std::size_t>& cuts, int sides, std::size_t count,
                const std::uint32_t* row, const double* statistic, const double* df, std::uint8_t* level) {
    std::fill(level, level + count, std::uint8_t{0});
    for (const std::size_t cut : cuts) {
        const double* critical = table.cut_critical[cut].data();
        for (std::size_t i = 0; i < count; ++i) {
            const double t = sides == 2 ? std::fabs(statistic[i]) : statistic[i];
            const double bound = df ? table.cut_curves[cut](df[i]) : critical[row[i]];
            level[i] = static_cast<std::uint8_t>(level[i] + (t > bound));
        }
    }
}

}  // namespace lacuna
