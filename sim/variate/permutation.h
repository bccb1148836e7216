// A random permutation of 0 .. size-1. Up to 2^16 it is shuffled and stored (Durstenfeld 1964, "Algorithm 235:
// random permutation", CACM 7), exactly uniform. Above it is computed, not stored: a Feistel network of eight
// rounds on the smallest power of two that holds `size`, walked until the value falls inside (Black & Rogaway
// 2002, "Ciphers with arbitrary finite domains", CT-RSA); with halves of eight bits or more no bias is seen.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "sim/random/stream.h"

namespace lacuna {

class Permutation {
public:
    static constexpr std::uint64_t largest_stored = 65536;

    /// `size` from 1 to 2^40; drawn from `stream`.
    Permutation(std::uint64_t size, Stream stream);

    /// out[i] = image of first + i.
    void images(std::uint64_t first, std::size_t count, std::vector<std::uint64_t>& out) const;

private:
    static constexpr unsigned rounds = 8;
    void shuffle(Stream& stream);
    std::uint64_t once(std::uint64_t x) const;

    std::uint64_t size_;
    std::vector<std::uint32_t> stored_;
    unsigned low_bits_ = 1, high_bits_ = 1;
    std::uint32_t keys_[rounds] = {};
};

}  // namespace lacuna
