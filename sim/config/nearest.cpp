#include "sim/config/nearest.h"

#include <fmt/format.h>

#include <algorithm>

namespace lacuna {

std::size_t edits(std::string_view a, std::string_view b) {
    std::vector<std::size_t> before, above(b.size() + 1), row(b.size() + 1);
    for (std::size_t j = 0; j <= b.size(); ++j) above[j] = j;
    for (std::size_t i = 1; i <= a.size(); ++i) {
        row[0] = i;
        for (std::size_t j = 1; j <= b.size(); ++j) {
            row[j] = std::min({above[j] + 1, row[j - 1] + 1, above[j - 1] + (a[i - 1] != b[j - 1])});
            if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1]) {
                row[j] = std::min(row[j], before[j - 2] + 1);
            }
        }
        before = above;
        above = row;
    }
    return above[b.size()];
}

std::string nearest(std::string_view word, const std::vector<std::string>& known) {
    constexpr std::size_t longest = 64;  // no key is as long; keeps garbage cheap
    if (word.size() > longest) return "";
    const std::size_t allowed = std::clamp<std::size_t>(word.size() / 3, 1, 4);
    std::string best;
    std::size_t fewest = allowed + 1;
    for (const std::string& candidate : known) {
        const std::size_t needed = edits(word, candidate);
        if (needed < fewest && needed < candidate.size()) {
            fewest = needed;
            best = candidate;
        }
    }
    return best;
}

std::string suggestion(std::string_view word, const std::vector<std::string>& known) {
    const std::string best = nearest(word, known);
    if (!best.empty()) return fmt::format("did you mean {}?", best);
    return fmt::format("known: {}", fmt::join(known, ", "));
}

}  // namespace lacuna
