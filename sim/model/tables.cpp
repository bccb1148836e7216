#include "sim/model/tables.h"

#include "sim/base/fault.h"

namespace lacuna {

namespace {

ColumnData empty_column(ColumnType type) {
    switch (type) {
        case ColumnType::u8:
            return std::vector<std::uint8_t>{};
        case ColumnType::i32:
            return std::vector<std::int32_t>{};
        case ColumnType::f64:
            return std::vector<double>{};
    }
    throw Defect("empty_column: unknown column type");
}

}  // namespace

Batch empty_batch(const TableSpec& spec) {
    Batch batch;
    for (const ColumnSpec& column : spec.columns) batch.columns.push_back(empty_column(column.type));
    return batch;
}

void append(Batch& to, const Batch& from) {
    if (to.columns.size() != from.columns.size()) throw Defect("append: batches of different tables");
    for (std::size_t c = 0; c < to.columns.size(); ++c) {
        std::visit(
            [&](auto& target) {
                const auto& source = std::get<std::decay_t<decltype(target)>>(from.columns[c]);
                target.insert(target.end(), source.begin(), source.end());
            },
            to.columns[c]);
    }
    to.rows += from.rows;
}

}  // namespace lacuna
