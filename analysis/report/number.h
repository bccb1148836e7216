// Numbers as text: for people, with the digits that their error supports; for machines, the shortest
// digits that read back to the same double.
#pragma once

#include <optional>
#include <string>

#include "analysis/estimand/result.h"

namespace lacuna {

/// "–", what stands for a missing value.
extern const std::string missing_sign;

/// "0.3127 ± 0.0012": the error to two significant digits, the value to the same place. Without an
/// error the value alone to four significant digits; missing as "–".
std::string show(const Estimate& estimate);

/// "0.281 to 0.343": the 5 % and 95 % quantiles, to three significant digits of their distance.
std::string show_range(const std::optional<Spread>& spread);

/// `digits` significant digits, never in scientific notation between 1e-4 and 1e9.
std::string show_number(double value, int digits);

/// 1234567 as "1,234,567"; not finite or beyond 2^63: as show_number.
std::string show_count(double value);

/// Shortest text that reads back to the same double; empty when missing or not finite.
std::string exact_number(std::optional<double> value);

}  // namespace lacuna
