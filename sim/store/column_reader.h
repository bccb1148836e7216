// One column of a table in an HDF5 file, looked at before it is read.
#pragma once

#include <string>

#include "sim/model/tables.h"
#include "sim/store/handle.h"

namespace lacuna {

/// An open dataset that is a column: one-dimensional, plainly stored, of a known type.
struct ColumnReader {
    Handle dataset;
    ColumnSpec spec;
    std::size_t rows = 0;
};

/// Opens `path` (table/column). `file_bytes`: size of the file, which bounds how many rows it can hold.
/// Throws RunError when it is no such column.
ColumnReader open_column(hid_t file, const std::string& path, const std::string& name, std::uint64_t file_bytes);

/// Rows first .. first + count - 1. Throws RunError.
ColumnData read_rows(const ColumnReader& column, std::size_t first, std::size_t count);

}  // namespace lacuna
