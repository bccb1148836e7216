#include "sim/design/errors.h"
#include "sim/design/studies.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/design/several_means_studies.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

#include "sim/design/studies-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

/// The sum of squares of effects beyond the one that f shifts, on g - 2 degrees of freedom, stands in other_v;
/// for g = 4 the uniform does, of which it is -2 log.
void SeveralMeansStudies(std::size_t count, const Design& design, const TestTable& table, SamplingScratch& scratch,
                         const StudyBatch& batch) {
    const double per_df = 1.0 / (design.groups - 1.0);
    for_studies(count, batch.row, [&](std::size_t at, I2 rows) HWY_ATTR {
        const F2 shifted = fma(load(batch.theta + at), gather(table.noncentrality, rows), load(scratch.z.data() + at));
        F2 rest = load(scratch.other_v.data() + at);
        if (design.groups == 4) rest = all(-2.0) * log_positive(rest);
        const F2 f = fma(shifted, shifted, rest) * all(per_df) * reciprocal(load(scratch.v.data() + at));
        store(f, batch.statistic + at);
        store(square_root(f) * gather(table.to_estimate, rows), batch.estimate + at);
        store_claims(f, gather(table.critical, rows), false, less(f, gather(table.equivalence_critical, rows)),
                     batch.claim + at);
    });
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(SeveralMeansStudies);

void draw_several_means_studies(const StudyRound& round, const Design& design, const TestTable& table,
                                SamplingScratch& scratch, StudyBatch batch) {
    const std::size_t count = round.entities.count;
    for (auto* column : {&scratch.z, &scratch.v, &scratch.other_v}) column->resize(count + 16);
    if (design.groups == 3 || design.groups > 4) {
        draw_two_errors(round, table.variance, table.other, batch.row, scratch, scratch.z.data(), scratch.v.data(),
                        scratch.other_v.data());
    } else {
        std::fill(scratch.other_v.begin(), scratch.other_v.end(), design.groups == 4 ? 1.0 : 0.0);
        draw_errors(round, table.variance, batch.row, scratch, scratch.z.data(), scratch.v.data());
        if (design.groups == 4)
            uniforms(round.key, round.address(Purpose::study_other_data), round.entities, scratch.other_v.data());
    }
    HWY_DYNAMIC_DISPATCH(SeveralMeansStudies)(count, design, table, scratch, batch);
}

}  // namespace lacuna
#endif
