#include "analysis/cli/model_preview.h"

#include <fmt/format.h>

#include <nlohmann/json.hpp>

namespace lacuna {

namespace {

using Json = nlohmann::ordered_json;
using Lines = std::vector<std::pair<std::string, std::string>>;

std::string value_text(const Json& value);

/// "normal: mean 0.35, sd 0.15" for tables, "0.7, 0.1" for lists.
std::string inline_text(const Json& value) {
    std::string text;
    for (const auto& [key, inner] : value.items()) {
        if (!text.empty()) text += ", ";
        if (value.is_object()) text += fmt::format("{} ", key);
        text += value_text(inner);
    }
    return text;
}

std::string value_text(const Json& value) {
    if (value.is_string()) return value.get<std::string>();
    return value.is_structured() ? inline_text(value) : value.dump();
}

/// Tables that say one thing and are read at one glance: distributions, sizes, rules.
bool is_one_value(const Json& value) {
    return value.contains("family") || value.contains("plan") || value.contains("rule") || value.contains("by");
}

void add_lines(const std::string& prefix, const Json& value, Lines& lines) {
    const bool list_of_tables = value.is_array() && !value.empty() && value[0].is_object();
    if ((value.is_object() && !is_one_value(value)) || list_of_tables) {
        std::size_t position = 1;
        for (const auto& [key, inner] : value.items()) {
            const std::string part = list_of_tables ? std::to_string(position++) : key;
            add_lines(prefix.empty() ? part : fmt::format("{}.{}", prefix, part), inner, lines);
        }
        return;
    }
    lines.emplace_back(prefix, value_text(value));
}

}  // namespace

Lines model_lines(const std::string& resolved) {
    const Json all = Json::parse(resolved);
    Lines lines;
    for (const auto& [key, value] : all.items()) {
        if (key == "title" || key == "regimes") continue;
        add_lines(key, value, lines);
    }
    for (const auto& [key, value] : all.at("regimes").at(0).items()) {
        if (key != "name") add_lines(key, value, lines);
    }
    return lines;
}

}  // namespace lacuna
