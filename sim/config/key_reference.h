// All keys of a config, from the table from which they are read.
#pragma once

#include <string>

namespace lacuna {

/// One line per key: dotted key, what it takes, default, meaning; keys that exist only under some word
/// name it. Distributions are listed once, at the end.
std::string key_reference();

}  // namespace lacuna
