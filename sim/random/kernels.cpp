#include "sim/random/kernels.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/random/kernels.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

#include "sim/random/philox-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

constexpr std::size_t group = 32;          // entities
constexpr std::size_t group_blocks = 16;   // blocks that serve them

/// Fills out[0..31] with the draws of the 32 entities from `first` (a multiple of 32) on.
template <class Draw>
HWY_INLINE void fill_group(StreamKey key, Address address, std::uint64_t first, double* out, Draw draw) {
    const U64 d;
    const F64 f;
    const std::uint64_t block = first / group * group_blocks;
    for (std::size_t i = 0; i < group_blocks; i += hn::Lanes(d)) {
        const Pair pair = draw(philox(counter(address, hn::Iota(d, block + i)), key));
        hn::StoreU(pair.first, f, out + i);
        hn::StoreU(pair.second, f, out + group_blocks + i);
    }
}

template <class Draw>
HWY_INLINE void fill_range(StreamKey key, Address address, std::uint64_t first, std::size_t count, double* out,
                           Draw draw) {
    alignas(64) double edge[group];
    std::size_t done = 0;
    while (done < count) {
        const std::uint64_t entity = first + done;
        const std::size_t skip = entity % group;
        if (skip == 0 && count - done >= group) {
            fill_group(key, address, entity, out + done, draw);
            done += group;
            continue;
        }
        fill_group(key, address, entity - skip, edge, draw);
        for (std::size_t i = skip; i < group && done < count; ++i) out[done++] = edge[i];
    }
}

/// Draws for entities in any order; each block is computed for one entity, so twice the cost.
template <class Draw>
HWY_INLINE void fill_scattered(StreamKey key, Address address, Entities entities, double* out, Draw draw) {
    const U64 d;
    const F64 f;
    const std::size_t lanes = hn::Lanes(d);
    alignas(64) std::uint64_t block[HWY_MAX_BYTES / 8] = {};
    alignas(64) std::uint64_t half[HWY_MAX_BYTES / 8] = {};
    alignas(64) double drawn[HWY_MAX_BYTES / 8];
    for (std::size_t i = 0; i < entities.count; i += lanes) {
        const std::size_t n = HWY_MIN(lanes, entities.count - i);
        for (std::size_t lane = 0; lane < n; ++lane) {
            const std::uint64_t entity = entities.first + entities.offsets[i + lane];
            block[lane] = entity / group * group_blocks + entity % group_blocks;
            half[lane] = entity / group_blocks % 2;
        }
        const Pair pair = draw(philox(counter(address, hn::Load(d, block)), key));
        const auto first_half = hn::RebindMask(f, hn::Eq(hn::Load(d, half), hn::Zero(d)));
        hn::Store(hn::IfThenElse(first_half, pair.first, pair.second), f, drawn);
        for (std::size_t lane = 0; lane < n; ++lane) out[i + lane] = drawn[lane];
    }
}

template <class Draw>
HWY_INLINE void fill(StreamKey key, Address address, Entities entities, double* out, Draw draw) {
    if (entities.offsets == nullptr) {
        fill_range(key, address, entities.first, entities.count, out, draw);
    } else {
        fill_scattered(key, address, entities, out, draw);
    }
}

void Uniforms(StreamKey key, Address address, Entities entities, double* out) {
    fill(key, address, entities, out, [](const Block& b) HWY_ATTR { return uniform_pair(b); });
}

void Normals(StreamKey key, Address address, Entities entities, double* out) {
    fill(key, address, entities, out, [](const Block& b) HWY_ATTR { return normal_pair(b); });
}

const char* TargetName() { return hwy::TargetName(HWY_TARGET); }

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(Uniforms);
HWY_EXPORT(Normals);
HWY_EXPORT(TargetName);

void uniforms(StreamKey key, Address address, Entities entities, double* out) {
    HWY_DYNAMIC_DISPATCH(Uniforms)(key, address, entities, out);
}

void normals(StreamKey key, Address address, Entities entities, double* out) {
    HWY_DYNAMIC_DISPATCH(Normals)(key, address, entities, out);
}

double uniform(StreamKey key, Address address, std::uint64_t entity) {
    const std::uint64_t block = entity / 32 * 16 + entity % 16;
    Stream stream(key, address, block);
    if (entity / 16 % 2 == 1) stream.uniform();
    return stream.uniform();
}

std::string vector_target() { return HWY_DYNAMIC_DISPATCH(TargetName)(); }

}  // namespace lacuna
#endif
