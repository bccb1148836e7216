// Limits that several sections of a config must keep together.
#pragma once

#include <vector>

#include "sim/config/keys.h"
#include "sim/config/node.h"

namespace lacuna {

/// Faults of a document whose keys are all sound. `root` gives the places.
std::vector<Fault> limit_faults(const Document& document, const ConfigNode& root);

/// Faults of all regimes taken together.
std::vector<Fault> limit_faults(const Scenario& scenario, const ConfigNode& root);

}  // namespace lacuna
