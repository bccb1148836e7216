#include "sim/config/echo.h"

#include "sim/base/sha256.h"
#include "sim/config/echo_writer.h"
#include "sim/config/json_tree.h"
#include "sim/config/keys.h"
#include "sim/config/resolve.h"

namespace lacuna {

namespace {

/// The tree of one regime alone, as a config without regimes.
ConfigNode as_config(const ConfigNode& root, const ConfigNode& regime) {
    ConfigNode config = regime;
    std::erase_if(config.entries, [](const ConfigEntry& entry) { return entry.key == "name"; });
    for (const ConfigEntry& entry : root.entries) {
        if (entry.key != "regimes") config.entries.push_back(entry);
    }
    return config;
}

std::string name_of(const ConfigNode& regime) {
    const ConfigEntry* name = regime.find("name");
    return name ? name->value.text : "";
}

}  // namespace

EchoJson regime_json(const Regime& regime) {
    EchoJson object = EchoJson::object();
    Regime copy = regime;
    EchoWriter writer(object);
    describe(writer, copy.science, copy.rules);
    return object;
}

std::string resolved_json(const Scenario& scenario) {
    Scenario copy = scenario;
    EchoJson root = EchoJson::object();
    EchoWriter writer(root);
    writer.text("title", copy.title, "");
    writer.table("run", "", [&](auto& inner) { describe(inner, copy.run); });
    writer.table("store", "", [&](auto& inner) { describe(inner, copy.store); });
    EchoJson& regimes = root["regimes"] = EchoJson::array();
    for (const Regime& regime : scenario.regimes) {
        EchoJson object{{"name", regime.name}};
        object.update(regime_json(regime));
        regimes.push_back(std::move(object));
    }
    return root.dump(2) + '\n';
}

Scenario scenario_of_resolved(std::string_view json, const std::string& source_name) {
    const ConfigNode root = parse_json(json, source_name);
    const ConfigEntry* regimes = root.find("regimes");
    std::vector<Fault> faults;
    Scenario scenario;
    if (!regimes || regimes->value.elements.empty()) faults.push_back({root.place, "regimes", "is missing", ""});
    for (std::size_t i = 0; faults.empty() && i < regimes->value.elements.size(); ++i) {
        const ConfigNode& regime = regimes->value.elements[i];
        Scenario one = resolve(as_config(root, regime), source_name, faults);
        one.regimes.front().name = name_of(regime);
        if (i == 0)
            scenario = std::move(one);
        else
            scenario.regimes.push_back(std::move(one.regimes.front()));
    }
    if (!faults.empty()) throw InputError(std::move(faults));
    return scenario;
}

std::string digest(const Scenario& scenario) { return sha256_hex(resolved_json(scenario)); }

}  // namespace lacuna
