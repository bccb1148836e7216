#include "sim/tally/run_tables.h"

#include "sim/base/fault.h"
#include "sim/model/schema.h"
#include "sim/tally/layout.h"

namespace lacuna {

namespace {

ColumnSpec number(std::string name, std::string description) {
    return {std::move(name), ColumnType::i32, "code", std::move(description), {}};
}

ColumnSpec regime_code(const Scenario& scenario, std::string name, std::string description) {
    return {std::move(name), ColumnType::u8, "1", std::move(description), regime_names(scenario)};
}

template <class T>
std::vector<T>& column(Batch& batch, std::size_t index) {
    return std::get<std::vector<T>>(batch.columns[index]);
}

}  // namespace

std::vector<std::string> regime_names(const Scenario& scenario) {
    std::vector<std::string> names;
    for (const Regime& regime : scenario.regimes) names.push_back(regime.name);
    return names;
}

std::vector<std::string> lab_names(const Scenario& scenario) {
    std::vector<std::string> names;
    for (const LabKind& lab : scenario.regimes.front().science.labs) names.push_back(lab.name);
    return names;
}

TableSpec regimes_table(const Scenario& scenario) {
    return {"regimes",
            {number("regime", "number of the regime, counted from 0"),
             regime_code(scenario, "name", "name of the regime"),
             number("science", "regimes with the same number share every conducted study")}};
}

Batch regimes_rows(const Scenario& scenario) {
    Batch batch = empty_batch(regimes_table(scenario));
    const ScienceGroups groups = group_by_science(scenario.regimes);
    for (std::size_t r = 0; r < scenario.regimes.size(); ++r) {
        column<std::int32_t>(batch, 0).push_back(static_cast<std::int32_t>(r));
        column<std::uint8_t>(batch, 1).push_back(static_cast<std::uint8_t>(r));
        column<std::int32_t>(batch, 2).push_back(static_cast<std::int32_t>(groups.science_of[r]));
        ++batch.rows;
    }
    return batch;
}

TableSpec points_table() { return {"points", {number("point", "number of the sweep point, counted from 0")}}; }

Batch points_rows() { return {1, {std::vector<std::int32_t>{0}}}; }

TableSpec literatures_table(const Scenario& scenario) {
    for (const Regime& regime : scenario.regimes) {
        if (regime.science.labs.size() != scenario.regimes.front().science.labs.size()) {
            throw Defect("literatures_table: regimes differ in the number of lab kinds");
        }
    }
    TableSpec spec{"literatures",
                   {number("point", "number of the sweep point"),
                    regime_code(scenario, "regime", "publication rules that the row is counted under"),
                    number("literature", "number of the literature, counted from 0")}};
    const std::vector<std::string> labs = lab_names(scenario);
    for (ColumnSpec& each : Layout(labs.size()).columns(labs)) spec.columns.push_back(std::move(each));
    return spec;
}

void append_literature(Batch& batch, std::uint32_t literature, const std::vector<std::vector<double>>& rows) {
    for (std::size_t r = 0; r < rows.size(); ++r) {
        if (rows[r].size() + literature_keys != batch.columns.size()) {
            throw Defect("append_literature: a row of another layout");
        }
        column<std::int32_t>(batch, 0).push_back(0);
        column<std::uint8_t>(batch, 1).push_back(static_cast<std::uint8_t>(r));
        column<std::int32_t>(batch, 2).push_back(static_cast<std::int32_t>(literature));
        for (std::size_t c = 0; c < rows[r].size(); ++c) {
            column<double>(batch, literature_keys + c).push_back(rows[r][c]);
        }
        ++batch.rows;
    }
}

}  // namespace lacuna
