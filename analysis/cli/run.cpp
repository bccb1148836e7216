#include "sim/engine/run.h"

#include <fmt/format.h>

#include <chrono>
#include <filesystem>

#include "analysis/cli/commands.h"
#include "analysis/cli/console.h"
#include "analysis/cli/interrupt.h"
#include "analysis/cli/progress_line.h"
#include "analysis/cli/recording.h"
#include "analysis/cli/run_results.h"
#include "sim/base/fault.h"
#include "analysis/cli/scenario_input.h"
#include "analysis/report/machine.h"
#include "analysis/report/number.h"
#include "analysis/report/preview.h"
#include "analysis/report/tables.h"

namespace lacuna {

namespace {

double steady_seconds() {
    return std::chrono::duration<double>(std::chrono::steady_clock::now().time_since_epoch()).count();
}

std::string output_path(const Options& options) {
    if (!options.output.empty()) return options.output;
    return std::filesystem::path(options.input).stem().string() + ".h5";
}

bool shows_progress(const Options& options) {
    if (options.quiet || options.progress == ShowProgress::never) return false;
    return options.progress == ShowProgress::always || error_is_terminal();
}

void print_results(const Results& results, Format format, const BuildFacts& build) {
    switch (format) {
        case Format::text:
            print(headline_tables(results) + provenance_line(results, build.version));
            break;
        case Format::json:
            print(results_json(results, build.version));
            break;
        case Format::csv:
            print(all_csv(results));
            break;
    }
}

std::string closing_line(const std::string& path, const RunOutcome& outcome, double seconds) {
    const auto studies = static_cast<double>(outcome.studies);
    return fmt::format("{}: {}, {} studies in {} s, {} M studies/s\n", path,
                       show_bytes(static_cast<double>(std::filesystem::file_size(path))), show_count(studies),
                       show_number(seconds, 3), show_number(studies / seconds / 1e6, 3));
}

RunOutcome simulate_into(Recording& recording, Accumulator& accumulator, const Scenario& scenario,
                         const Options& options, const Interrupt& interrupt) {
    ProgressLine line(shows_progress(options), error_is_terminal(), steady_seconds, message);
    RunOptions how;
    how.threads = options.threads;
    how.stop = [&] { return interrupt.requested(); };
    how.progress = [&](const Progress& progress) { line.update(progress); };
    Sinks sinks;
    sinks.literature = [&](std::uint32_t literature, const std::vector<std::vector<double>>& rows) {
        accumulator.add(rows);
        recording.add_literature(literature, rows);
    };
    sinks.rows = [&](const std::string& table, Batch&& batch) { recording.add_rows(table, batch); };
    try {
        const RunOutcome outcome = simulate(scenario, how, sinks);
        line.erase();
        return outcome;
    } catch (...) {
        line.erase();
        throw;
    }
}

/// Overwriting the config by its own outcomes is never meant.
void refuse_own_config(const std::string& path, const std::string& config) {
    std::error_code error;
    if (!std::filesystem::equivalent(path, config, error) || error) return;
    Fault fault;
    fault.place.source = "command line";
    fault.key = "--output";
    fault.message = fmt::format("'{}' is the config itself", path);
    fault.remedy = "give another name with -o";
    throw InputError(std::move(fault));
}

}  // namespace

int run_command(const Options& options, const BuildFacts& build) {
    const Scenario scenario = load_scenario(options.input, overrides(options));
    const std::string path = output_path(options);
    refuse_own_config(path, options.input);
    const double start = steady_seconds();
    Accumulator accumulator = accumulator_for(scenario);
    Recording recording(path, options.overwrite, scenario, read_config_text(options.input), build);
    RunOutcome outcome;
    {
        const Interrupt interrupt(recording.partial_path());
        outcome = simulate_into(recording, accumulator, scenario, options, interrupt);
        recording.finish(!outcome.stopped, outcome.literatures);
    }
    const double seconds = steady_seconds() - start;
    print_results(results_of(accumulator, scenario, recording.digest()), options.format, build);
    if (outcome.stopped) {
        message(fmt::format("lacuna: stopped early: {} of {} literatures are kept in {}\n",
                            show_count(static_cast<double>(outcome.literatures)),
                            show_count(static_cast<double>(scenario.run.literatures)), path));
        return exit_code::stopped;
    }
    if (!options.quiet) message(closing_line(path, outcome, seconds));
    return exit_code::done;
}

}  // namespace lacuna
