// Shared by the kernels of studies: gathers by row, claims, and the squeeze of sim/variate/gamma.h with the
// list of entries that it leaves open. Included once per vector target.
#if defined(LACUNA_STUDIES_INL_H) == defined(HWY_TARGET_TOGGLE)
#ifdef LACUNA_STUDIES_INL_H
#undef LACUNA_STUDIES_INL_H
#else
#define LACUNA_STUDIES_INL_H
#endif

#include "sim/design/sampling.h"
#include "sim/random/philox-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

constexpr std::size_t most_lanes = 2 * HWY_MAX_BYTES / 8;

struct I2 {
    VecI a, b;
};

/// Rows as gather indices.
HWY_INLINE I2 load_rows(const std::uint32_t* row) {
    const hn::Rebind<std::int32_t, F64> half;
    const auto* from = reinterpret_cast<const std::int32_t*>(row);
    return {hn::PromoteTo(I64(), hn::LoadU(half, from)), hn::PromoteTo(I64(), hn::LoadU(half, from + hn::Lanes(half)))};
}

HWY_INLINE F2 gather(const std::vector<double>& column, I2 row) {
    return {hn::GatherIndex(F64(), column.data(), row.a), hn::GatherIndex(F64(), column.data(), row.b)};
}

/// Lists the entries of 2 * Lanes from `at` on (below `count`) whose draw x, with y = c x, the squeeze does
/// not accept, with the draws behind them.
HWY_INLINE void list_open(F2 error, F2 x, F2 y, F2 spare, std::size_t at, std::size_t count, OpenDraws& open) {
    const F64 f;
    const std::size_t lanes = hn::Lanes(f);
    // The squeeze's bound: d (3/4 y^4 + [y < 0] 6/5 |y|^5) with d = 1 / (9 c^2), so d y^2 = x^2 / 9.
    const F2 below{hn::Max(hn::Neg(y.a), hn::Zero(f)), hn::Max(hn::Neg(y.b), hn::Zero(f))};
    const F2 bound = (all(1.0 / 12.0) * (x * x)) * (y * y) * fma(below, all(1.6), 1.0);
    // The test's uniform begins with 12 spare bits; accept surely when its upper end does.
    const F2 limit = all(4095.0) - all(4096.0) * bound;
    const auto sure_a = hn::And(hn::Lt(spare.a, limit.a), hn::Ge(y.a, hn::Set(f, -0.5)));
    const auto sure_b = hn::And(hn::Lt(spare.b, limit.b), hn::Ge(y.b, hn::Set(f, -0.5)));
    if (HWY_LIKELY(hn::AllTrue(f, hn::And(sure_a, sure_b)))) return;
    std::uint8_t bits[2][8] = {};
    hn::StoreMaskBits(f, sure_a, bits[0]);
    hn::StoreMaskBits(f, sure_b, bits[1]);
    double errors[most_lanes], roots[most_lanes], spares[most_lanes];
    store(error, errors);
    store(x, roots);
    store(spare, spares);
    for (std::size_t lane = 0; lane < 2 * lanes && at + lane < count; ++lane) {
        if (bits[lane / lanes][0] >> (lane % lanes) & 1) continue;
        open.entry.push_back(static_cast<std::uint32_t>(at + lane));
        open.error.push_back(errors[lane]);
        open.root.push_back(roots[lane]);
        open.spare.push_back(static_cast<std::uint32_t>(spares[lane]));
    }
}

/// Claims of 2 * Lanes studies: 1 above the critical value, 2 below its negative when the test has two sides,
/// else 3 where `equivalent`.
struct Mask2 {
    hn::Mask<F64> a, b;
};
HWY_INLINE Mask2 none() {
    const VecF zero = hn::Zero(F64());
    return {hn::Lt(zero, zero), hn::Lt(zero, zero)};
}
HWY_INLINE Mask2 less(F2 x, F2 y) { return {hn::Lt(x.a, y.a), hn::Lt(x.b, y.b)}; }
HWY_INLINE F2 absolute(F2 x) { return {hn::Abs(x.a), hn::Abs(x.b)}; }

HWY_INLINE void store_claims(VecF t, VecF critical, bool two_sided, hn::Mask<F64> equivalent, std::uint8_t* claim) {
    const I64 i;
    VecI code = hn::IfThenElseZero(hn::RebindMask(i, equivalent), hn::Set(i, 3));
    if (two_sided) code = hn::IfThenElse(hn::RebindMask(i, hn::Lt(t, hn::Neg(critical))), hn::Set(i, 2), code);
    code = hn::IfThenElse(hn::RebindMask(i, hn::Gt(t, critical)), hn::Set(i, 1), code);
    const hn::Rebind<std::uint8_t, F64> bytes;
    hn::StoreU(hn::TruncateTo(bytes, hn::BitCast(U64(), code)), bytes, claim);
}

HWY_INLINE void store_claims(F2 t, F2 critical, bool two_sided, Mask2 equivalent, std::uint8_t* claim) {
    store_claims(t.a, critical.a, two_sided, equivalent.a, claim);
    store_claims(t.b, critical.b, two_sided, equivalent.b, claim + hn::Lanes(F64()));
}

/// sqrt(x) for positive normal x.
HWY_INLINE F2 square_root(F2 x) { return x * reciprocal_sqrt(x); }

/// Calls f(at, rows) for every 2 * Lanes entries of a column of studies.
template <class F>
HWY_INLINE void for_studies(std::size_t count, const std::uint32_t* row, F f) {
    for (std::size_t at = 0; at < count; at += 2 * hn::Lanes(F64())) f(at, load_rows(row + at));
}

HWY_INLINE U2 entity_blocks(const StudyRound& round, std::size_t at, std::size_t n) {
    if (round.entities.offsets == nullptr) return blocks_from(round.entities.first + at);
    std::uint64_t block[most_lanes] = {};
    for (std::size_t lane = 0; lane < n; ++lane) block[lane] = round.entity(at + lane);
    const U64 d;
    return {hn::LoadU(d, block), hn::LoadU(d, block + hn::Lanes(d))};
}

/// Calls f(at, block) with the block of every 2 * Lanes studies' data. The next block is drawn while this one's
/// polynomials wait for each other.
template <class F>
HWY_INLINE void for_data(const StudyRound& round, F f) {
    const RoundKeys keys(round.key);
    const std::size_t lanes = 2 * hn::Lanes(F64());
    const std::size_t count = round.entities.count;
    const auto draw = [&](std::size_t at) HWY_ATTR {
        const U2 block = entity_blocks(round, at, HWY_MIN(lanes, count - at));
        return philox(counter(round.address(Purpose::study_data), block), keys);
    };
    Block next = count > 0 ? draw(0) : Block{};
    for (std::size_t at = 0; at < count; at += lanes) {
        const Block bits = next;
        if (at + lanes < count) next = draw(at + lanes);
        f(at, bits);
    }
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#endif
