#include "sim/config/json_tree.h"

#include <nlohmann/json.hpp>

namespace lacuna {

namespace {

using Json = nlohmann::ordered_json;

constexpr int deepest = 32;

InputError refused(const Place& place, const std::string& message) {
    Fault fault{place, "", message, ""};
    return InputError(std::move(fault));
}

ConfigNode copy(const Json& from, const Place& place, int depth) {
    if (depth > deepest) throw refused(place, "nests too deep");
    ConfigNode node;
    node.place = place;
    node.written_inline = true;
    if (from.is_object()) {
        for (const auto& [key, value] : from.items())
            node.entries.push_back({key, place, copy(value, place, depth + 1)});
    } else if (from.is_array()) {
        node.kind = ConfigNode::Kind::array;
        for (const Json& element : from) node.elements.push_back(copy(element, place, depth + 1));
    } else if (from.is_string()) {
        node.kind = ConfigNode::Kind::string;
        node.text = from.get<std::string>();
    } else if (from.is_boolean()) {
        node.kind = ConfigNode::Kind::boolean;
        node.boolean = from.get<bool>();
    } else if (from.is_number_integer()) {
        node.kind = ConfigNode::Kind::integer;
        node.integer = from.get<std::int64_t>();
    } else if (from.is_number_float()) {
        node.kind = ConfigNode::Kind::real;
        node.real = from.get<double>();
    } else {
        throw refused(place, "holds a null");
    }
    return node;
}

}  // namespace

ConfigNode parse_json(std::string_view text, const std::string& source) {
    const Place place{source, 0, 0};
    const Json json = Json::parse(text, nullptr, false);
    if (!json.is_object()) throw refused(place, "is not a JSON object");
    return copy(json, place, 0);
}

}  // namespace lacuna
