#include "analysis/report/table_csv.h"

#include <fmt/format.h>

#include <cmath>
#include <iterator>

#include "analysis/report/machine.h"

namespace lacuna {

namespace {

using Buffer = fmt::memory_buffer;

void put_cell(Buffer& out, const ColumnSpec& spec, const ColumnData& column, std::size_t row) {
    const auto end = std::back_inserter(out);
    if (const auto* reals = std::get_if<std::vector<double>>(&column)) {
        if (!std::isnan((*reals)[row])) fmt::format_to(end, "{}", (*reals)[row]);
    } else if (const auto* integers = std::get_if<std::vector<std::int32_t>>(&column)) {
        fmt::format_to(end, "{}", (*integers)[row]);
    } else {
        const std::uint8_t code = std::get<std::vector<std::uint8_t>>(column)[row];
        if (code < spec.labels.size())
            fmt::format_to(end, "{}", csv_field(spec.labels[code]));
        else
            fmt::format_to(end, "{}", code);
    }
}

}  // namespace

std::string table_header_csv(const TableSpec& spec) {
    std::string text;
    for (const ColumnSpec& column : spec.columns) {
        if (!text.empty()) text += ',';
        text += csv_field(column.name);
    }
    return text + "\r\n";
}

std::string table_rows_csv(const TableSpec& spec, const Batch& batch) {
    Buffer out;
    for (std::size_t row = 0; row < batch.rows; ++row) {
        for (std::size_t c = 0; c < spec.columns.size(); ++c) {
            if (c > 0) out.push_back(',');
            put_cell(out, spec.columns[c], batch.columns[c], row);
        }
        out.push_back('\r');
        out.push_back('\n');
    }
    return fmt::to_string(out);
}

}  // namespace lacuna
