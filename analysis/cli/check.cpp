#include <fmt/format.h>

#include "analysis/cli/commands.h"
#include "analysis/cli/console.h"
#include "analysis/cli/design_preview.h"
#include "analysis/cli/expected.h"
#include "analysis/cli/model_preview.h"
#include "analysis/cli/scenario_input.h"
#include "analysis/cli/trial.h"
#include "sim/config/differences.h"
#include "sim/config/echo.h"
#include "sim/tally/run_tables.h"

namespace lacuna {

namespace {

constexpr double trial_seconds = 0.3;

std::string shown(const std::string& json) { return json.empty() ? "(none)" : json; }

std::vector<std::string> change_lines(const Scenario& scenario) {
    std::vector<std::string> lines;
    for (const Difference& change : differences(scenario)) {
        lines.push_back(fmt::format("{}: {} = {} instead of {}", change.regime, change.key, shown(change.here),
                                    shown(change.first)));
    }
    return lines;
}

Preview preview_of(const Scenario& scenario, unsigned threads) {
    Preview preview;
    preview.title = scenario.title;
    preview.model = model_lines(resolved_json(scenario));
    preview.regimes = regime_names(scenario);
    preview.changes = change_lines(scenario);
    for (const Regime& regime : scenario.regimes) {
        for (DesignPreview& design : preview_designs(regime)) preview.designs.push_back(std::move(design));
    }
    preview.size = measure_size(scenario, threads, trial_seconds);
    add_expected(scenario, preview);
    return preview;
}

}  // namespace

int check_command(const Options& options) {
    const Preview preview = preview_of(load_scenario(options.input, overrides(options)), options.threads);
    switch (options.format) {
        case Format::text:
            print(preview_text(preview));
            break;
        case Format::json:
            print(preview_json(preview));
            break;
        case Format::csv:
            print(preview_csv(preview));
            break;
    }
    return exit_code::done;
}

}  // namespace lacuna
