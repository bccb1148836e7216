// Reading back what a run stored: written by the store, read in stretches, or refused with the reason.
#include <unistd.h>

#include <catch2/catch.hpp>
#include <filesystem>

#include "analysis/record/literatures.h"
#include "sim/base/fault.h"
#include "sim/store/outcome_writer.h"
#include "sim/tally/layout.h"
#include "sim/tally/run_tables.h"

using namespace lacuna;

namespace {

Scenario two_regimes() {
    Scenario scenario;
    Regime regime;
    regime.science.labs = {LabKind{}};
    regime.name = "first";
    scenario.regimes.push_back(regime);
    regime.name = "second";
    scenario.regimes.push_back(regime);
    return scenario;
}

/// A value that tells literature, regime and column apart.
double marked(std::size_t literature, std::size_t regime, std::size_t column) {
    return static_cast<double>(literature) * 1e6 + static_cast<double>(regime) * 1e5 + static_cast<double>(column);
}

Batch some_literatures(std::size_t first, std::size_t count) {
    Batch batch = empty_batch(literatures_table(two_regimes()));
    for (std::size_t l = first; l < first + count; ++l) {
        std::vector<std::vector<double>> rows(2, std::vector<double>(Layout(1).size()));
        for (std::size_t r = 0; r < 2; ++r) {
            for (std::size_t c = 0; c < rows[r].size(); ++c) rows[r][c] = marked(l, r, c);
        }
        append_literature(batch, static_cast<std::uint32_t>(l), rows);
    }
    return batch;
}

/// A file of its own, removed at the end.
class StoredLiteratures {
public:
    StoredLiteratures(const TableSpec& table, const Batch& batch)
        : path_((std::filesystem::temp_directory_path() / ("lacuna-record-" + std::to_string(getpid()) + ".h5"))
                    .string()) {
        OutcomeWriter writer(path_, true, {}, {table}, true, [](std::size_t count, const auto& body) {
            for (std::size_t i = 0; i < count; ++i) body(i);
        });
        writer.append(table.name, batch);
        writer.finish(true, batch.rows / 2, batch.rows / 2);
    }
    ~StoredLiteratures() { std::filesystem::remove(path_); }

    std::vector<std::vector<std::vector<double>>> read() const {
        std::vector<std::vector<std::vector<double>>> all;
        read_literatures(OutcomeReader(path_), path_, literatures_table(two_regimes()),
                         [&](const std::vector<std::vector<double>>& rows) { all.push_back(rows); });
        return all;
    }
    std::string complaint() const {
        try {
            read();
        } catch (const RunError& error) {
            return error.what();
        }
        return "";
    }

private:
    std::string path_;
};

bool holds(const std::string& text, const std::string& part) { return text.find(part) != std::string::npos; }

}  // namespace

TEST_CASE("literatures come back as they were written, over many stretches", "[record]") {
    const std::size_t count = 70'000;  // several stretches of reading, and more than one chunk
    const auto all = StoredLiteratures(literatures_table(two_regimes()), some_literatures(0, count)).read();
    REQUIRE(all.size() == count);
    std::size_t wrong = 0;
    for (std::size_t l = 0; l < count; ++l) {
        for (std::size_t r = 0; r < 2; ++r) {
            for (std::size_t c = 0; c < all[l][r].size(); ++c) wrong += all[l][r][c] != marked(l, r, c);
        }
    }
    CHECK(wrong == 0);
    CHECK(StoredLiteratures(literatures_table(two_regimes()), some_literatures(0, 0)).read().empty());
}

TEST_CASE("tables that are not whole literatures in order are refused", "[record]") {
    const TableSpec table = literatures_table(two_regimes());
    CHECK(holds(StoredLiteratures(table, some_literatures(1, 3)).complaint(), "not in order at literature 0"));
    Batch swapped = some_literatures(0, 3);
    std::swap(std::get<std::vector<std::uint8_t>>(swapped.columns[1])[2],
              std::get<std::vector<std::uint8_t>>(swapped.columns[1])[3]);
    CHECK(holds(StoredLiteratures(table, swapped).complaint(), "not in order at literature 1"));
    Batch half = some_literatures(0, 3);
    --half.rows;
    for (ColumnData& column : half.columns) std::visit([](auto& values) { values.pop_back(); }, column);
    CHECK(holds(StoredLiteratures(table, half).complaint(), "whole literatures"));
}

TEST_CASE("tables without the expected columns are refused by the column's name", "[record]") {
    TableSpec fewer = literatures_table(two_regimes());
    Batch batch = some_literatures(0, 3);
    const std::string name = fewer.columns.back().name;
    fewer.columns.pop_back();
    batch.columns.pop_back();
    CHECK(holds(StoredLiteratures(fewer, batch).complaint(), "no column '" + name + "'"));
    TableSpec renamed = literatures_table(two_regimes());
    renamed.columns[1].labels = {"first", "third"};
    CHECK(holds(StoredLiteratures(renamed, some_literatures(0, 3)).complaint(), "'regime'"));
    TableSpec other = literatures_table(two_regimes());
    other.name = "elsewhere";
    CHECK(holds(StoredLiteratures(other, some_literatures(0, 3)).complaint(), "literatures"));
}
