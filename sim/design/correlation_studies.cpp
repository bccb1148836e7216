#include "sim/design/errors.h"
#include "sim/design/studies.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/design/correlation_studies.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

#include "sim/design/studies-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

void CorrelationStudies(std::size_t count, const Design& design, const TestTable& table, SamplingScratch& scratch,
                        const StudyBatch& batch) {
    const F2 one = all(1.0);
    for_studies(count, batch.row, [&](std::size_t at, I2 rows) HWY_ATTR {
        const F2 rho = load(batch.theta + at);
        const F2 slope = rho * reciprocal_sqrt((one - rho) * (one + rho));
        const F2 chi = square_root(load(scratch.other_v.data() + at));
        const F2 t = fma(slope, chi, load(scratch.z.data() + at)) * reciprocal_sqrt(load(scratch.v.data() + at));
        store(t, batch.statistic + at);
        store(t * reciprocal_sqrt(fma(t, t, gather(table.df, rows))), batch.estimate + at);
        store_claims(t, gather(table.critical, rows), design.sides == 2,
                     less(absolute(t), gather(table.equivalence_critical, rows)), batch.claim + at);
    });
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(CorrelationStudies);

void draw_correlation_studies(const StudyRound& round, const Design& design, const TestTable& table,
                              SamplingScratch& scratch, StudyBatch batch) {
    const std::size_t count = round.entities.count;
    for (auto* column : {&scratch.z, &scratch.v, &scratch.other_v}) column->resize(count + 16);
    draw_two_errors(round, table.variance, table.other, batch.row, scratch, scratch.z.data(), scratch.v.data(),
                    scratch.other_v.data());
    HWY_DYNAMIC_DISPATCH(CorrelationStudies)(count, design, table, scratch, batch);
}

}  // namespace lacuna
#endif
