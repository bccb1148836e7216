// A tree of values to a Scenario.
#pragma once

#include <string>

#include "sim/config/node.h"
#include "sim/model/scenario.h"

namespace lacuna {

/// Reads the config once as given and once under each regime. Faults are appended to `faults`; the
/// scenario is only good when there are none. `source` names the text whose faults come first.
Scenario resolve(const ConfigNode& root, const std::string& source, std::vector<Fault>& faults);

/// Sorts by place, those of `source` first, and drops repeated faults.
void sort_faults(std::vector<Fault>& faults, const std::string& source);

}  // namespace lacuna
