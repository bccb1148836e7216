#include "sim/design/sampling.h"

#include <algorithm>
#include <cmath>

#include "sim/variate/gamma.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/design/sampling.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

#include "sim/design/studies-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

/// Entries of a StudyBatch from `at` on, stored.
HWY_INLINE void store_studies(const TestTable& table, bool two_sided, F2 statistic, I2 row, const StudyBatch& batch,
                              std::size_t at) {
    store(statistic, batch.statistic + at);
    store(statistic * gather(table.to_estimate, row), batch.estimate + at);
    const F2 critical = gather(table.critical, row);
    store_claims(statistic, critical, two_sided, none(), batch.claim + at);
}

/// Student's t for 2 * Lanes entries from `at` on. Entries whose variance draw the squeeze of
/// sim/variate/gamma.h leaves open are listed with the draws behind them.
HWY_INLINE void student_studies(const TestTable& table, bool two_sided, Pair data, F2 spare, const StudyBatch& batch,
                                std::size_t at, std::size_t count, SamplingScratch& scratch) {
    const I2 row = load_rows(batch.row + at);
    const F2 error = data.first;
    const F2 x = data.second;
    const F2 y = x * gather(table.variance.c, row);
    const F2 root = y + all(1.0);
    const F2 variance = gather(table.variance.per_cube, row) * (root * root * root);
    const F2 mean = fma(load(batch.theta + at), gather(table.noncentrality, row), error);
    store_studies(table, two_sided, mean * reciprocal_sqrt(variance), row, batch, at);
    list_open(error, x, y, spare, at, count, scratch.draws);
}

/// All studies of a round. Columns must be readable and writable up to the next
/// multiple of 2 * Lanes entries.
void Studies(const StudyRound& round, bool two_sided, const TestTable& table, SamplingScratch& scratch,
             const StudyBatch& batch) {
    const std::size_t count = round.entities.count;
    for_data(round, [&](std::size_t at, const Block& bits) HWY_ATTR {
        const Pair data = normal_pair(bits);
        student_studies(table, two_sided, data, spare_bits(bits), batch, at, count, scratch);
    });
}

/// Sizes of one kind by the alias method from `words`; entries whose word does not decide are listed.
void Sizes(const TestTable& table, const TestTable::Kind& kind, std::size_t count, SamplingScratch& scratch,
           std::uint32_t* row) {
    const F64 f;
    const I64 i;
    const std::size_t lanes = hn::Lanes(f);
    const hn::Rebind<std::uint32_t, F64> narrow;
    const VecF step = hn::Set(f, kind.sizes * 0x1p-32);  // of the scaled uniform, per word
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
        const VecU other = hn::GatherIndex(u, table.other_row.data() + kind.first_row, column);
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

/// Studies whose first variance draw needs the exact acceptance test, and their further draws.
void settle_open(const StudyRound& round, const Design& design, const TestTable& table, SamplingScratch& scratch,
                 const StudyBatch& batch) {
    for (std::size_t k = 0; k < scratch.draws.entry.size(); ++k) {
        const std::uint32_t i = scratch.draws.entry[k];
        const std::uint32_t row = batch.row[i];
        const double variance = settled_chi(round, Purpose::study_variance_test, Purpose::study_variance_again,
                                            table.variance, row, k, scratch.draws);
        const double mean = std::fma(batch.theta[i], table.noncentrality[row], scratch.draws.error[k]);
        const double t = mean / std::sqrt(variance);
        batch.statistic[i] = t;
        batch.estimate[i] = t * table.to_estimate[row];
        batch.claim[i] = static_cast<std::uint8_t>(claim_of(t, table.critical[row], design.sides));
    }
}

/// The row that every uniform in [word, word + 1] 2^-32 picks, or `undecided`.
constexpr std::uint32_t undecided = ~0u;
std::uint32_t sure_row(const TestTable& table, const TestTable::Kind& kind, std::uint32_t word) {
    const double step = kind.sizes * 0x1p-32;
    const double x = word * step;  // exact, as are the sums below but for `keep` itself
    const double fraction = x - std::floor(x);
    const auto its = kind.first_row + static_cast<std::uint32_t>(x);
    if (fraction + step <= table.keep[its]) return its;
    if (fraction < table.keep[its] || fraction + step > 1.0) return undecided;
    return static_cast<std::uint32_t>(table.other_row[its]);
}

/// Rows of planned studies, from their planning effects.
void plan_sizes(const TestTable& table, const std::uint8_t* kind, const double* planned, std::size_t count,
                std::uint32_t* row) {
    for (std::size_t i = 0; i < count; ++i) {
        const TestTable::Kind& its = table.kinds[kind ? kind[i] : 0];
        if (its.plan) row[i] = its.first_row + its.plan->position(planned[i]);
    }
}

}  // namespace

std::uint32_t pick_row(const TestTable& table, const TestTable::Kind& kind, double u) {
    const double x = u * kind.sizes;
    const std::uint32_t column = std::min(static_cast<std::uint32_t>(x), kind.sizes - 1);
    const std::uint32_t its = kind.first_row + column;
    return x - column < table.keep[its] ? its : static_cast<std::uint32_t>(table.other_row[its]);
}

Claim claim_of(double statistic, double critical, int sides) {
    if (statistic > critical) return Claim::positive;
    return sides == 2 && statistic < -critical ? Claim::reversed : Claim::inconclusive;
}

double settled_chi(const StudyRound& round, Purpose test, Purpose again, const ChiColumns& chi, std::uint32_t row,
                   std::size_t k, const OpenDraws& open) {
    const double c = chi.c[row];
    if (c <= 0.0) return c < 0.0 ? chi.per_cube[row] * open.root[k] * open.root[k] : 0.0;
    const GammaShape shape{1.0 / (9.0 * c * c), c};
    const std::uint64_t entity = round.entity(open.entry[k]);
    double x = open.root[k];
    const double u = refined(round.key, round.address(test), entity, open.spare[k], 12);
    if (!gamma_accepts(shape, x, u)) {
        Stream stream(round.key, round.address(again), entity);
        x = gamma_normal(stream, shape);
    }
    const double root = 1.0 + c * x;
    return chi.per_cube[row] * (root * root * root);
}

void draw_sizes(const StudyRound& round, const TestTable& table, const std::uint8_t* kind, const double* planned,
                SamplingScratch& scratch, std::uint32_t* row) {
    const std::size_t count = round.entities.count;
    if (table.kinds.size() == 1 && (table.kinds[0].plan || table.kinds[0].sizes == 1)) {
        std::fill(row, row + count, 0u);
        plan_sizes(table, kind, planned, table.kinds[0].plan ? count : 0, row);
        return;
    }
    const Address address = round.address(Purpose::study_size);
    scratch.words.resize(padded(count));
    words(round.key, address, round.entities, scratch.words.data());
    if (table.kinds.size() > 1) {
        for (std::size_t i = 0; i < count; ++i) {
            const TestTable::Kind& its = table.kinds[kind[i]];
            if (its.plan) continue;
            row[i] = sure_row(table, its, scratch.words[i]);
            if (row[i] != undecided) continue;
            row[i] = pick_row(table, its, refined(round.key, address, round.entity(i), scratch.words[i], 32));
        }
        plan_sizes(table, kind, planned, count, row);
        return;
    }
    scratch.open.clear();
    HWY_DYNAMIC_DISPATCH(Sizes)(table, table.kinds[0], count, scratch, row);
    for (const std::uint32_t i : scratch.open) {
        row[i] = pick_row(table, table.kinds[0], refined(round.key, address, round.entity(i), scratch.words[i], 32));
    }
}

void draw_simple_studies(const StudyRound& round, const Design& design, const TestTable& table,
                         SamplingScratch& scratch, StudyBatch batch) {
    scratch.draws.clear();
    HWY_DYNAMIC_DISPATCH(Studies)(round, design.sides == 2, table, scratch, batch);
    settle_open(round, design, table, scratch, batch);
}

}  // namespace lacuna
#endif
