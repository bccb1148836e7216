// JSON to the tree of values that configs are read from.
#pragma once

#include <string>
#include <string_view>

#include "sim/config/node.h"

namespace lacuna {

/// Places name `source` and no line. Throws InputError for text that is not a JSON object, or that
/// holds nulls or nests deeper than 32.
ConfigNode parse_json(std::string_view text, const std::string& source);

}  // namespace lacuna
