#include "sim/design/errors.h"
#include "sim/design/studies.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/design/welch_studies.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

#include "sim/design/studies-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

/// c(df) by Clenshaw's recursion (see CriticalCurve).
HWY_INLINE F2 critical_at(const CriticalCurve& curve, F2 inverse_df) {
    const F2 x = (inverse_df - all(curve.middle())) * all(curve.stretch());
    const F2 twice = x + x;
    F2 b = all(0.0), last = all(0.0);
    const std::vector<double>& coefficient = curve.coefficients();
    for (std::size_t k = coefficient.size(); k-- > 1;) {
        const F2 next = fma(twice, b, all(coefficient[k]) - last);
        last = b;
        b = next;
    }
    return fma(x, b, all(coefficient[0]) - last);
}

/// With sigma = 1 in both groups, V1 and V2 their sample variances and w_i = (1 / n_i) m^2 (which sum to 1):
/// t = (delta m + Z) / S, S^2 = w1 V1 + w2 V2, on S^4 / (w1^2 V1^2 / (n1 - 1) + w2^2 V2^2 / (n2 - 1)) degrees
/// of freedom (Welch 1947, Biometrika 34:28; Satterthwaite 1946, Biometrics Bulletin 2:110, eq. 17). The
/// reported d is by the pooled standard deviation.
void WelchStudies(std::size_t count, const Design& design, const TestTable& table, SamplingScratch& scratch,
                  const StudyBatch& batch) {
    const F2 one = all(1.0);
    const bool tested = design.equivalence.tested();
    for_studies(count, batch.row, [&](std::size_t at, I2 rows) HWY_ATTR {
        const F2 m = gather(table.noncentrality, rows);
        const F2 n1 = gather(table.size1, rows), n2 = gather(table.size2, rows);
        const F2 v1 = load(scratch.v.data() + at), v2 = load(scratch.other_v.data() + at);
        const F2 square = m * m;
        const F2 a = square * reciprocal(n1) * v1, b = square * reciprocal(n2) * v2;
        const F2 total = a + b;
        const F2 inverse_df = fma(a * a, reciprocal(n1 - one), b * b * reciprocal(n2 - one)) * reciprocal(total * total);
        const F2 numerator = fma(load(batch.theta + at), m, load(scratch.z.data() + at));
        const F2 inverse = reciprocal_sqrt(total);
        const F2 t = numerator * inverse;
        const F2 pooled = fma(n1 - one, v1, (n2 - one) * v2) * reciprocal(gather(table.df, rows));
        store(t, batch.statistic + at);
        store(numerator * reciprocal_sqrt(pooled) * gather(table.to_estimate, rows), batch.estimate + at);
        store(reciprocal(inverse_df), batch.df + at);
        Mask2 equivalent = none();
        if (tested) {
            const F2 margin = all(design.equivalence.bound) * m -
                              critical_at(table.equivalence_curve, inverse_df) * (total * inverse);
            equivalent = less(absolute(numerator), margin);
        }
        store_claims(t, critical_at(table.curve, inverse_df), design.sides == 2, equivalent, batch.claim + at);
    });
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(WelchStudies);

void draw_welch_studies(const StudyRound& round, const Design& design, const TestTable& table,
                        SamplingScratch& scratch, StudyBatch batch) {
    const std::size_t count = round.entities.count;
    for (auto* column : {&scratch.z, &scratch.v, &scratch.other_v}) column->resize(count + 16);
    draw_two_errors(round, table.variance, table.other, batch.row, scratch, scratch.z.data(), scratch.v.data(),
                    scratch.other_v.data());
    HWY_DYNAMIC_DISPATCH(WelchStudies)(count, design, table, scratch, batch);
}

}  // namespace lacuna
#endif
