// Rows a second and bytes a row of the studies table, at the default compression, with the engine's
// own rows and threads. Usage: bench_store [STUDIES [FOLDER]]
#include <fmt/format.h>

#include <chrono>
#include <cstdlib>
#include <filesystem>

#include "sim/config/load.h"
#include "sim/engine/run.h"
#include "sim/engine/scheduler.h"
#include "sim/model/schema.h"
#include "sim/store/outcome_writer.h"

using namespace lacuna;

int main(int argc, char** argv) {
    const auto studies = static_cast<std::uint64_t>(argc > 1 ? std::atof(argv[1]) : 1e7);
    const std::string path = std::string(argc > 2 ? argv[2] : ".") + "/bench_store.h5";
    const std::string n = std::to_string(studies / 10);
    const Scenario scenario = load_scenario(
        std::string(LACUNA_CONFIGS) + "/published-rates.toml",
        {{"run.literatures", "10"}, {"field.questions", n}, {"lab.1.lines", n}, {"store.detail", "studies"}});
    const auto start = std::chrono::steady_clock::now();
    OutcomeWriter writer(path, true, {}, detail_tables(scenario), true, parallel_for_each_index);
    Sinks sinks;
    sinks.literature = [](std::uint32_t, const std::vector<std::vector<double>>&) {};
    sinks.rows = [&](const std::string& table, Batch&& batch) { writer.append(table, batch); };
    const RunOutcome outcome = simulate(scenario, {}, sinks);
    writer.finish(true, 10, 10);
    const double seconds = std::chrono::duration<double>(std::chrono::steady_clock::now() - start).count();
    const auto bytes = static_cast<double>(std::filesystem::file_size(path));
    std::filesystem::remove(path);
    const auto rows = static_cast<double>(outcome.studies);
    fmt::print("{} studies with their questions and manuscripts: {:.2f} million studies/s, {:.1f} bytes/study\n",
               outcome.studies, rows / seconds / 1e6, bytes / rows);
}
