// Which keys a regime changes, read off the resolved values.
#pragma once

#include <string>
#include <vector>

#include "sim/model/scenario.h"

namespace lacuna {

/// A key whose value under `regime` is not that under the first regime. A value that one side does not
/// have (another plan, family or number of journals) is "".
struct Difference {
    std::string regime;
    std::string key;    // dotted, positions counted from 1
    std::string first;  // under the first regime, as JSON
    std::string here;
};

/// In the order of regimes, then of keys. Empty for a regime that changes nothing.
std::vector<Difference> differences(const Scenario& scenario);

}  // namespace lacuna
