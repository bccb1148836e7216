#include "analysis/cli/recording.h"

#include "sim/config/echo.h"
#include "sim/engine/scheduler.h"
#include "sim/model/schema.h"
#include "sim/tally/run_tables.h"

namespace lacuna {

namespace {

/// Literatures are handed to the writer in batches of about this many rows.
constexpr std::size_t rows_at_once = 512;

std::vector<TableSpec> tables_of(const Scenario& scenario) {
    std::vector<TableSpec> tables{regimes_table(scenario), points_table(), literatures_table(scenario)};
    for (TableSpec& table : detail_tables(scenario)) tables.push_back(std::move(table));
    return tables;
}

FileFacts facts_of(const Scenario& scenario, const std::string& config_text, const BuildFacts& build) {
    FileFacts facts;
    facts.title = scenario.title;
    facts.config_text = config_text;
    facts.resolved_config = resolved_json(scenario);
    facts.digest = digest(scenario);
    facts.seed = std::to_string(scenario.run.seed);
    facts.program_version = build.version;
    facts.commit = build.commit;
    facts.compiler = compiler_text();
    facts.flags = build.flags;
    facts.processor = processor_text();
    return facts;
}

}  // namespace

Recording::Recording(const std::string& path, bool overwrite, const Scenario& scenario,
                     const std::string& config_text, const BuildFacts& build)
    : digest_(lacuna::digest(scenario)),
      planned_(scenario.run.literatures),
      literatures_(literatures_table(scenario)),
      pending_(empty_batch(literatures_)),
      writer_(path, overwrite, facts_of(scenario, config_text, build), tables_of(scenario), scenario.store.compress,
              parallel_for_each_index) {
    writer_.append("regimes", regimes_rows(scenario));
    writer_.append("points", points_rows());
}

void Recording::add_literature(std::uint32_t literature, const std::vector<std::vector<double>>& rows) {
    append_literature(pending_, literature, rows);
    whole_rows_ = detail_rows_;
    if (pending_.rows >= rows_at_once) flush();
}

void Recording::add_rows(const std::string& table, const Batch& batch) {
    writer_.append(table, batch);
    detail_rows_[table] += batch.rows;
}

void Recording::flush() {
    writer_.append(literatures_.name, pending_);
    pending_ = empty_batch(literatures_);
}

void Recording::finish(bool complete, std::uint64_t literatures) {
    flush();
    for (const auto& [table, rows] : detail_rows_) {
        if (rows > whole_rows_[table]) writer_.keep_rows(table, whole_rows_[table]);
    }
    writer_.finish(complete, literatures, planned_);
}

}  // namespace lacuna
