// TOML text to a tree of values with places.
#pragma once

#include <string>
#include <string_view>

#include "sim/config/node.h"

namespace lacuna {

/// The largest config that is read: 4 MB.
inline constexpr std::size_t largest_config = 4u << 20;

/// Parses `text` as TOML 1.0. Throws InputError with the place of the first fault of syntax; `source`
/// names the text in places.
ConfigNode parse_toml(std::string_view text, const std::string& source);

}  // namespace lacuna
