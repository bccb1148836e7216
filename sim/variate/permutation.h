// A random permutation of 0 .. size-1 that is computed, not stored: a Feistel network on the smallest
// power of two that holds `size`, walked until the value falls inside (Black & Rogaway 2002, "Ciphers
// with arbitrary finite domains", CT-RSA; six rounds).
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "sim/random/stream.h"

namespace lacuna {

class Permutation {
public:
    /// `size` from 1 to 2^40; the round keys are the first draws of `stream`.
    Permutation(std::uint64_t size, Stream stream);

    /// out[i] = image of first + i.
    void images(std::uint64_t first, std::size_t count, std::vector<std::uint64_t>& out) const;

private:
    std::uint64_t once(std::uint64_t x) const;

    std::uint64_t size_;
    unsigned low_bits_, high_bits_;
    std::uint32_t keys_[6];
};

}  // namespace lacuna
