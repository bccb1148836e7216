// Tables as values: what a column is called, what it holds, and a batch of its rows. The store writes
// them, the literature fills them, a reader gets them back; none of them knows the others.
#pragma once

#include <cstdint>
#include <string>
#include <variant>
#include <vector>

namespace lacuna {

/// i32 and f64 as named; u8 with labels is an enumeration, without labels a small number.
enum class ColumnType : std::uint8_t { u8, i32, f64 };

struct ColumnSpec {
    std::string name;
    ColumnType type;
    std::string units;  // "1" for pure numbers, "studies", "participants", "code"
    std::string description;
    std::vector<std::string> labels;  // enumeration: label of 0, 1, ...
};

struct TableSpec {
    std::string name;  // the HDF5 group
    std::vector<ColumnSpec> columns;
};

using ColumnData = std::variant<std::vector<std::uint8_t>, std::vector<std::int32_t>, std::vector<double>>;

/// Rows of one table, a vector per column in the order of its TableSpec, all of length `rows`.
struct Batch {
    std::size_t rows = 0;
    std::vector<ColumnData> columns;
};

/// An empty batch with the columns of `spec`.
Batch empty_batch(const TableSpec& spec);

/// Appends the rows of `from` to `to`; both of the same spec.
void append(Batch& to, const Batch& from);

}  // namespace lacuna
