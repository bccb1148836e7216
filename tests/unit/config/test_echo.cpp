#include <catch2/catch.hpp>
#include <nlohmann/json.hpp>

#include "sim/config/differences.h"
#include "sim/config/echo.h"
#include "sim/config/key_reference.h"
#include "sim/config/load.h"

using namespace lacuna;

namespace {

Scenario demo() { return load_scenario(LACUNA_CONFIGS "/biostimulant-trials.toml", {}); }

/// Keys of the resolved config without positions: journal.accept.by.
void collect_keys(const nlohmann::json& json, const std::string& key, std::vector<std::string>& keys) {
    if (json.is_object()) {
        for (const auto& [inner, value] : json.items())
            collect_keys(value, key.empty() ? inner : key + '.' + inner, keys);
    } else if (json.is_array() && !json.empty() && json.front().is_object()) {
        for (const auto& element : json) collect_keys(element, key, keys);
    } else {
        keys.push_back(key);
    }
}

}  // namespace

TEST_CASE("the resolved config reads back to the same scenario") {
    for (const char* name : {"/biostimulant-trials.toml", "/published-rates.toml"}) {
        const Scenario scenario =
            load_scenario(std::string(LACUNA_CONFIGS) + name, {{"run.seed", "9223372036854775807"}});
        const std::string json = resolved_json(scenario);
        CHECK(scenario_of_resolved(json, "echo") == scenario);
        CHECK(resolved_json(scenario_of_resolved(json, "echo")) == json);
    }
}

TEST_CASE("the resolved config keeps doubles to the last bit") {
    Scenario scenario = demo();
    scenario.regimes[0].science.field.true_rate = 0x1.999999999999bp-4;
    scenario.regimes[0].science.field.heterogeneity = 5e-324;
    CHECK(scenario_of_resolved(resolved_json(scenario), "echo") == scenario);
}

TEST_CASE("the resolved config holds what was left out") {
    const auto json = nlohmann::json::parse(resolved_json(parse_scenario("run.seed = 5", "text", {})));
    CHECK(json.at("run").at("literatures") == 100);
    CHECK(json.at("store").at("detail") == "literatures");
    const auto& regime = json.at("regimes").at(0);
    CHECK(regime.at("name") == "rules as given");
    CHECK(regime.at("field").at("effect") ==
          nlohmann::json({{"family", "fixed"}, {"value", 0.5}, {"clamp", false}}));
    CHECK(regime.at("lab").at(0).at("size") == nlohmann::json({{"plan", "fixed"}, {"n", 20}}));
    CHECK(regime.at("journal").empty());
    CHECK(regime.at("writing").at("chance").at("mixed") == 1.0);
}

TEST_CASE("texts that are not a resolved config are refused") {
    for (const char* text : {"", "[]", "{}", "{\"regimes\": []}", "{\"regimes\": [{}], \"x\": null}",
                             "{\"regimes\": [{\"field\": {\"true_rate\": 3}}]}", "{\"regimes\": 3}"}) {
        INFO(text);
        CHECK_THROWS_AS(scenario_of_resolved(text, "echo"), InputError);
    }
}

TEST_CASE("the digest tells scenarios apart and nothing else") {
    const std::string text = "[field]\ntrue_rate = 0.3\n";
    const std::string first = digest(parse_scenario(text, "a", {}));
    CHECK(first.size() == 64);
    CHECK(digest(parse_scenario("# a comment\nfield.true_rate = 0.3", "b", {})) == first);
    CHECK(digest(parse_scenario("field = { true_rate = 0.3, labs = 100 }", "c", {})) == first);  // the default said
    CHECK(digest(parse_scenario(text, "a", {{"run.seed", "2"}})) != first);
    CHECK(digest(parse_scenario(text, "a", {{"field.true_rate", "0.30000000000000004"}})) != first);
}

TEST_CASE("differences list what each regime changes") {
    const std::vector<Difference> all = differences(demo());
    REQUIRE(all.size() == 5);
    CHECK(all[1].regime == "results-blind review");
    CHECK(all[1].key == "journal.2.results_blind");
    CHECK(all[1].first == "0.1");
    CHECK(all[1].here == "1.0");
    CHECK(all[4].key == "journal.1.accept.chance");
    CHECK(all[4].here == "[0.8,0.1]");
}

TEST_CASE("differences name values that only one side has") {
    const Scenario s = parse_scenario(R"(
[[regime]]
name = "A"
[[regime]]
name = "B"
set = { "design.size" = { plan = "power", power = 0.8, effect = 0.5 } }
[[regime]]
name = "C"
)",
                                      "text", {});
    const std::vector<Difference> all = differences(s);
    REQUIRE(all.size() == 12);  // plan, n, power, effect, optimism, most of the design and of the labs that follow it
    CHECK(all[0].key == "design.size.plan");
    CHECK(all[1].key == "design.size.n");
    CHECK(all[1].first == "20");
    CHECK(all[1].here.empty());
    for (const Difference& difference : all) CHECK(difference.regime == "B");
}

TEST_CASE("the key reference lists every key that a resolved config can hold") {
    const std::string reference = '\n' + key_reference();
    std::vector<std::string> keys;
    const auto json = nlohmann::json::parse(resolved_json(demo()));
    for (const char* section : {"title", "run", "store"}) collect_keys(json.at(section), section, keys);
    collect_keys(json.at("regimes").at(0).at("journal"), "journal", keys);
    collect_keys(json.at("regimes").at(0).at("writing"), "writing", keys);
    CHECK(keys.size() > 15);
    for (const std::string& key : keys) {
        INFO(key);
        CHECK(reference.find('\n' + key + ": ") != std::string::npos);
    }
    CHECK(reference.find("\ndistribution.sdlog: number, between 0 and 100; default: required. ") !=
          std::string::npos);
    CHECK(reference.find("\nlab.studies.failures: 1 to 4096; default: required. ") != std::string::npos);
}
