// What `check` shows of a scenario before anything is simulated.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <utility>
#include <vector>

#include "analysis/estimand/result.h"

namespace lacuna {

/// The studies of one lab kind under one regime. Sizes per group (`n2` = 0 with one group): the median,
/// and the range where they vary. Powers, critical value and smallest significant effect at the median.
struct DesignPreview {
    std::string lab, regime, test;
    double alpha = 0.05;
    int sides = 2;
    std::uint32_t n1 = 0, n2 = 0, n1_low = 0, n1_high = 0;
    double effect = 0;           // that `power` is at: the planning effect, or the mean effect of real questions
    bool power_is_exact = true;  // else by the normal drift of interim looks
    double power = 0;            // chance of a significant result, either tail of a two-sided test
    double power_predicted = 0;  // chance of a significant result in the predicted direction
    double critical = 0;         // of the statistic
    double minimal_significant_effect = 0;
};

/// Expected size of the whole run.
struct SizePreview {
    double studies = 0, seconds = 0, memory_bytes = 0, file_bytes = 0;
};

struct Preview {
    std::string title;
    std::vector<std::pair<std::string, std::string>> model;  // key, value as text
    std::vector<std::string> regimes;
    std::vector<std::string> changes;    // what differs between regimes, one a line
    std::vector<DesignPreview> designs;  // by regime, then lab kind
    SizePreview size;
    std::vector<Result> expected;  // exact values (mcse 0), metric by metric with the regimes within
    std::vector<std::pair<std::string, std::string>> untractable;  // regime, why it has no exact values
};

std::string preview_text(const Preview& preview);

/// {"size", "designs", "expected"}.
std::string preview_json(const Preview& preview);

/// The exact expected values, in the columns of results_csv.
std::string preview_csv(const Preview& preview);

/// 1536 as "1.5 kB".
std::string show_bytes(double bytes);

}  // namespace lacuna
