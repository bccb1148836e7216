// A small set of results with everything in it that a report must cope with.
#pragma once

#include "analysis/estimand/result.h"

namespace lacuna {

inline Results sample_results() {
    Results results;
    results.title = "Two rules";
    results.digest = "abc123";
    results.regimes = {"standing rules", "blind, \"all\""};
    results.literatures = 400;
    const Spread spread{0.25, 0.28, 0.3, 0.33, 0.36};
    results.results = {{"false_discovery_rate", Scope::conducted, "all", 0, {0.3127, 0.0012, 400}, spread},
                       {"false_discovery_rate", Scope::conducted, "all", 1, {0.3127, 0.0012, 400}, spread},
                       {"false_discovery_rate", Scope::published, "all", 0, {0.2, 0.001, 400}, spread},
                       {"false_discovery_rate", Scope::published, "all", 1, {1.0 / 3, 0.001, 400}, spread},
                       {"power", Scope::published, "all", 0, {std::nullopt, std::nullopt, 0}, std::nullopt},
                       {"power", Scope::published, "all", 1, {0.5, std::nullopt, 1}, std::nullopt},
                       {"publication_rate", Scope::published, "claim=positive", 0, {0.5, 0.1, 2}, spread},
                       {"publication_rate", Scope::published, "claim=positive", 1, {0.5, 0.1, 2}, spread}};
    results.differences = {
        {"false_discovery_rate", Scope::conducted, "all", 1, 0, {0.0, 0.0, 400}, Spread{0, 0, 0, 0, 0}},
        {"false_discovery_rate", Scope::published, "all", 1, 0, {0.13, 0.002, 400}, spread},
        {"power", Scope::published, "all", 1, 0, {std::nullopt, std::nullopt, 0}, std::nullopt},
        {"publication_rate", Scope::published, "claim=positive", 1, 0, {0.0, 0.0, 2}, std::nullopt}};
    return results;
}

}  // namespace lacuna
