#include "sim/config/differences.h"

#include <algorithm>
#include <utility>

#include "sim/config/echo_writer.h"

namespace lacuna {

namespace {

using Flat = std::vector<std::pair<std::string, std::string>>;

/// Single values under their dotted keys; an array of numbers is a single value.
void flatten(const EchoJson& json, const std::string& key, Flat& out) {
    const bool is_list = json.is_array() && !json.empty() && json.front().is_object();
    if (json.is_object()) {
        for (const auto& [inner, value] : json.items())
            flatten(value, key.empty() ? inner : key + '.' + inner, out);
    } else if (is_list) {
        for (std::size_t i = 0; i < json.size(); ++i) flatten(json[i], key + '.' + std::to_string(i + 1), out);
    } else if (!json.is_array() || key.find('.') != std::string::npos) {  // not `journal = []`
        out.emplace_back(key, json.dump());
    }
}

std::string value_in(const Flat& flat, const std::string& key) {
    const auto found = std::find_if(flat.begin(), flat.end(), [&](const auto& pair) { return pair.first == key; });
    return found == flat.end() ? "" : found->second;
}

}  // namespace

std::vector<Difference> differences(const Scenario& scenario) {
    std::vector<Difference> all;
    Flat first;
    if (!scenario.regimes.empty()) flatten(regime_json(scenario.regimes.front()), "", first);
    for (const Regime& regime : scenario.regimes) {
        Flat here;
        flatten(regime_json(regime), "", here);
        for (const auto& [key, value] : first) {
            const std::string other = value_in(here, key);
            if (other != value) all.push_back({regime.name, key, value, other});
        }
        for (const auto& [key, value] : here) {
            if (value_in(first, key).empty()) all.push_back({regime.name, key, "", value});
        }
    }
    return all;
}

}  // namespace lacuna
