#include "sim/design/sampling.h"

#include <algorithm>
#include <cmath>

#include "sim/variate/gamma.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/design/sampling.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

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

/// Claim codes: 1 above the critical value, 2 below its negative when the test has two sides.
HWY_INLINE void store_claims(VecF t, VecF critical, bool two_sided, std::uint8_t* claim) {
    const I64 i;
    const auto up = hn::RebindMask(i, hn::Gt(t, critical));
    VecI code = hn::IfThenElseZero(up, hn::Set(i, 1));
    if (two_sided) {
        const auto down = hn::RebindMask(i, hn::Lt(t, hn::Neg(critical)));
        code = hn::Or(code, hn::IfThenElseZero(down, hn::Set(i, 2)));
    }
    const hn::Rebind<std::uint8_t, F64> bytes;
    hn::StoreU(hn::TruncateTo(bytes, hn::BitCast(U64(), code)), bytes, claim);
}

/// Entries of a StudyBatch from `at` on, stored.
HWY_INLINE void store_studies(const TestTable& table, bool two_sided, F2 statistic, I2 row, const StudyBatch& batch,
                              std::size_t at) {
    store(statistic, batch.statistic + at);
    store(statistic * gather(table.to_estimate, row), batch.estimate + at);
    const F2 critical = gather(table.critical, row);
    store_claims(statistic.a, critical.a, two_sided, batch.claim + at);
    store_claims(statistic.b, critical.b, two_sided, batch.claim + at + hn::Lanes(F64()));
}

/// Student's t for 2 * Lanes entries from `at` on. Entries whose variance draw the squeeze of
/// sim/variate/gamma.h leaves open are listed with the draws behind them.
HWY_INLINE void student_studies(const TestTable& table, bool two_sided, Pair data, F2 spare, const StudyBatch& batch,
                                std::size_t at, std::size_t count, SamplingScratch& scratch) {
    const F64 f;
    const std::size_t lanes = hn::Lanes(f);
    const I2 row = load_rows(batch.row + at);
    const F2 error = data.first;
    const F2 x = data.second;
    const F2 y = x * gather(table.gamma_c, row);
    const F2 root = y + all(1.0);
    const F2 variance = gather(table.variance_per_cube, row) * (root * root * root);
    const F2 mean = fma(load(batch.theta + at), gather(table.noncentrality, row), error);
    store_studies(table, two_sided, mean * reciprocal_sqrt(variance), row, batch, at);

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
        scratch.open.push_back(static_cast<std::uint32_t>(at + lane));
        scratch.error.push_back(errors[lane]);
        scratch.root.push_back(roots[lane]);
        scratch.spare.push_back(static_cast<std::uint32_t>(spares[lane]));
    }
}

HWY_INLINE U2 entity_blocks(const StudyRound& round, std::size_t at, std::size_t n) {
    if (round.entities.offsets == nullptr) return blocks_from(round.entities.first + at);
    std::uint64_t block[most_lanes] = {};
    for (std::size_t lane = 0; lane < n; ++lane) block[lane] = round.entity(at + lane);
    const U64 d;
    return {hn::LoadU(d, block), hn::LoadU(d, block + hn::Lanes(d))};
}

/// All studies of a round. `student`: t, else z. Columns must be readable and writable up to the next
/// multiple of 2 * Lanes entries.
void Studies(const StudyRound& round, bool student, bool two_sided, const TestTable& table, SamplingScratch& scratch,
             const StudyBatch& batch) {
    const RoundKeys keys(round.key);
    const std::size_t lanes = 2 * hn::Lanes(F64());
    const std::size_t count = round.entities.count;
    const auto draw = [&](std::size_t at) HWY_ATTR {
        const U2 block = entity_blocks(round, at, HWY_MIN(lanes, count - at));
        return philox(counter(round.address(Purpose::study_data), block), keys);
    };
    // The next block is drawn while this one's polynomials wait for each other.
    Block next = count > 0 ? draw(0) : Block{};
    for (std::size_t at = 0; at < count; at += lanes) {
        const Block bits = next;
        if (at + lanes < count) next = draw(at + lanes);
        const Pair data = normal_pair(bits);
        if (student) {
            student_studies(table, two_sided, data, spare_bits(bits), batch, at, count, scratch);
            continue;
        }
        const I2 row = load_rows(batch.row + at);
        const F2 z = fma(load(batch.theta + at), gather(table.noncentrality, row), data.first);
        store_studies(table, two_sided, z, row, batch, at);
    }
}

/// Sizes of one kind by the alias method from `words`; entries whose word does not decide are listed.
void Sizes(const TestTable& table, TestTable::Kind kind, std::size_t count, SamplingScratch& scratch,
           std::uint32_t* row) {
    const F64 f;
    const I64 i;
    const std::size_t lanes = hn::Lanes(f);
    const hn::Rebind<std::uint32_t, F64> narrow;
    const VecF step = hn::Set(f, kind.size_rows * 0x1p-32);  // of the scaled uniform, per word
    for (std::size_t at = 0; at < count; at += lanes) {
        const VecU word = hn::PromoteTo(U64(), hn::LoadU(narrow, scratch.words.data() + at));
        const VecF x = hn::Mul(hn::ConvertTo(f, hn::BitCast(i, word)), step);  // exact
        const VecI column = hn::ConvertTo(i, x);
        const VecF fraction = hn::Sub(x, hn::ConvertTo(f, column));
        const VecF keep = hn::GatherIndex(f, table.keep.data() + kind.first_row, column);
        const auto stays = hn::Le(hn::Add(fraction, step), keep);
        const auto leaves = hn::And(hn::Ge(fraction, keep), hn::Le(hn::Add(fraction, step), hn::Set(f, 1.0)));
        const U64 u;
        const VecU own = hn::Add(hn::BitCast(u, column), hn::Set(u, std::uint64_t{kind.first_row}));
        const VecU other = hn::GatherIndex(u, table.other.data() + kind.first_row, column);
        hn::StoreU(hn::TruncateTo(narrow, hn::IfThenElse(hn::RebindMask(u, stays), own, other)), narrow, row + at);
        std::uint8_t decided[8] = {};
        hn::StoreMaskBits(f, hn::Or(stays, leaves), decided);
        if (HWY_LIKELY(hn::AllTrue(f, hn::Or(stays, leaves)))) continue;
        for (std::size_t lane = 0; lane < lanes && at + lane < count; ++lane) {
            if (!(decided[0] >> lane & 1)) scratch.open.push_back(static_cast<std::uint32_t>(at + lane));
        }
    }
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(Studies);
HWY_EXPORT(Sizes);

namespace {

/// Whole pairs of the widest vectors: kernels read and write this many entries.
constexpr std::size_t padded(std::size_t count) { return (count + 15) / 16 * 16; }

Claim claim_of(double statistic, double critical, int sides) {
    if (statistic > critical) return Claim::positive;
    return sides == 2 && statistic < -critical ? Claim::reversed : Claim::inconclusive;
}

/// Studies whose first variance draw needs the exact acceptance test, and their further draws.
void settle_open(const StudyRound& round, const Design& design, const TestTable& table, SamplingScratch& scratch,
                 const StudyBatch& batch) {
    for (std::size_t k = 0; k < scratch.open.size(); ++k) {
        const std::uint32_t i = scratch.open[k];
        const std::uint32_t row = batch.row[i];
        const double c = table.gamma_c[row];
        const GammaShape shape{1.0 / (9.0 * c * c), c};
        double x = scratch.root[k];
        const double u = refined(round.key, round.address(Purpose::study_variance_test), round.entity(i), scratch.spare[k], 12);
        if (!gamma_accepts(shape, x, u)) {
            Stream stream(round.key, round.address(Purpose::study_variance_again), round.entity(i));
            x = gamma_normal(stream, shape);
        }
        const double root = 1.0 + c * x;
        const double mean = std::fma(batch.theta[i], table.noncentrality[row], scratch.error[k]);
        const double t = mean / std::sqrt(table.variance_per_cube[row] * (root * root * root));
        batch.statistic[i] = t;
        batch.estimate[i] = t * table.to_estimate[row];
        batch.claim[i] = static_cast<std::uint8_t>(claim_of(t, table.critical[row], design.sides));
    }
}

/// The row that every uniform in [word, word + 1] 2^-32 picks, or `undecided`.
constexpr std::uint32_t undecided = ~0u;
std::uint32_t sure_row(const TestTable& table, TestTable::Kind kind, std::uint32_t word) {
    const double step = kind.size_rows * 0x1p-32;
    const double x = word * step;  // exact, as are the sums below but for `keep` itself
    const double fraction = x - std::floor(x);
    const auto its = kind.first_row + static_cast<std::uint32_t>(x);
    if (fraction + step <= table.keep[its]) return its;
    if (fraction < table.keep[its] || fraction + step > 1.0) return undecided;
    return static_cast<std::uint32_t>(table.other[its]);
}

std::uint32_t pick_row(const TestTable& table, TestTable::Kind kind, double u) {
    const double x = u * kind.size_rows;
    const auto its = kind.first_row + static_cast<std::uint32_t>(x);
    return x - std::floor(x) < table.keep[its] ? its : static_cast<std::uint32_t>(table.other[its]);
}

}  // namespace

void draw_sizes(const StudyRound& round, const TestTable& table, const std::uint8_t* kind, SamplingScratch& scratch,
                std::uint32_t* row) {
    const std::size_t count = round.entities.count;
    if (table.kinds.size() == 1 && table.kinds[0].size_rows == 1) {
        std::fill(row, row + count, 0u);
        return;
    }
    const Address address = round.address(Purpose::study_size);
    scratch.words.resize(padded(count));
    words(round.key, address, round.entities, scratch.words.data());
    if (table.kinds.size() > 1) {
        for (std::size_t i = 0; i < count; ++i) {
            const TestTable::Kind its = table.kinds[kind[i]];
            row[i] = sure_row(table, its, scratch.words[i]);
            if (row[i] != undecided) continue;
            row[i] = pick_row(table, its, refined(round.key, address, round.entity(i), scratch.words[i], 32));
        }
        return;
    }
    scratch.open.clear();
    HWY_DYNAMIC_DISPATCH(Sizes)(table, table.kinds[0], count, scratch, row);
    for (const std::uint32_t i : scratch.open) {
        row[i] = pick_row(table, table.kinds[0], refined(round.key, address, round.entity(i), scratch.words[i], 32));
    }
}

void draw_studies(const StudyRound& round, const Design& design, const TestTable& table, SamplingScratch& scratch,
                  StudyBatch batch) {
    const bool student = design.test == Test::two_means;
    scratch.open.clear();
    scratch.error.clear();
    scratch.root.clear();
    scratch.spare.clear();
    HWY_DYNAMIC_DISPATCH(Studies)(round, student, design.sides == 2, table, scratch, batch);
    settle_open(round, design, table, scratch, batch);
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
