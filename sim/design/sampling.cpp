#include "sim/design/sampling.h"

#include <cmath>

#include "sim/variate/gamma.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/design/sampling.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {
namespace hn = hwy::HWY_NAMESPACE;

using F64 = hn::ScalableTag<double>;
using I64 = hn::RebindToSigned<F64>;
using VecF = hn::Vec<F64>;
using VecI = hn::Vec<I64>;

/// Loads row numbers as gather indices.
HWY_INLINE VecI load_rows(const std::uint32_t* row) {
    const hn::Rebind<std::int32_t, F64> half;
    return hn::PromoteTo(I64(), hn::LoadU(half, reinterpret_cast<const std::int32_t*>(row)));
}

HWY_INLINE VecF gather(const std::vector<double>& column, VecI row) {
    return hn::GatherIndex(F64(), column.data(), row);
}

/// Stores claims: 1 above the critical value, 2 below its negative when the test has two sides.
HWY_INLINE void store_claims(VecF t, VecF critical, bool two_sided, std::uint8_t* claim) {
    const I64 i;
    const auto up = hn::RebindMask(i, hn::Gt(t, critical));
    VecI code = hn::IfThenElseZero(up, hn::Set(i, 1));
    if (two_sided) {
        const auto down = hn::RebindMask(i, hn::Lt(t, hn::Neg(critical)));
        code = hn::Or(code, hn::IfThenElseZero(down, hn::Set(i, 2)));
    }
    const hn::Rebind<std::uint8_t, F64> bytes;
    const hn::RebindToUnsigned<I64> u;
    hn::StoreU(hn::TruncateTo(bytes, hn::BitCast(u, code)), bytes, claim);
}

/// Student's t from `error` (Z), `normal` (x) and `uniform` (u) for full vectors; returns how many
/// studies were done. Indices of draws that the squeeze of sim/variate/gamma.h leaves open are kept.
std::size_t StudentVectors(const TestTable& table, bool two_sided, std::size_t count, const double* error,
                           const double* normal, const double* uniform, const StudyBatch& batch,
                           std::vector<std::uint32_t>& open) {
    const F64 f;
    const std::size_t lanes = hn::Lanes(f);
    std::size_t at = 0;
    for (; at + lanes <= count; at += lanes) {
        const VecI row = load_rows(batch.row + at);
        const VecF x = hn::LoadU(f, normal + at);
        const VecF y = hn::Mul(x, gather(table.gamma_c, row));
        const VecF root = hn::Add(y, hn::Set(f, 1.0));
        const VecF cube = hn::Mul(hn::Mul(root, root), root);
        const VecF variance = hn::Mul(gather(table.variance_per_cube, row), cube);
        const VecF mean = hn::MulAdd(hn::LoadU(f, batch.theta + at), gather(table.noncentrality, row),
                                     hn::LoadU(f, error + at));
        const VecF t = hn::Div(mean, hn::Sqrt(variance));
        hn::StoreU(t, f, batch.statistic + at);
        hn::StoreU(hn::Mul(t, gather(table.to_estimate, row)), f, batch.estimate + at);
        store_claims(t, gather(table.critical, row), two_sided, batch.claim + at);
        // d (3/4 y^4 + [y < 0] 6/5 |y|^5) with d = 1 / (9 c^2), so d y^2 = x^2 / 9.
        const VecF quartic = hn::Mul(hn::Mul(hn::Set(f, 1.0 / 12.0), hn::Mul(x, x)), hn::Mul(y, y));
        const VecF below = hn::Max(hn::Neg(y), hn::Zero(f));
        const VecF need = hn::Mul(quartic, hn::MulAdd(below, hn::Set(f, 1.6), hn::Set(f, 1.0)));
        const auto sure = hn::And(hn::Lt(hn::LoadU(f, uniform + at), hn::Sub(hn::Set(f, 1.0), need)),
                                  hn::Ge(y, hn::Set(f, -0.5)));
        if (!hn::AllTrue(f, sure)) {
            std::uint8_t bits[8] = {};
            hn::StoreMaskBits(f, sure, bits);
            for (std::size_t lane = 0; lane < lanes; ++lane) {
                if (!(bits[0] >> lane & 1)) open.push_back(static_cast<std::uint32_t>(at + lane));
            }
        }
    }
    return at;
}

/// Statistic = mean where the variance is known; full vectors only.
std::size_t NormalVectors(const TestTable& table, bool two_sided, std::size_t count, const double* error,
                          const StudyBatch& batch) {
    const F64 f;
    const std::size_t lanes = hn::Lanes(f);
    std::size_t at = 0;
    for (; at + lanes <= count; at += lanes) {
        const VecI row = load_rows(batch.row + at);
        const VecF z = hn::MulAdd(hn::LoadU(f, batch.theta + at), gather(table.noncentrality, row),
                                  hn::LoadU(f, error + at));
        hn::StoreU(z, f, batch.statistic + at);
        hn::StoreU(hn::Mul(z, gather(table.to_estimate, row)), f, batch.estimate + at);
        store_claims(z, gather(table.critical, row), two_sided, batch.claim + at);
    }
    return at;
}

/// Sizes of one kind by the alias method; full vectors only.
std::size_t SizeVectors(const TestTable::Kind& kind, std::size_t count, const double* uniform, std::uint32_t* row) {
    const F64 f;
    const I64 i;
    const std::size_t lanes = hn::Lanes(f);
    const VecF columns = hn::Set(f, static_cast<double>(kind.sizes.keep.size()));
    std::size_t at = 0;
    for (; at + lanes <= count; at += lanes) {
        const VecF x = hn::Mul(hn::LoadU(f, uniform + at), columns);
        const VecI column = hn::ConvertTo(i, x);
        const VecF fraction = hn::Sub(x, hn::ConvertTo(f, column));
        const auto stay = hn::Lt(fraction, hn::GatherIndex(f, kind.sizes.keep.data(), column));
        alignas(64) std::int64_t chosen[HWY_MAX_BYTES / 8];
        hn::Store(hn::IfThenElse(hn::RebindMask(i, stay), column, hn::Sub(hn::Set(i, -1), column)), i, chosen);
        for (std::size_t lane = 0; lane < lanes; ++lane) {
            const std::int64_t c = chosen[lane];
            row[at + lane] = static_cast<std::uint32_t>(c >= 0 ? c : kind.sizes.other[-1 - c]);
        }
    }
    return at;
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(StudentVectors);
HWY_EXPORT(NormalVectors);
HWY_EXPORT(SizeVectors);

namespace {

Claim claim_of(double statistic, double critical, int sides) {
    if (statistic > critical) return Claim::positive;
    return sides == 2 && statistic < -critical ? Claim::reversed : Claim::inconclusive;
}

void finish_study(const Design& design, const TestTable& table, std::size_t i, double statistic, StudyBatch batch) {
    const std::uint32_t row = batch.row[i];
    batch.statistic[i] = statistic;
    batch.estimate[i] = statistic * table.to_estimate[row];
    batch.claim[i] = static_cast<std::uint8_t>(claim_of(statistic, table.critical[row], design.sides));
}

double standardised(const TestTable& table, std::size_t i, double error, double root, StudyBatch batch) {
    const std::uint32_t row = batch.row[i];
    const double mean = std::fma(batch.theta[i], table.noncentrality[row], error);
    return mean / std::sqrt(table.variance_per_cube[row] * (root * root * root));
}

/// The studies whose first variance draw needs the exact acceptance test, and their further draws.
void settle_open(StreamKey key, Address again, Entities entities, const Design& design, const TestTable& table,
                 SamplingScratch& scratch, StudyBatch batch) {
    for (const std::uint32_t i : scratch.open) {
        const double c = table.gamma_c[batch.row[i]];
        const GammaShape shape{1.0 / (9.0 * c * c), c};
        double x = scratch.normal[i];
        if (!gamma_accepts(shape, x, scratch.uniform[i])) {
            Stream stream(key, again, entities.first + (entities.offsets ? entities.offsets[i] : i));
            x = gamma_normal(stream, shape);
        }
        finish_study(design, table, i, standardised(table, i, scratch.error[i], 1.0 + c * x, batch), batch);
    }
}

void draw_student(StreamKey key, Address address, Entities entities, const Design& design, const TestTable& table,
                  SamplingScratch& scratch, StudyBatch batch) {
    scratch.normal.resize(entities.count);
    scratch.uniform.resize(entities.count);
    scratch.open.clear();
    address.purpose = Purpose::study_variance;
    normals(key, address, entities, scratch.normal.data());
    address.purpose = Purpose::study_variance_test;
    uniforms(key, address, entities, scratch.uniform.data());
    std::size_t i = HWY_DYNAMIC_DISPATCH(StudentVectors)(table, design.sides == 2, entities.count, scratch.error.data(),
                                                         scratch.normal.data(), scratch.uniform.data(), batch,
                                                         scratch.open);
    for (; i < entities.count; ++i) scratch.open.push_back(static_cast<std::uint32_t>(i));
    address.purpose = Purpose::study_variance_again;
    settle_open(key, address, entities, design, table, scratch, batch);
}

}  // namespace

void draw_sizes(StreamKey key, std::uint32_t literature, std::uint16_t study, Entities entities,
                const TestTable& table, const std::uint8_t* kind, SamplingScratch& scratch, std::uint32_t* row) {
    const bool one_kind = table.kinds.size() == 1;
    if (one_kind && table.kinds[0].sizes.keep.size() == 1) {
        std::fill(row, row + entities.count, 0u);
        return;
    }
    scratch.other.resize(entities.count);
    const double* u = scratch.other.data();
    uniforms(key, {literature, Purpose::study_size, study}, entities, scratch.other.data());
    std::size_t i = one_kind ? HWY_DYNAMIC_DISPATCH(SizeVectors)(table.kinds[0], entities.count, u, row) : 0;
    for (; i < entities.count; ++i) {
        const TestTable::Kind& its = table.kinds[one_kind ? 0 : kind[i]];
        row[i] = static_cast<std::uint32_t>(its.first_row + its.sizes.pick(u[i]));
    }
}

void draw_studies(StreamKey key, std::uint32_t literature, std::uint16_t study, Entities entities,
                  const Design& design, const TestTable& table, SamplingScratch& scratch, StudyBatch batch) {
    Address address{literature, Purpose::study_error, study};
    scratch.error.resize(entities.count);
    normals(key, address, entities, scratch.error.data());
    if (design.test == Test::two_means) {
        draw_student(key, address, entities, design, table, scratch, batch);
        return;
    }
    std::size_t i = HWY_DYNAMIC_DISPATCH(NormalVectors)(table, design.sides == 2, entities.count,
                                                        scratch.error.data(), batch);
    for (; i < entities.count; ++i) {
        const double z = std::fma(batch.theta[i], table.noncentrality[batch.row[i]], scratch.error[i]);
        finish_study(design, table, i, z, batch);
    }
}

void count_cuts(const TestTable& table, const std::vector<std::size_t>& cuts, int sides, std::size_t count,
                const std::uint32_t* row, const double* statistic, std::uint8_t* level) {
    std::fill(level, level + count, std::uint8_t{0});
    for (const std::size_t cut : cuts) {
        const double* critical = table.cut_critical[cut].data();
        for (std::size_t i = 0; i < count; ++i) {
            const double t = sides == 2 ? std::fabs(statistic[i]) : statistic[i];
            level[i] = static_cast<std::uint8_t>(level[i] + (t > critical[row[i]]));
        }
    }
}

}  // namespace lacuna
#endif
