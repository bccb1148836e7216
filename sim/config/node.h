// A config as a value: a small tree in which every key and every value keeps its place in the text, so
// that a regime's `set` and `--set` can edit copies and faults still point at what was written.
#pragma once

#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

#include "sim/base/fault.h"

namespace lacuna {

struct ConfigEntry;

struct ConfigNode {
    enum class Kind : std::uint8_t { table, array, string, integer, real, boolean, date };

    Kind kind = Kind::table;
    Place place;
    bool written_inline = false;  // a table in braces, as opposed to a section or dotted keys
    bool boolean = false;
    std::int64_t integer = 0;
    double real = 0.0;
    std::string text;                  // string; or a date as written
    std::vector<ConfigEntry> entries;  // table, in the order of the text
    std::vector<ConfigNode> elements;  // array

    /// The entry of a table, or null.
    const ConfigEntry* find(std::string_view key) const;
    ConfigEntry* find(std::string_view key);

    bool is_number() const { return kind == Kind::integer || kind == Kind::real; }
    double number() const { return kind == Kind::integer ? static_cast<double>(integer) : real; }
};

struct ConfigEntry {
    std::string key;
    Place place;
    ConfigNode value;
};

/// "a table", "an array", "a string", "a whole number", "a number with a point", "true or false", "a date".
std::string_view kind_name(ConfigNode::Kind kind);

/// `text` fit for a message: control characters as `?`, cut after 40 bytes.
std::string printable(std::string_view text);

/// What a value is, as a fault quotes it: `"abc"` (shortened), `3`, `0.5`, `true`, or its kind.
std::string quoted(const ConfigNode& node);

/// The value at a dotted path with 1-based positions in arrays, or the nearest ancestor that exists.
const ConfigNode& nearest_node(const ConfigNode& root, std::string_view dotted);

/// Sets the place of a node and of all below it.
void set_places(ConfigNode& node, const Place& place);

}  // namespace lacuna
