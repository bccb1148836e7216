// The scenario that the command line asks for.
#pragma once

#include <vector>

#include "analysis/cli/options.h"
#include "sim/config/load.h"

namespace lacuna {

/// --set, --seed and --literatures as changes of config keys, in this order.
std::vector<Override> overrides(const Options& options);

}  // namespace lacuna
