#include "sim/design/studies.h"
#include "sim/variate/binomial.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/design/two_proportions_studies.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

#include "sim/design/studies-inl.h"
// after highway.h
#include <hwy/contrib/math/math-inl.h>

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

HWY_INLINE F2 counts(const std::uint32_t* x) {
    const hn::Rebind<std::int32_t, F64> half;
    const auto* from = reinterpret_cast<const std::int32_t*>(x);
    return {hn::PromoteTo(F64(), hn::LoadU(half, from)), hn::PromoteTo(F64(), hn::LoadU(half, from + hn::Lanes(half)))};
}

/// Rates of the treated: 1 / (1 + exp(-effect) (1 - base) / base).
void TreatedRates(std::size_t count, double base_rate, const double* effect, double* rate) {
    const F64 f;
    const F2 odds = all((1.0 - base_rate) / base_rate);
    for (std::size_t at = 0; at < count; at += 2 * hn::Lanes(f)) {
        const F2 theta = load(effect + at);
        const F2 exponential{hn::Exp(f, hn::Neg(theta.a)), hn::Exp(f, hn::Neg(theta.b))};
        store(reciprocal(fma(odds, exponential, 1.0)), rate + at);
    }
}

/// Score z, log odds ratio and its standard error, as sim/design/two_proportions.h defines them.
void TwoProportionsStudies(std::size_t count, const Design& design, const TestTable& table, SamplingScratch& scratch,
                           const StudyBatch& batch) {
    const F2 half = all(0.5), zero = all(0.0);
    for_studies(count, batch.row, [&](std::size_t at, I2 rows) HWY_ATTR {
        const F2 n1 = gather(table.size1, rows), n2 = gather(table.size2, rows);
        const F2 x1 = counts(scratch.x.data() + at), x2 = counts(scratch.other_x.data() + at);
        const F2 together = x1 + x2, all_of_them = n1 + n2;
        const F2 spread = n1 * n2 * together * (all_of_them - together);
        const Mask2 spreads = less(zero, spread);
        const F2 z = (x1 * n2 - x2 * n1) * square_root(all_of_them) * reciprocal_sqrt(spread);
        const F2 statistic{hn::IfThenElseZero(spreads.a, z.a), hn::IfThenElseZero(spreads.b, z.b)};
        const F2 least{hn::Min(hn::Min(x1.a, x2.a), hn::Min(hn::Sub(n1.a, x1.a), hn::Sub(n2.a, x2.a))),
                       hn::Min(hn::Min(x1.b, x2.b), hn::Min(hn::Sub(n1.b, x1.b), hn::Sub(n2.b, x2.b)))};
        const Mask2 empty = less(least, half);
        const F2 add{hn::IfThenElseZero(empty.a, half.a), hn::IfThenElseZero(empty.b, half.b)};
        const F2 a = x1 + add, b = n1 - x1 + add, c = x2 + add, d = n2 - x2 + add;
        const F2 inverse_bc = reciprocal(b * c), inverse_ad = reciprocal(a * d);
        const F2 estimate = log_positive(a * d * inverse_bc);
        const F2 error = square_root((a + d) * inverse_ad + (b + c) * inverse_bc);
        store(statistic, batch.statistic + at);
        store(estimate, batch.estimate + at);
        store(error, batch.standard_error + at);
        const F2 margin = all(design.equivalence.bound) - gather(table.equivalence_critical, rows) * error;
        const Mask2 equivalent = design.equivalence.tested() ? less(absolute(estimate), margin) : none();
        store_claims(statistic, gather(table.critical, rows), design.sides == 2, equivalent, batch.claim + at);
    });
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(TreatedRates);
HWY_EXPORT(TwoProportionsStudies);

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
    HWY_DYNAMIC_DISPATCH(TreatedRates)(count, design.base_rate, batch.theta, scratch.rate.data());
    draw(Purpose::study_data, table.n1, scratch.x);
    std::fill(scratch.rate.begin(), scratch.rate.end(), design.base_rate);
    draw(Purpose::study_other_data, table.n2, scratch.other_x);
    HWY_DYNAMIC_DISPATCH(TwoProportionsStudies)(count, design, table, scratch, batch);
}

}  // namespace lacuna
#endif
