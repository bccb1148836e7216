// Rows of the detail tables (sim/model/schema.h) from a block's columns.
#pragma once

#include <map>
#include <string>
#include <vector>

#include "sim/literature/prepared.h"
#include "sim/literature/roster.h"
#include "sim/model/columns.h"
#include "sim/model/tables.h"

namespace lacuna {

/// Appends the block of science `science` to the tables in `details` ("questions", "labs" with the
/// literature's first block, "manuscripts" of each of its regimes, "studies" in the order of lines).
void add_details(const PreparedScenario& prepared, std::size_t science, const Roster& roster,
                 const Conducted& block, const std::vector<Outcome>& outcomes,
                 std::map<std::string, Batch>& details);

}  // namespace lacuna
