// Results for people.
#pragma once

#include <string>

#include "analysis/estimand/result.h"

namespace lacuna {

/// The few numbers that tell most, conducted beside published, and what each regime changes in them.
std::string headline_tables(const Results& results);

/// Every estimand, scope by scope and stratum by stratum, and every difference between regimes.
std::string full_tables(const Results& results);

/// What to cite with the numbers: program version and digest of the run.
std::string provenance_line(const Results& results, const std::string& version);

}  // namespace lacuna
