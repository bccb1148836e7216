#include "sim/design/errors.h"

#include "sim/variate/gamma.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/design/errors.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

#include "sim/design/studies-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

/// Scaled chi-squareds of normal draws x, stored; what the squeeze leaves open is listed.
HWY_INLINE void store_chi(const ChiColumns& chi, I2 rows, F2 error, F2 x, F2 spare, std::size_t at, std::size_t count,
                          OpenDraws& open, double* v) {
    const F64 f;
    const F2 c = gather(chi.c, rows);
    const F2 y = x * F2{hn::Max(c.a, hn::Zero(f)), hn::Max(c.b, hn::Zero(f))};
    const F2 root = y + all(1.0);
    const F2 cube = root * root * root;
    const F2 square = x * x;
    const Mask2 one_degree = less(c, all(0.0));
    const F2 variate{hn::IfThenElse(one_degree.a, square.a, cube.a), hn::IfThenElse(one_degree.b, square.b, cube.b)};
    store(gather(chi.per_cube, rows) * variate, v + at);
    list_open(error, x, y, spare, at, count, open);
}

/// `other_v` holds the normals behind the second chi-squared, and is filled with it; null where there is none.
void Errors(const StudyRound& round, const ChiColumns& chi, const ChiColumns& other, const std::uint32_t* row,
            SamplingScratch& scratch, double* z, double* v, double* other_v) {
    const std::size_t count = round.entities.count;
    for_data(round, [&](std::size_t at, const Block& bits) HWY_ATTR {
        const Pair data = normal_pair(bits);
        const I2 rows = load_rows(row + at);
        store(data.first, z + at);
        store_chi(chi, rows, data.first, data.second, spare_bits(bits), at, count, scratch.draws, v);
        if (other_v) {
            const F2 x = load(other_v + at);
            store_chi(other, rows, data.first, x, other_spare_bits(bits), at, count, scratch.other_draws, other_v);
        }
    });
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(Errors);

namespace {

void settle(const StudyRound& round, Purpose test, Purpose again, const ChiColumns& chi, const std::uint32_t* row,
            const OpenDraws& open, double* v) {
    for (std::size_t k = 0; k < open.entry.size(); ++k) {
        const std::uint32_t i = open.entry[k];
        v[i] = settled_chi(round, test, again, chi, row[i], k, open);
    }
}

}  // namespace

void draw_errors(const StudyRound& round, const ChiColumns& chi, const std::uint32_t* row, SamplingScratch& scratch,
                 double* z, double* v) {
    scratch.draws.clear();
    HWY_DYNAMIC_DISPATCH(Errors)(round, chi, chi, row, scratch, z, v, nullptr);
    settle(round, Purpose::study_variance_test, Purpose::study_variance_again, chi, row, scratch.draws, v);
}

void draw_two_errors(const StudyRound& round, const ChiColumns& chi, const ChiColumns& other, const std::uint32_t* row,
                     SamplingScratch& scratch, double* z, double* v, double* other_v) {
    scratch.draws.clear();
    scratch.other_draws.clear();
    normals(round.key, round.address(Purpose::study_other_data), round.entities, other_v);
    HWY_DYNAMIC_DISPATCH(Errors)(round, chi, other, row, scratch, z, v, other_v);
    settle(round, Purpose::study_variance_test, Purpose::study_variance_again, chi, row, scratch.draws, v);
    settle(round, Purpose::study_other_test, Purpose::study_other_again, other, row, scratch.other_draws, other_v);
}

}  // namespace lacuna
#endif
