#include <cstdint>

#include "analysis/report/entries.h"
#include "analysis/report/machine.h"
#include "analysis/report/preview.h"

namespace lacuna {

namespace {

/// The preview's exact values as results.
Results expected_results(const Preview& preview) {
    Results results;
    results.regimes = preview.regimes;
    results.results = preview.expected;
    return results;
}

Json design_entry(const DesignPreview& design) {
    return {{"lab", design.lab},
            {"regime", design.regime},
            {"test", design.test},
            {"alpha", design.alpha},
            {"sides", design.sides},
            {"n1", design.n1},
            {"n2", design.n2},
            {"n1_low", design.n1_low},
            {"n1_high", design.n1_high},
            {"effect", json_number(design.effect)},
            {"power", json_number(design.power)},
            {"power_predicted", json_number(design.power_predicted)},
            {"critical", json_number(design.critical)},
            {"minimal_significant_effect", json_number(design.minimal_significant_effect)}};
}

}  // namespace

std::string preview_json(const Preview& preview) {
    Json all{{"size",
              {{"studies", json_number(preview.size.studies)},
               {"seconds", json_number(preview.size.seconds)},
               {"memory_bytes", static_cast<std::uint64_t>(preview.size.memory_bytes)},
               {"file_bytes", static_cast<std::uint64_t>(preview.size.file_bytes)}}},
             {"designs", Json::array()},
             {"expected", Json::array()}};
    for (const DesignPreview& design : preview.designs) all["designs"].push_back(design_entry(design));
    const Results expected = expected_results(preview);
    for (const Result& result : expected.results) all["expected"].push_back(json_entry(expected, result));
    return json_text(all);
}

std::string preview_csv(const Preview& preview) { return results_csv(expected_results(preview)); }

}  // namespace lacuna
