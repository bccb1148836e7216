#include "sim/design/errors.h"

#include "sim/variate/gamma.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/design/errors.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

#include "sim/design/squeeze-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

void Errors(const StudyRound& round, Purpose purpose, const ChiColumns& chi, const std::uint32_t* row,
            SamplingScratch& scratch, double* z, double* v) {
    const RoundKeys keys(round.key);
    const std::size_t lanes = 2 * hn::Lanes(F64());
    const std::size_t count = round.entities.count;
    for (std::size_t at = 0; at < count; at += lanes) {
        const U2 block = entity_blocks(round, at, HWY_MIN(lanes, count - at));
        const Block bits = philox(counter(round.address(purpose), block), keys);
        const Pair data = normal_pair(bits);
        store(data.first, z + at);
        const I2 rows = load_rows(row + at);
        const F2 c = gather(chi.c, rows);
        const F2 y = data.second * F2{hn::Max(c.a, hn::Zero(F64())), hn::Max(c.b, hn::Zero(F64()))};
        const F2 root = y + all(1.0);
        const F2 cube = root * root * root;
        const F2 square = data.second * data.second;
        const F2 variate{hn::IfThenElse(hn::Lt(c.a, hn::Zero(F64())), square.a, cube.a),
                         hn::IfThenElse(hn::Lt(c.b, hn::Zero(F64())), square.b, cube.b)};
        store(gather(chi.per_cube, rows) * variate, v + at);
        list_open(data.first, data.second, y, spare_bits(bits), at, count, scratch);
    }
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(Errors);

void draw_errors(const StudyRound& round, ErrorPurposes purposes, const ChiColumns& chi, const std::uint32_t* row,
                 SamplingScratch& scratch, double* z, double* v) {
    scratch.clear_open();
    HWY_DYNAMIC_DISPATCH(Errors)(round, purposes.data, chi, row, scratch, z, v);
    for (std::size_t k = 0; k < scratch.open.size(); ++k) {
        const std::uint32_t i = scratch.open[k];
        v[i] = settled_chi(round, purposes.test, purposes.again, chi, row[i], k, scratch);
    }
}

}  // namespace lacuna
#endif
