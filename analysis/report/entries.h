// Results as JSON values; the parts that several JSON reports share.
#pragma once

#include <nlohmann/json.hpp>
#include <optional>
#include <string>

#include "analysis/estimand/result.h"

namespace lacuna {

using Json = nlohmann::ordered_json;

/// null where missing or not finite.
Json json_number(std::optional<double> value);

/// {"metric", "scope", "regime", "point", "stratum", "estimate", "mcse", "literatures", "spread"}.
Json json_entry(const Results& all, const Result& result);

/// The same with "against" after "regime".
Json json_entry(const Results& all, const PairedDifference& difference);

/// Indented, with a final line break; bytes that are not UTF-8 are replaced.
std::string json_text(const Json& value);

}  // namespace lacuna
