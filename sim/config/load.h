// A config file, or its text, to a Scenario.
#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "sim/base/fault.h"
#include "sim/model/scenario.h"

namespace lacuna {

/// `--set KEY=VALUE`: a path of keys (sim/config/path.h) and a TOML value. A plain word, which is not a
/// TOML value, stands for itself as a string.
struct Override {
    std::string key, value;
};

/// Reads and resolves a config. Throws InputError with all of its faults, sorted by place.
Scenario load_scenario(const std::string& path, const std::vector<Override>& overrides);

/// The same from text; `source_name` stands for it in places.
Scenario parse_scenario(std::string_view text, const std::string& source_name,
                        const std::vector<Override>& overrides);

/// The text of a config file, for those who store it. Throws InputError when it cannot be read.
std::string read_config_text(const std::string& path);

}  // namespace lacuna
