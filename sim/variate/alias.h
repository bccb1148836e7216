// Drawing from a finite discrete distribution with one uniform and one table look-up.
// Alias method: Walker (1977, "An efficient method for generating discrete random variables with
// general distributions", ACM TOMS 3); construction in linear time by Vose (1991, "A linear algorithm
// for generating random numbers with a given distribution", IEEE Trans. Software Eng. 17).
#pragma once

#include <cstddef>
#include <cstdint>
#include <span>
#include <vector>

namespace lacuna {

/// Columns of chances: `keep[i]` of column i stays i, the rest goes to `other[i]`. A uniform u picks
/// column floor(u k) and compares the fraction, so chances hold to about k * 2^-52.
struct AliasTable {
    std::vector<double> keep;
    std::vector<std::uint32_t> other;

    std::size_t pick(double u) const {
        const double x = u * static_cast<double>(keep.size());
        const auto column = static_cast<std::size_t>(x);
        return x - static_cast<double>(column) < keep[column] ? column : other[column];
    }
};

/// `chance`: at least one entry, none negative, sum positive (it need not be 1).
AliasTable alias_table(std::span<const double> chance);

}  // namespace lacuna
