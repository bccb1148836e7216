// Results of a scenario from its literatures, whether they are streaming in or read back.
#pragma once

#include "analysis/estimand/accumulator.h"
#include "sim/model/scenario.h"

namespace lacuna {

/// An accumulator of every estimand, regime by regime.
Accumulator accumulator_for(const Scenario& scenario);

/// What it holds, with title and names; `digest` of the scenario.
Results results_of(const Accumulator& accumulator, const Scenario& scenario, const std::string& digest);

}  // namespace lacuna
