// The resolved scenario as text.
#pragma once

#include <string>
#include <string_view>

#include "sim/base/fault.h"
#include "sim/model/scenario.h"

namespace lacuna {

/// Every value of the scenario as indented JSON, keys in the order of the table of keys: title, run,
/// store, and under "regimes" each regime's name, field, design, lab, writing, journal and submission
/// in full. Doubles in the shortest form that reads back to the same bits. Equal scenarios give equal
/// texts. A distribution is a table even where it is constant; absent min and max are unbounded.
std::string resolved_json(const Scenario& scenario);

/// The scenario that resolved_json wrote. Throws InputError for any other text; `source_name` names it.
Scenario scenario_of_resolved(std::string_view json, const std::string& source_name);

/// SHA-256 of resolved_json, in hexadecimal.
std::string digest(const Scenario& scenario);

}  // namespace lacuna
