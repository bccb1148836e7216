// A random permutation of 0 .. size-1. Up to 2^16 it is a stored table, shuffled exactly: every one of
// the size! orders has the same chance (Durstenfeld 1964, "Algorithm 235: Random permutation", CACM 7).
// Above, where a table would cost memory per literature, it is computed: a Feistel network on the smallest
// power of two that holds `size`, walked until the value falls inside (Black & Rogaway 2002, "Ciphers
// with arbitrary finite domains", CT-RSA). Its halves have 8 bits or more: networks on halves of 1 to 3
// bits are visibly biased.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "sim/random/stream.h"

namespace lacuna {

class Permutation {
public:
    static constexpr std::uint64_t largest_table = std::uint64_t{1} << 16;

    /// `size` from 1 to 2^40. All of its randomness are the first draws of `stream`.
    Permutation(std::uint64_t size, Stream stream);

    /// out[i] = image of first + i.
    void images(std::uint64_t first, std::size_t count, std::vector<std::uint64_t>& out) const;

private:
    static constexpr unsigned rounds = 8;

    std::uint64_t once(std::uint64_t x) const;

    std::uint64_t size_;
    std::vector<std::uint16_t> table_;  // of a small one; else empty, and the network's shape and keys:
    unsigned low_bits_ = 0, high_bits_ = 0;
    std::uint32_t keys_[rounds] = {};
};

}  // namespace lacuna
