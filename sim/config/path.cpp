#include "sim/config/path.h"

#include <fmt/format.h>

#include <algorithm>
#include <charconv>

namespace lacuna {

namespace {

constexpr std::size_t most_parts = 32;  // no key lies as deep

using Problem = std::optional<std::string>;

struct Assignment {
    const ConfigPath& path;
    const ConfigNode& value;
    const Place& key_place;

    std::string until(std::size_t part) const {
        return to_string(ConfigPath{{path.parts.begin(), path.parts.begin() + static_cast<std::ptrdiff_t>(part)}});
    }
};

Problem descend(ConfigNode& node, std::size_t part, const Assignment& job);

bool all_digits(std::string_view text) {
    return !text.empty() && std::all_of(text.begin(), text.end(), [](char c) { return c >= '0' && c <= '9'; });
}

bool is_named(const ConfigNode& element, std::string_view name) {
    const ConfigEntry* entry = element.find("name");
    return entry && entry->value.kind == ConfigNode::Kind::string && entry->value.text == name;
}

/// Positions in the array that a part of a path stands for.
std::vector<std::size_t> selected(const ConfigNode& array, std::string_view part) {
    std::vector<std::size_t> positions;
    std::size_t wanted = 0;
    if (all_digits(part)) std::from_chars(part.data(), part.data() + part.size(), wanted);
    for (std::size_t i = 0; i < array.elements.size(); ++i) {
        if (part == "*" || wanted == i + 1 || (wanted == 0 && is_named(array.elements[i], part)))
            positions.push_back(i);
    }
    return positions;
}

Problem descend_array(ConfigNode& array, std::size_t part, const Assignment& job) {
    const std::string& which = job.path.parts[part];
    const std::vector<std::size_t> positions = selected(array, which);
    if (positions.empty()) {
        return fmt::format(
            "{} has {} element{}, and none is {}", job.until(part), array.elements.size(),
            array.elements.size() == 1 ? "" : "s",
            all_digits(which) || which == "*" ? which : fmt::format("named \"{}\"", printable(which)));
    }
    for (const std::size_t position : positions) {
        if (Problem problem = descend(array.elements[position], part + 1, job)) return problem;
    }
    return {};
}

Problem descend(ConfigNode& node, std::size_t part, const Assignment& job) {
    if (part == job.path.parts.size()) {
        node = job.value;
        return {};
    }
    if (node.kind == ConfigNode::Kind::array) return descend_array(node, part, job);
    if (node.kind != ConfigNode::Kind::table) {
        return fmt::format("{} is {}, which has no keys", job.until(part), kind_name(node.kind));
    }
    const std::string& key = job.path.parts[part];
    const bool is_last = part + 1 == job.path.parts.size();
    ConfigEntry* entry = node.find(key);
    if (!entry) {
        if (part == 0 && !is_last && (key == "lab" || key == "journal")) {
            return fmt::format("the config has no [[{}]] that could be changed", key);
        }
        node.entries.push_back({key, job.key_place, {}});
        entry = &node.entries.back();
        entry->value.place = job.key_place;
    }
    if (is_last) entry->place = job.key_place;
    return descend(entry->value, part + 1, job);
}

}  // namespace

std::optional<ConfigPath> parse_path(std::string_view text) {
    ConfigPath path;
    std::size_t at = 0;
    while (true) {
        std::string part;
        if (at < text.size() && text[at] == '"') {
            const std::size_t close = text.find('"', at + 1);
            if (close == std::string_view::npos) return {};
            part = text.substr(at + 1, close - at - 1);
            at = close + 1;
            if (at < text.size() && text[at] != '.') return {};
        } else {
            const std::size_t dot = std::min(text.find('.', at), text.size());
            part = text.substr(at, dot - at);
            at = dot;
        }
        if (part.empty() || path.parts.size() == most_parts) return {};
        path.parts.push_back(std::move(part));
        if (at >= text.size()) return path;
        ++at;
    }
}

std::string to_string(const ConfigPath& path) {
    std::string text;
    for (const std::string& raw : path.parts) {
        const std::string part = printable(raw);
        if (!text.empty()) text += '.';
        const bool plain = part.find('.') == std::string::npos;
        text += plain ? part : '"' + part + '"';
    }
    return text;
}

std::optional<std::string> assign(ConfigNode& root, const ConfigPath& path, const ConfigNode& value,
                                  const Place& key_place) {
    return descend(root, 0, {path, value, key_place});
}

}  // namespace lacuna
