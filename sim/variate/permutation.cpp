#include "sim/variate/permutation.h"

#include <algorithm>
#include <bit>
#include <numeric>
#include <utility>

namespace lacuna {

namespace {

/// A 32-bit mixer: xor-shift and multiply (constants of Appleby's MurmurHash3 finaliser, 2011).
std::uint32_t mixed(std::uint32_t x) {
    x ^= x >> 16;
    x *= 0x85EBCA6Bu;
    x ^= x >> 13;
    x *= 0xC2B2AE35u;
    return x ^ x >> 16;
}

/// Uniform on 0 .. range-1, without bias: Lemire (2019, "Fast random integer generation in an
/// interval", ACM TOMACS 29), algorithm 5 with 32-bit words. `range` from 1.
std::uint32_t below(Stream& stream, std::uint32_t range) {
    std::uint64_t product = std::uint64_t{stream()} * range;
    if (static_cast<std::uint32_t>(product) < range) {
        const std::uint32_t surplus = (0u - range) % range;  // 2^32 mod range: words that would tip the scale
        while (static_cast<std::uint32_t>(product) < surplus) product = std::uint64_t{stream()} * range;
    }
    return static_cast<std::uint32_t>(product >> 32);
}

std::vector<std::uint16_t> shuffled(std::uint32_t size, Stream stream) {
    std::vector<std::uint16_t> table(size);
    std::iota(table.begin(), table.end(), std::uint16_t{0});
    for (std::uint32_t left = size; left > 1; --left) std::swap(table[left - 1], table[below(stream, left)]);
    return table;
}

}  // namespace

Permutation::Permutation(std::uint64_t size, Stream stream) : size_(size) {
    if (size <= largest_table) {
        table_ = shuffled(static_cast<std::uint32_t>(size), stream);
        return;
    }
    const auto bits = static_cast<unsigned>(std::bit_width(size - 1));
    low_bits_ = bits / 2;
    high_bits_ = bits - low_bits_;
    for (std::uint32_t& key : keys_) key = stream();
}

std::uint64_t Permutation::once(std::uint64_t x) const {
    // Unbalanced halves keep their places: even rounds change the low half, odd rounds the high one.
    auto low = static_cast<std::uint32_t>(x & ((std::uint64_t{1} << low_bits_) - 1));
    auto high = static_cast<std::uint32_t>(x >> low_bits_);
    const std::uint32_t low_mask = (1u << low_bits_) - 1u;
    const std::uint32_t high_mask = (1u << high_bits_) - 1u;
    for (unsigned round = 0; round < rounds; round += 2) {
        low ^= mixed(high ^ keys_[round]) & low_mask;
        high ^= mixed(low ^ keys_[round + 1]) & high_mask;
    }
    return std::uint64_t{high} << low_bits_ | low;
}

void Permutation::images(std::uint64_t first, std::size_t count, std::vector<std::uint64_t>& out) const {
    out.resize(count);
    if (!table_.empty()) {
        std::copy_n(table_.begin() + static_cast<std::ptrdiff_t>(first), count, out.begin());
        return;
    }
    for (std::size_t i = 0; i < count; ++i) out[i] = once(first + i);
    for (std::size_t i = 0; i < count; ++i) {
        while (out[i] >= size_) out[i] = once(out[i]);
    }
}

}  // namespace lacuna
