#include "sim/random/kernels.h"

#include <cmath>

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/random/kernels.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

#include "sim/random/philox-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

constexpr std::size_t group = 32;  // entities that share 16 blocks
constexpr std::size_t group_blocks = 16;
constexpr std::size_t most_lanes = 2 * HWY_MAX_BYTES / 8;  // of two vectors

HWY_INLINE std::size_t lockstep_lanes() { return 2 * hn::Lanes(U64()); }

HWY_INLINE U2 load_words(const std::uint64_t* from) {
    const U64 d;
    return {hn::LoadU(d, from), hn::LoadU(d, from + hn::Lanes(d))};
}

HWY_INLINE void store_words(U2 x, std::uint64_t* to) {
    const U64 d;
    hn::StoreU(x.a, d, to);
    hn::StoreU(x.b, d, to + hn::Lanes(d));
}

/// Fills out[0..31] with the draws of the 32 entities from `first` (a multiple of 32) on.
template <class Draw>
HWY_INLINE void fill_group(const RoundKeys& key, Address address, std::uint64_t first, double* out, Draw draw) {
    const std::uint64_t block = first / group * group_blocks;
    for (std::size_t i = 0; i < group_blocks; i += lockstep_lanes()) {
        const Pair pair = draw(philox(counter(address, blocks_from(block + i)), key));
        store(pair.first, out + i);
        store(pair.second, out + group_blocks + i);
    }
}

template <class Draw>
HWY_INLINE void fill_range(const RoundKeys& key, Address address, std::uint64_t first, std::size_t count,
                           double* out, Draw draw) {
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
HWY_INLINE void fill_scattered(const RoundKeys& key, Address address, Entities entities, double* out, Draw draw) {
    std::uint64_t block[most_lanes] = {};
    double drawn[2][most_lanes];
    for (std::size_t i = 0; i < entities.count; i += lockstep_lanes()) {
        const std::size_t n = HWY_MIN(lockstep_lanes(), entities.count - i);
        for (std::size_t lane = 0; lane < n; ++lane) {
            const std::uint64_t entity = entities.first + entities.offsets[i + lane];
            block[lane] = entity / group * group_blocks + entity % group_blocks;
        }
        const Pair pair = draw(philox(counter(address, load_words(block)), key));
        store(pair.first, drawn[0]);
        store(pair.second, drawn[1]);
        for (std::size_t lane = 0; lane < n; ++lane) {
            const std::uint64_t entity = entities.first + entities.offsets[i + lane];
            out[i + lane] = drawn[entity / group_blocks % 2][lane];
        }
    }
}

template <class Draw>
HWY_INLINE void fill(StreamKey seed, Address address, Entities entities, double* out, Draw draw) {
    const RoundKeys key(seed);
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

/// Stores the low 32 or 16 bits of each lane.
template <class Word>
HWY_INLINE void store_low(U2 x, Word* to) {
    const hn::Rebind<Word, U64> narrow;
    hn::StoreU(hn::TruncateTo(narrow, x.a), narrow, to);
    hn::StoreU(hn::TruncateTo(narrow, x.b), narrow, to + hn::Lanes(narrow));
}

/// Entities that 16 blocks serve with a word each.
template <class Word>
constexpr std::size_t word_group_size = group_blocks * 16 / sizeof(Word);

/// Fills `out` with the words of a whole group of entities from `first` (a multiple of its size) on.
template <class Word>
HWY_INLINE void word_group(const RoundKeys& key, Address address, std::uint64_t first, Word* out) {
    const std::uint64_t block = first / word_group_size<Word> * group_blocks;
    for (std::size_t i = 0; i < group_blocks; i += lockstep_lanes()) {
        const Block b = philox(counter(address, blocks_from(block + i)), key);
        store_low(b.w0, out + i);
        store_low(b.w1, out + group_blocks + i);
        store_low(b.w2, out + 2 * group_blocks + i);
        store_low(b.w3, out + 3 * group_blocks + i);
        if constexpr (sizeof(Word) == 2) {
            store_low(right<16>(b.w0), out + 4 * group_blocks + i);
            store_low(right<16>(b.w1), out + 5 * group_blocks + i);
            store_low(right<16>(b.w2), out + 6 * group_blocks + i);
            store_low(right<16>(b.w3), out + 7 * group_blocks + i);
        }
    }
}

template <class Word>
HWY_INLINE void word_range(const RoundKeys& key, Address address, std::uint64_t first, std::size_t count,
                           Word* out) {
    constexpr std::size_t size = word_group_size<Word>;
    Word edge[size];
    std::size_t done = 0;
    while (done < count) {
        const std::uint64_t entity = first + done;
        const std::size_t skip = entity % size;
        if (skip == 0 && count - done >= size) {
            word_group(key, address, entity, out + done);
            done += size;
            continue;
        }
        word_group(key, address, entity - skip, edge);
        for (std::size_t i = skip; i < size && done < count; ++i) out[done++] = edge[i];
    }
}

/// Words of entities in any order.
template <class Word>
HWY_INLINE void words_scattered(const RoundKeys& key, Address address, Entities entities, Word* out) {
    constexpr std::size_t size = word_group_size<Word>;
    std::uint64_t block[most_lanes] = {};
    std::uint64_t drawn[4][most_lanes];
    for (std::size_t i = 0; i < entities.count; i += lockstep_lanes()) {
        const std::size_t n = HWY_MIN(lockstep_lanes(), entities.count - i);
        for (std::size_t lane = 0; lane < n; ++lane) {
            const std::uint64_t entity = entities.first + entities.offsets[i + lane];
            block[lane] = entity / size * group_blocks + entity % group_blocks;
        }
        const Block b = philox(counter(address, load_words(block)), key);
        store_words(b.w0, drawn[0]);
        store_words(b.w1, drawn[1]);
        store_words(b.w2, drawn[2]);
        store_words(b.w3, drawn[3]);
        for (std::size_t lane = 0; lane < n; ++lane) {
            const std::uint64_t place = (entities.first + entities.offsets[i + lane]) / group_blocks;
            const std::uint64_t its = drawn[place % 4][lane];
            out[i + lane] = static_cast<Word>(sizeof(Word) == 2 && place / 4 % 2 == 1 ? its >> 16 : its);
        }
    }
}

template <class Word>
HWY_INLINE void fill_words(StreamKey seed, Address address, Entities entities, Word* out) {
    const RoundKeys key(seed);
    if (entities.offsets == nullptr) {
        word_range(key, address, entities.first, entities.count, out);
    } else {
        words_scattered(key, address, entities, out);
    }
}

void Words16(StreamKey seed, Address address, Entities entities, std::uint16_t* out) {
    fill_words(seed, address, entities, out);
}

void Words32(StreamKey seed, Address address, Entities entities, std::uint32_t* out) {
    fill_words(seed, address, entities, out);
}

const char* TargetName() { return hwy::TargetName(HWY_TARGET); }

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(Uniforms);
HWY_EXPORT(Normals);
HWY_EXPORT(Words16);
HWY_EXPORT(Words32);
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

void words(StreamKey key, Address address, Entities entities, std::uint16_t* out) {
    HWY_DYNAMIC_DISPATCH(Words16)(key, address, entities, out);
}

void words(StreamKey key, Address address, Entities entities, std::uint32_t* out) {
    HWY_DYNAMIC_DISPATCH(Words32)(key, address, entities, out);
}

double refined(StreamKey key, Address address, std::uint64_t entity, std::uint32_t word, int bits) {
    address.index += static_cast<std::uint32_t>(address.purpose);
    address.purpose = Purpose::refinement;
    // A sum of many bits would round up to the next word, and beyond the last word to 1.
    const double sum = word + Stream(key, address, entity).uniform();
    return std::ldexp(std::fmin(sum, std::nextafter(word + 1.0, 0.0)), -bits);
}

std::string vector_target() { return HWY_DYNAMIC_DISPATCH(TargetName)(); }

}  // namespace lacuna
#endif
