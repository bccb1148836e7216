#include "sim/config/node.h"

#include <fmt/format.h>

#include <algorithm>
#include <charconv>

namespace lacuna {

const ConfigEntry* ConfigNode::find(std::string_view key) const {
    for (const ConfigEntry& entry : entries) {
        if (entry.key == key) return &entry;
    }
    return nullptr;
}

ConfigEntry* ConfigNode::find(std::string_view key) {
    return const_cast<ConfigEntry*>(static_cast<const ConfigNode*>(this)->find(key));
}

std::string_view kind_name(ConfigNode::Kind kind) {
    switch (kind) {
        case ConfigNode::Kind::table:
            return "a table";
        case ConfigNode::Kind::array:
            return "an array";
        case ConfigNode::Kind::string:
            return "a string";
        case ConfigNode::Kind::integer:
            return "a whole number";
        case ConfigNode::Kind::real:
            return "a number with a point";
        case ConfigNode::Kind::boolean:
            return "true or false";
        case ConfigNode::Kind::date:
            return "a date";
    }
    throw Defect("kind_name: unknown kind");
}

std::string printable(std::string_view text) {
    constexpr std::size_t longest = 40;
    std::size_t cut = std::min(longest, text.size());
    while (cut > 0 && cut < text.size() && (static_cast<unsigned char>(text[cut]) & 0xC0u) == 0x80u) --cut;
    std::string clean(text.substr(0, cut));
    for (char& c : clean) {
        if ((c >= 0 && c < 0x20) || c == 0x7F) c = '?';
    }
    return cut < text.size() ? clean + "..." : clean;
}

std::string quoted(const ConfigNode& node) {
    switch (node.kind) {
        case ConfigNode::Kind::integer:
            return fmt::format("{}", node.integer);
        case ConfigNode::Kind::boolean:
            return node.boolean ? "true" : "false";
        case ConfigNode::Kind::string:
            return fmt::format("\"{}\"", printable(node.text));
        case ConfigNode::Kind::real:
            break;
        default:
            return std::string(kind_name(node.kind));
    }
    const std::string text = fmt::format("{}", node.real);
    return text.find_first_not_of("-0123456789") == std::string::npos ? text + ".0" : text;
}

const ConfigNode& nearest_node(const ConfigNode& root, std::string_view dotted) {
    const ConfigNode* node = &root;
    while (!dotted.empty()) {
        const std::size_t dot = dotted.find('.');
        const std::string_view part = dotted.substr(0, dot);
        dotted = dot == std::string_view::npos ? std::string_view() : dotted.substr(dot + 1);
        if (node->kind == ConfigNode::Kind::table) {
            const ConfigEntry* entry = node->find(part);
            if (!entry) return *node;
            node = &entry->value;
        } else {
            std::size_t position = 0;
            std::from_chars(part.data(), part.data() + part.size(), position);
            if (position == 0 || position > node->elements.size()) return *node;
            node = &node->elements[position - 1];
        }
    }
    return *node;
}

void set_places(ConfigNode& node, const Place& place) {
    node.place = place;
    for (ConfigEntry& entry : node.entries) {
        entry.place = place;
        set_places(entry.value, place);
    }
    for (ConfigNode& element : node.elements) set_places(element, place);
}

}  // namespace lacuna
