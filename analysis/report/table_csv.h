// Stored tables as CSV.
#pragma once

#include <string>

#include "sim/model/tables.h"

namespace lacuna {

/// The names of the columns, as a CSV line.
std::string table_header_csv(const TableSpec& spec);

/// The rows of a batch as CSV lines: enumerations by name, doubles in the shortest digits that read back
/// to the same bits, not finite ones as an empty field (NaN) or "inf" and "-inf".
std::string table_rows_csv(const TableSpec& spec, const Batch& batch);

}  // namespace lacuna
