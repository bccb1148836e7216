// The detail tables of an outcome file: names, types, units and descriptions of every column.
#pragma once

#include <string>
#include <vector>

#include "sim/model/scenario.h"
#include "sim/model/tables.h"

namespace lacuna {

/// Regimes grouped by equal science: science_of[r] is the index of regime r's science; regimes with
/// the same index share every conducted study. firsts[s] is the first regime with science s.
struct ScienceGroups {
    std::vector<std::size_t> science_of;
    std::vector<std::size_t> firsts;
};
ScienceGroups group_by_science(const std::vector<Regime>& regimes);

/// Names of all lab kinds and all journals over all regimes, each once: labels of the enumerations in
/// the detail tables. The journals begin with "none".
std::vector<std::string> all_kind_names(const Scenario& scenario);
std::vector<std::string> all_journal_names(const Scenario& scenario);

/// The tables that `detail` asks for, in the order in which they are written: none for literatures;
/// questions, labs and manuscripts; and studies as well.
std::vector<TableSpec> detail_tables(const Scenario& scenario);

}  // namespace lacuna
