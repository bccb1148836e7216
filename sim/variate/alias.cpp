#include "sim/variate/alias.h"

#include <numeric>

#include "sim/base/fault.h"

namespace lacuna {

AliasTable alias_table(std::span<const double> chance) {
    const std::size_t k = chance.size();
    const double sum = std::accumulate(chance.begin(), chance.end(), 0.0);
    if (k == 0 || !(sum > 0.0)) throw Defect("alias_table: no chance above zero");
    AliasTable table{std::vector<double>(k, 1.0), std::vector<std::uint32_t>(k)};
    std::iota(table.other.begin(), table.other.end(), 0u);
    std::vector<double> scaled(k);
    std::vector<std::uint32_t> small, large;
    for (std::size_t i = 0; i < k; ++i) {
        scaled[i] = chance[i] * static_cast<double>(k) / sum;
        (scaled[i] < 1.0 ? small : large).push_back(static_cast<std::uint32_t>(i));
    }
    while (!small.empty() && !large.empty()) {
        const std::uint32_t poor = small.back();
        const std::uint32_t rich = large.back();
        small.pop_back();
        table.keep[poor] = scaled[poor];
        table.other[poor] = rich;
        scaled[rich] -= 1.0 - scaled[poor];
        if (scaled[rich] < 1.0) {
            large.pop_back();
            small.push_back(rich);
        }
    }
    // What is left is 1 but for rounding. A column without any chance must still never be kept.
    for (const std::uint32_t column : small) {
        if (chance[column] == 0.0 && !large.empty()) {
            table.keep[column] = 0.0;
            table.other[column] = large.back();
        }
    }
    return table;
}

}  // namespace lacuna
