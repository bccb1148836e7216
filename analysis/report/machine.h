// Results for programs: JSON and CSV, in the forms that scripts rely on.
#pragma once

#include <string>
#include <vector>

#include "analysis/estimand/result.h"

namespace lacuna {

/// {"lacuna", "digest", "results": [...], "differences": [...]}; a missing number is null.
std::string results_json(const Results& results, const std::string& version);

/// One line per result: metric, scope, regime, point, stratum, estimate, mcse, literatures, p05 ... p95.
/// A missing number is an empty field.
std::string results_csv(const Results& results);

/// The same for differences, with the column `against` after `regime`.
std::string differences_csv(const Results& results);

/// Results and differences in one table: the columns of differences_csv, `against` empty for results.
std::string all_csv(const Results& results);

/// A CSV field as RFC 4180 wants it: quoted where it holds a comma, a quote or a line break.
std::string csv_field(const std::string& text);

}  // namespace lacuna
