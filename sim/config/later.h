// Keys of the contract that this version does not simulate. They are refused by name: to ignore them
// would change what a config means, and to call them unknown would be wrong.
#pragma once

#include <string>
#include <string_view>

namespace lacuna {

/// True for a key (`run.precision`, `lab.3.practices`) or a key with its word (`design.test = "correlation"`)
/// that belongs to the config but not to this version.
bool is_for_later(std::string_view key);

/// What the fault says and advises.
inline constexpr const char* for_later_message = "is not simulated by this version";
inline constexpr const char* for_later_remedy = "take it out; nothing else stands in for it";

}  // namespace lacuna
