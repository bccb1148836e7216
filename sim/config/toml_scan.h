// What is checked of a config's bytes before the TOML parser sees them. The parser (toml++ 3.3.0) has
// undefined behaviour on malformed UTF-8, fails assertions on headers without a key and recurses with the
// depth of the text.
#pragma once

#include <optional>
#include <string>
#include <string_view>

#include "sim/base/fault.h"

namespace lacuna {

/// The first thing in `text` that the parser must not see: bytes that are not UTF-8, control
/// characters, non-ASCII outside strings and comments, a table header without a key, a value nested
/// deeper or a dotted key longer than 32. Strings without an end are refused here, for the clearer message.
std::optional<Fault> scan_toml(std::string_view text, const std::string& source);

}  // namespace lacuna
