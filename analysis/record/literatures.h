// A recorded run's literatures, handed on as they were when they were simulated.
#pragma once

#include <functional>
#include <string>
#include <vector>

#include "sim/model/tables.h"
#include "sim/store/outcome_reader.h"

namespace lacuna {

/// Calls `sink` with each literature's rows of sufficient statistics (rows[r] under regime r), in order.
/// `expected`: what the run's scenario says that /literatures looks like (sim/tally/run_tables.h). Memory
/// does not grow with the file. Throws RunError, naming the file, when the table has not the expected
/// columns or its rows are not whole literatures in order.
void read_literatures(const OutcomeReader& file, const std::string& path, const TableSpec& expected,
                      const std::function<void(const std::vector<std::vector<double>>& rows)>& sink);

/// Calls `sink` with the rows of a table, at most `chunk` at a time, in order.
void read_table(const OutcomeReader& file, const TableSpec& table, std::size_t chunk,
                const std::function<void(const Batch& rows)>& sink);

}  // namespace lacuna
