#include "analysis/cli/run_results.h"

#include "analysis/estimand/registry.h"
#include "sim/tally/run_tables.h"

namespace lacuna {

Accumulator accumulator_for(const Scenario& scenario) {
    std::vector<Estimands> by_regime;
    for (const Regime& regime : scenario.regimes) {
        by_regime.push_back(all_estimands(lab_names(scenario), regime.science.design.findings));
    }
    return Accumulator(std::move(by_regime));
}

Results results_of(const Accumulator& accumulator, const Scenario& scenario, const std::string& digest) {
    Results results;
    results.title = scenario.title;
    results.digest = digest;
    results.regimes = regime_names(scenario);
    results.literatures = accumulator.literatures();
    results.results = accumulator.results();
    results.differences = accumulator.differences();
    return results;
}

}  // namespace lacuna
