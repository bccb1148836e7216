#include "sim/design/errors.h"
#include "sim/design/studies.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/design/mean_studies.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

#include "sim/design/studies-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

/// In units of the standard error's sigma the mean difference is delta m + Z; both one-sided tests at the
/// bound b reject when |delta m + Z| < b m - c S, S the sample's standard deviation (Schuirmann 1987,
/// Journal of Pharmacokinetics and Biopharmaceutics 15:657).
void MeanStudies(std::size_t count, const Design& design, const TestTable& table, SamplingScratch& scratch,
                 const StudyBatch& batch) {
    const bool variance_known = design.test == Test::known_variance;
    const bool tested = design.equivalence.tested();
    for_studies(count, batch.row, [&](std::size_t at, I2 rows) HWY_ATTR {
        const F2 m = gather(table.noncentrality, rows);
        const F2 numerator = fma(load(batch.theta + at), m, load(scratch.z.data() + at));
        F2 t = numerator, s = all(1.0);
        if (!variance_known) {
            const F2 v = load(scratch.v.data() + at);
            const F2 inverse = reciprocal_sqrt(v);
            t = numerator * inverse;
            s = v * inverse;
        }
        Mask2 equivalent = none();
        if (tested) {
            const F2 margin = all(design.equivalence.bound) * m - gather(table.equivalence_critical, rows) * s;
            equivalent = less(absolute(numerator), margin);
        }
        store(t, batch.statistic + at);
        store(t * gather(table.to_estimate, rows), batch.estimate + at);
        store_claims(t, gather(table.critical, rows), design.sides == 2, equivalent, batch.claim + at);
    });
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(MeanStudies);

void draw_mean_studies(const StudyRound& round, const Design& design, const TestTable& table,
                       SamplingScratch& scratch, StudyBatch batch) {
    const std::size_t count = round.entities.count;
    for (auto* column : {&scratch.z, &scratch.v}) column->resize(count + 16);
    if (design.test == Test::known_variance) {  // one normal and nothing else
        normals(round.key, round.address(Purpose::study_data), round.entities, scratch.z.data());
    } else {
        draw_errors(round, table.variance, batch.row, scratch, scratch.z.data(), scratch.v.data());
    }
    HWY_DYNAMIC_DISPATCH(MeanStudies)(count, design, table, scratch, batch);
}

}  // namespace lacuna
#endif
