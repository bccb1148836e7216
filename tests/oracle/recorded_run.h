// A run with everything it hands on kept in memory.
#pragma once

#include <catch2/catch.hpp>
#include <cmath>
#include <map>
#include <stdexcept>
#include <string>
#include <vector>

#include "sim/engine/run.h"
#include "sim/model/schema.h"

namespace lacuna::oracle {

struct Recorded {
    std::vector<std::vector<std::vector<double>>> rows;  // [literature][regime][statistic]
    std::map<std::string, Batch> tables;
    RunOutcome outcome;
};

inline Recorded run(const Scenario& scenario, unsigned threads = 0, std::function<bool()> stop = {}) {
    Recorded all;
    for (const TableSpec& table : detail_tables(scenario)) all.tables[table.name] = empty_batch(table);
    Sinks sinks;
    sinks.literature = [&](std::uint32_t literature, const std::vector<std::vector<double>>& rows) {
        REQUIRE(literature == all.rows.size());
        all.rows.push_back(rows);
    };
    sinks.rows = [&](const std::string& table, Batch&& batch) { append(all.tables.at(table), batch); };
    RunOptions options;
    options.threads = threads;
    options.stop = std::move(stop);
    all.outcome = simulate(scenario, options, sinks);
    return all;
}

inline bool same(const std::vector<double>& a, const std::vector<double>& b) {
    if (a.size() != b.size()) return false;
    for (std::size_t i = 0; i < a.size(); ++i) {
        if (a[i] != b[i] && !(std::isnan(a[i]) && std::isnan(b[i]))) return false;
    }
    return true;
}

inline bool same(const Recorded& a, const Recorded& b) {
    if (a.rows.size() != b.rows.size()) return false;
    for (std::size_t l = 0; l < a.rows.size(); ++l) {
        for (std::size_t r = 0; r < a.rows[l].size(); ++r) {
            if (!same(a.rows[l][r], b.rows[l][r])) return false;
        }
    }
    for (const auto& [name, batch] : a.tables) {
        if (batch.columns != b.tables.at(name).columns) return false;
    }
    return true;
}

template <class T>
const std::vector<T>& column(const Scenario& scenario, const Recorded& all, const std::string& table,
                             const std::string& name) {
    for (const TableSpec& spec : detail_tables(scenario)) {
        if (spec.name != table) continue;
        for (std::size_t c = 0; c < spec.columns.size(); ++c) {
            if (spec.columns[c].name == name) return std::get<std::vector<T>>(all.tables.at(table).columns[c]);
        }
    }
    throw std::runtime_error("no column " + table + "/" + name);
}

}  // namespace lacuna::oracle
