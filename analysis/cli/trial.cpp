#include "analysis/cli/trial.h"

#include <sys/resource.h>

#include <algorithm>
#include <chrono>
#include <cmath>

#include "sim/engine/run.h"
#include "sim/literature/expected_studies.h"
#include "sim/model/schema.h"
#include "sim/tally/run_tables.h"

namespace lacuna {

namespace {

/// Deflated over plain size of study columns, as measured on stored runs.
constexpr double deflated = 0.45;
/// Literatures of about this many studies show the cost of a study as well as larger ones.
constexpr double studies_enough = 2e5;

double studies_a_literature(const Scenario& scenario) {
    double studies = 0.0;
    for (std::size_t first : group_by_science(scenario.regimes).firsts) {
        studies += expected_studies(scenario.regimes[first].science);
    }
    return studies;
}

/// The scenario with smaller literatures where they are huge, and more of them than there is time for.
Scenario smaller(Scenario scenario, double studies) {
    const double scale = std::min(1.0, studies_enough / std::max(studies, 1.0));
    const auto scaled = [&](std::uint64_t count) {
        return std::max<std::uint64_t>(
            1, static_cast<std::uint64_t>(std::llround(static_cast<double>(count) * scale)));
    };
    for (Regime& regime : scenario.regimes) {
        regime.science.field.questions = scaled(regime.science.field.questions);
        regime.science.field.labs = scaled(regime.science.field.labs);
    }
    scenario.run.literatures = 1u << 30;
    return scenario;
}

double plain_bytes(const Batch& batch) {
    double bytes = 0.0;
    for (const ColumnData& column : batch.columns) {
        std::visit([&](const auto& values) { bytes += static_cast<double>(values.size() * sizeof values[0]); },
                   column);
    }
    return bytes;
}

double peak_memory() {
    rusage usage{};
    getrusage(RUSAGE_SELF, &usage);
    return 1024.0 * static_cast<double>(usage.ru_maxrss);
}

}  // namespace

SizePreview measure_size(const Scenario& scenario, unsigned threads, double seconds) {
    using Clock = std::chrono::steady_clock;
    const double studies = studies_a_literature(scenario);
    const auto start = Clock::now();
    const auto elapsed = [&] { return std::chrono::duration<double>(Clock::now() - start).count(); };
    double detail_bytes = 0.0;
    RunOptions options;
    options.threads = threads;
    // What is worked out before the first study does not grow with the run: the clock of its cost starts later.
    double prepared = -1.0, studies_before = 0.0;
    options.stop = [&] { return prepared >= 0.0 && elapsed() - prepared > seconds; };
    options.progress = [&](const Progress& progress) {
        if (prepared >= 0.0) return;
        prepared = elapsed();
        studies_before = static_cast<double>(progress.studies_done);
    };
    Sinks sinks;
    sinks.literature = [](std::uint32_t, const std::vector<std::vector<double>>&) {};
    sinks.rows = [&](const std::string&, Batch&& batch) { detail_bytes += plain_bytes(batch); };
    const RunOutcome outcome = simulate(smaller(scenario, studies), options, sinks);
    const double time = elapsed();

    const auto literatures = static_cast<double>(scenario.run.literatures);
    const double share = studies * literatures / std::max(1.0, static_cast<double>(outcome.studies));
    const auto rows = literatures * static_cast<double>(scenario.regimes.size());
    const double row_bytes = 8.0 * static_cast<double>(literatures_table(scenario).columns.size());
    SizePreview size;
    size.studies = studies * literatures;
    const double timed = static_cast<double>(outcome.studies) - studies_before;
    const double start_up = prepared < 0.0 ? 0.0 : prepared;
    size.seconds = timed > 0.0 ? start_up + (time - start_up) * size.studies / timed : time * share;
    size.memory_bytes = peak_memory();
    size.file_bytes = (detail_bytes * share + rows * row_bytes) * (scenario.store.compress ? deflated : 1.0);
    return size;
}

}  // namespace lacuna
