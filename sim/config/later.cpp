#include "sim/config/later.h"

#include <algorithm>
#include <array>

namespace lacuna {

namespace {

constexpr std::array<std::string_view, 13> later_keys{"sweep",
                                                     "registry",
                                                     "run.precision",
                                                     "lab.practices.outcome_switching",
                                                     "lab.practices.condition_dropping",
                                                     "lab.practices.covariate_search",
                                                     "lab.practices.subgroup_search",
                                                     "lab.practices.outlier_removal",
                                                     "lab.practices.hypothesis_reversal",
                                                     "lab.practices.lenient_rounding",
                                                     "lab.practices.selective_line_reporting",
                                                     "lab.practices.direct_bias",
                                                     "journal.registered_reports"};

/// The key without positions: lab.3.practices -> lab.practices.
std::string without_positions(std::string_view key) {
    std::string text;
    while (!key.empty()) {
        const std::size_t dot = std::min(key.find('.'), key.size());
        const std::string_view part = key.substr(0, dot);
        key = key.substr(std::min(dot + 1, key.size()));
        if (part.find_first_not_of("0123456789") == std::string_view::npos) continue;
        if (!text.empty()) text += '.';
        text += part;
    }
    return text;
}

}  // namespace

bool is_for_later(std::string_view key) {
    return std::find(later_keys.begin(), later_keys.end(), without_positions(key)) != later_keys.end();
}

}  // namespace lacuna
