#include "analysis/cli/recorded_run.h"

#include <fmt/format.h>

#include "analysis/record/literatures.h"
#include "sim/base/fault.h"
#include "sim/config/echo.h"
#include "sim/tally/run_tables.h"

namespace lacuna {

namespace {

Scenario scenario_of(const OutcomeReader& file, const std::string& path) {
    try {
        return scenario_of_resolved(file.facts().resolved_config, path);
    } catch (const InputError& error) {
        throw RunError(fmt::format("{}: the scenario stored in it cannot be read: {}", path, error.what()));
    }
}

}  // namespace

RecordedRun::RecordedRun(const std::string& its_path)
    : path(its_path), file(its_path), scenario(scenario_of(file, its_path)) {}

Results RecordedRun::results() const {
    Accumulator accumulator = accumulator_for(scenario);
    read_literatures(file, path, literatures_table(scenario),
                     [&](const std::vector<std::vector<double>>& rows) { accumulator.add(rows); });
    return results_of(accumulator, scenario, file.facts().digest);
}

}  // namespace lacuna
