// Paths into a config, as `--set` and a regime's `set` write them: keys joined by dots, where an array
// of tables is entered by `*` (every element), a position counted from 1, or an element's name:
// `field.true_rate`, `journal.*.results_blind`, `lab.2.share`, `journal."Soil, etc.".accept`.
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "sim/config/node.h"

namespace lacuna {

struct ConfigPath {
    std::vector<std::string> parts;
};

/// The path that `text` spells, or nothing when it has empty parts, an unclosed quote or more than
/// 32 parts. A part in
/// double quotes may hold dots; a quote is only special at the start of a part.
std::optional<ConfigPath> parse_path(std::string_view text);

/// Writes a path as parse_path reads it (parts made printable).
std::string to_string(const ConfigPath& path);

/// Puts `value` at `path`, in every element that a `*` stands for, creating tables on the way where
/// none is. `key_place` becomes the place of keys that are new. Returns what is wrong when the path
/// leads through something that is not a table, or to an element that does not exist; the tree may then
/// be half changed.
std::optional<std::string> assign(ConfigNode& root, const ConfigPath& path, const ConfigNode& value,
                                  const Place& key_place);

}  // namespace lacuna
