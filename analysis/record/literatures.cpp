#include "analysis/record/literatures.h"

#include <fmt/format.h>

#include <algorithm>

#include "sim/base/fault.h"
#include "sim/tally/run_tables.h"

namespace lacuna {

namespace {

/// Doubles held at a time; a table of any width is read in stretches of about this size.
constexpr std::size_t doubles_at_once = 1u << 22;

void check_columns(const std::vector<ColumnSpec>& found, const std::string& path, const TableSpec& expected) {
    for (const ColumnSpec& column : expected.columns) {
        const auto same = [&](const ColumnSpec& other) { return other.name == column.name; };
        const auto at = std::find_if(found.begin(), found.end(), same);
        if (at == found.end()) {
            throw RunError(
                fmt::format("{}: table '{}' has no column '{}': the file does not fit its own scenario "
                            "(damaged, or changed by hand)",
                            path, expected.name, column.name));
        }
        if (at->type != column.type || at->labels != column.labels) {
            throw RunError(
                fmt::format("{}: column '{}' of table '{}' is not of the type that the scenario asks for", path,
                            column.name, expected.name));
        }
    }
}

/// The rows of `batch` that belong to one literature must be its number and all regimes in order.
void check_keys(const Batch& batch, std::size_t row, std::size_t regime, std::uint64_t literature,
                const std::string& path) {
    const auto regime_found = std::get<std::vector<std::uint8_t>>(batch.columns[1])[row];
    const auto literature_found = std::get<std::vector<std::int32_t>>(batch.columns[2])[row];
    // Numbers beyond 2^31 wrap around, as they did when written.
    if (regime_found != regime || static_cast<std::uint32_t>(literature_found) != literature) {
        throw RunError(
            fmt::format("{}: the rows of 'literatures' are not in order at literature {}", path, literature));
    }
}

}  // namespace

void read_table(const OutcomeReader& file, const TableSpec& table, std::size_t chunk,
                const std::function<void(const Batch& rows)>& sink) {
    const std::size_t rows = file.rows(table.name);
    for (std::size_t first = 0; first < rows; first += chunk) {
        Batch batch;
        batch.rows = std::min(chunk, rows - first);
        for (const ColumnSpec& column : table.columns) {
            batch.columns.push_back(file.read(table.name, column.name, first, batch.rows));
        }
        sink(batch);
    }
}

void read_literatures(const OutcomeReader& file, const std::string& path, const TableSpec& expected,
                      const std::function<void(const std::vector<std::vector<double>>& rows)>& sink) {
    check_columns(file.columns(expected.name), path, expected);
    const std::size_t regimes = expected.columns[1].labels.size();
    if (file.rows(expected.name) % regimes != 0) {
        throw RunError(fmt::format("{}: the rows of 'literatures' do not come in whole literatures", path));
    }
    const std::size_t statistics = expected.columns.size() - literature_keys;
    const std::size_t chunk =
        std::max<std::size_t>(1, doubles_at_once / expected.columns.size() / regimes) * regimes;
    std::vector<std::vector<double>> rows(regimes, std::vector<double>(statistics));
    std::uint64_t literature = 0;
    read_table(file, expected, chunk, [&](const Batch& batch) {
        for (std::size_t row = 0; row < batch.rows; row += regimes, ++literature) {
            for (std::size_t r = 0; r < regimes; ++r) {
                check_keys(batch, row + r, r, literature, path);
                for (std::size_t s = 0; s < statistics; ++s) {
                    rows[r][s] = std::get<std::vector<double>>(batch.columns[literature_keys + s])[row + r];
                }
            }
            sink(rows);
        }
    });
}

}  // namespace lacuna
