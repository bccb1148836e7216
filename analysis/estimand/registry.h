// Every estimand there is.
#pragma once

#include <string>
#include <vector>

#include "analysis/estimand/estimand.h"

namespace lacuna {

/// All estimands of a literature with these lab kinds (their names, at least one) under a regime
/// whose design counts `findings` as discoveries, in the order in which they are reported. The order,
/// metrics, scopes and strata are the same for every regime of a run.
Estimands all_estimands(const std::vector<std::string>& labs, Findings findings);

}  // namespace lacuna
