// Exact expected values beside each other, regime by regime.
#pragma once

#include "analysis/report/preview.h"
#include "sim/model/scenario.h"

namespace lacuna {

/// Fills in preview.expected, metric by metric with the regimes within, for the scopes that results are
/// given in; and preview.untractable for regimes that have no exact values.
void add_expected(const Scenario& scenario, Preview& preview);

}  // namespace lacuna
