// Batches of uniforms, normals and short words, one per entity, by vector kernels chosen at run time.
//
// One Philox block serves two entities. In every group of 32 entities the first 16 take the first
// half of blocks 0..15 and the others the second half, so a vector of blocks is stored without
// shuffling, whatever its width:
//   entity e: block (e / 32) * 16 + e % 16, half (e / 16) % 2.
#pragma once

#include <cstddef>
#include <cstdint>
#include <string>

#include "sim/random/stream.h"

namespace lacuna {

/// The entities of a batch: first + offsets[i], or first + i where `offsets` is null. `count` of them.
struct Entities {
    std::uint64_t first = 0;
    const std::uint32_t* offsets = nullptr;
    std::size_t count = 0;
};

/// out[i] = the uniform of entity i at `address`: on (0, 1), an odd multiple of 2^-53.
void uniforms(StreamKey key, Address address, Entities entities, double* out);

/// out[i] = the standard normal of entity i at `address`, by Box & Muller (1958, "A note on the
/// generation of random normal deviates", Ann. Math. Stat. 29): log and sine to about 1 ulp.
void normals(StreamKey key, Address address, Entities entities, double* out);

/// The uniform of a single entity: the same bits as the batch.
double uniform(StreamKey key, Address address, std::uint64_t entity);

/// out[i] = the 16-bit word of entity i at `address`: the leading bits of its uniform, for decisions that
/// seldom need more. One Philox block serves eight entities:
///   entity e: block (e / 128) * 16 + e % 16, 32-bit word (e / 16) % 4, its low half for (e / 64) % 2 = 0.
/// An address serves words of one width, uniforms or normals, never two of them.
void words(StreamKey key, Address address, Entities entities, std::uint16_t* out);

/// The same with 32 bits, four entities a block:
///   entity e: block (e / 64) * 16 + e % 16, word (e / 16) % 4.
void words(StreamKey key, Address address, Entities entities, std::uint32_t* out);

/// The uniform on (0, 1), never its ends, whose leading bits are `word` (of `bits` bits): asked for when
/// the word alone does not decide.
double refined(StreamKey key, Address address, std::uint64_t entity, std::uint32_t word, int bits);

/// The vector instruction set in use, e.g. "AVX3".
std::string vector_target();

}  // namespace lacuna
