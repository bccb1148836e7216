#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>

#include "sim/config/load.h"

using namespace lacuna;

namespace {

Scenario parse(const std::string& text, const std::vector<Override>& overrides = {}) {
    return parse_scenario(text, "text", overrides);
}

Distribution made(Family family, double first, double second = 0.0) {
    Distribution d;
    d.family = family;
    d.first = first;
    d.second = second;
    return d;
}

Distribution effect_of(const std::string& value) {
    return parse("[field]\neffect = " + value + "\n").regimes.at(0).science.field.effect;
}

std::string message_of_loading(const std::string& path) {
    try {
        load_scenario(path, {});
    } catch (const InputError& error) {
        return error.what();
    }
    return "";
}

}  // namespace

TEST_CASE("a config with one key resolves to the defaults of scenario.h") {
    Scenario expected;
    expected.regimes.push_back({"rules as given", {{}, {}, {LabKind{}}}, {}});
    expected.run.seed = 5;
    CHECK(parse("run.seed = 5\n") == expected);
}

TEST_CASE("every key of the first version reaches its value") {
    const Scenario s = parse(R"(
title = "T"
[run]
seed = 9223372036854775807
literatures = 7
[field]
questions = 11
labs = 12
true_rate = 0.125
effect = 0.25
null_effect = -0.5
heterogeneity = 1
negligible = 0.0625
[design]
test = "known-variance"
alpha = 0.005
sides = 1
findings = "predicted"
estimate = "d"
size = { plan = "power", power = 0.9, effect = 0.75 }
[[lab]]
name = "one"
share = 0.25
lines = 3
studies = { rule = "until-positive", limit = 4 }
[[lab]]
name = "two"
share = 0.75
lines = { family = "poisson", mean = 5 }
studies = { rule = "until-failures", failures = 2, limit = 6 }
size = { plan = "distribution", family = "uniform", low = 4, high = 9, round = "down" }
[writing]
unit = "findings"
chance = { supportive = 0.5, mixed = 0.25, null = 0.125 }
[[journal]]
name = "P"
accept = { by = "p", steps = [0.01, 0.05], chance = [0.75, 0.5, 0.25], sides = 1 }
results_blind = 0.5
[[journal]]
name = "C"
accept = { by = "class", supportive = 0.25, mixed = 0.5, null = 0.125 }
results_blind_chance = 0.0
[submission]
attempts = 2
[store]
detail = "manuscripts"
compress = false
)");
    CHECK(s.title == "T");
    CHECK(s.run == Run{9223372036854775807u, 7});
    CHECK(s.store == StorePlan{Detail::manuscripts, false});
    REQUIRE(s.regimes.size() == 1);
    const Science& science = s.regimes[0].science;
    CHECK(science.field == Field{11, 12, 0.125, Distribution::fixed(0.25), Distribution::fixed(-0.5), 1.0, 0.0625});
    SizePlan power;
    power.kind = SizePlan::Kind::power;
    power.power = 0.9;
    power.effect.value = 0.75;
    CHECK(science.design == Design{Test::known_variance, 0.005, 1, Findings::predicted, EffectEstimate::d, power});
    SizePlan drawn;
    drawn.kind = SizePlan::Kind::distribution;
    drawn.distribution = made(Family::uniform, 4, 9);
    drawn.round_down = true;
    REQUIRE(science.labs.size() == 2);
    CHECK(science.labs[0] ==
          LabKind{"one", 0.25, Distribution::fixed(3), {LineRule::Kind::until_positive, 1, 1, 4}, power});
    CHECK(science.labs[1] ==
          LabKind{"two", 0.75, made(Family::poisson, 5), {LineRule::Kind::until_failures, 1, 2, 6}, drawn});
    const Rules& rules = s.regimes[0].rules;
    CHECK(rules.writing == Writing{Unit::findings, 0.5, 0.25, 0.125});
    CHECK(rules.submission.attempts == 2);
    REQUIRE(rules.journals.size() == 2);
    CHECK(rules.journals[0].accept ==
          Acceptance{Acceptance::Kind::by_p, 1.0, 1.0, 1.0, {0.01, 0.05}, {0.75, 0.5, 0.25}, 1});
    CHECK(rules.journals[0].results_blind == 0.5);
    CHECK(rules.journals[0].results_blind_chance == 0.75);  // the highest of accept
    CHECK(rules.journals[1].accept == Acceptance{Acceptance::Kind::by_class, 0.25, 0.5, 0.125, {}, {}, 2});
    CHECK(rules.journals[1].results_blind_chance == 0.0);
}

TEST_CASE("every distribution family is read, with bounds and clamping") {
    CHECK(effect_of("2") == Distribution::fixed(2.0));
    CHECK(effect_of("0.5") == Distribution::fixed(0.5));
    CHECK(effect_of(R"({ family = "fixed", value = 0.5 })") == Distribution::fixed(0.5));
    CHECK(effect_of(R"({ family = "normal", mean = -1, sd = 2 })") == made(Family::normal, -1, 2));
    CHECK(effect_of(R"({ family = "half-normal", sd = 2 })") == made(Family::half_normal, 2));
    CHECK(effect_of(R"({ family = "lognormal", median = 3, sdlog = 0.5 })") == made(Family::lognormal, 3, 0.5));
    CHECK(effect_of(R"({ family = "gamma", mean = 3, shape = 2 })") == made(Family::gamma, 3, 2));
    CHECK(effect_of(R"({ family = "beta", mean = 0.25, concentration = 4 })") == made(Family::beta, 0.25, 4));
    CHECK(effect_of(R"({ family = "uniform", low = -1, high = 1 })") == made(Family::uniform, -1, 1));
    CHECK(effect_of(R"({ family = "poisson", mean = 3 })") == made(Family::poisson, 3));
    Distribution discrete = made(Family::discrete, 0);
    discrete.values = {0.1, 0.4};
    discrete.weights = {3, 1};
    CHECK(effect_of(R"({ family = "discrete", values = [0.1, 0.4], weights = [3, 1] })") == discrete);
    Distribution bounded = made(Family::normal, 0, 1);
    bounded.min = -0.5;
    bounded.max = 2;
    CHECK(effect_of(R"({ family = "normal", mean = 0, sd = 1, min = -0.5, max = 2 })") == bounded);
    bounded.clamp = true;
    CHECK(effect_of(R"({ family = "normal", mean = 0, sd = 1, min = -0.5, max = 2, clamp = true })") == bounded);
}

TEST_CASE("a kind of labs has the design's size unless it has its own") {
    const Scenario s = parse("[design]\nsize = { plan = \"fixed\", n = 33 }\n[[lab]]\nname = \"A\"\n");
    CHECK(s.regimes[0].science.labs[0].size.n == 33);
    const Scenario without = parse("[design]\nsize = { plan = \"fixed\", n = 33 }\n");
    CHECK(without.regimes[0].science.labs[0].size.n == 33);
}

TEST_CASE("An override (--set) changes any key, by position, name and star, and takes plain words") {
    const std::string text = R"(
[[journal]]
name = "First Letters"
accept = { by = "class", supportive = 1, mixed = 1, null = 1 }
[[journal]]
name = "Second. Letters"
accept = { by = "class", supportive = 1, mixed = 1, null = 1 }
)";
    const Scenario s = parse(text, {{"run.seed", "42"},
                                    {"title", "\"A title\""},
                                    {"design.test", "known-variance"},
                                    {"design.size", "{ plan = \"fixed\", n = 1 }"},
                                    {"design.size.n", "3"},
                                    {"journal.*.results_blind", "0.25"},
                                    {"journal.First Letters.accept.null", "0.5"},
                                    {"journal.\"Second. Letters\".accept.null", "0.125"},
                                    {"journal.2.results_blind", "1"}});
    CHECK(s.run.seed == 42);
    CHECK(s.title == "A title");
    CHECK(s.regimes[0].science.design.test == Test::known_variance);
    CHECK(s.regimes[0].science.design.size.n == 3);
    const std::vector<Journal>& journals = s.regimes[0].rules.journals;
    CHECK(journals[0].results_blind == 0.25);
    CHECK(journals[1].results_blind == 1.0);
    CHECK(journals[0].accept.null == 0.5);
    CHECK(journals[1].accept.null == 0.125);
}

TEST_CASE("An override (--set) mends a fault of the file") {
    CHECK(parse("[field]\ntrue_rate = 2\n", {{"field.true_rate", "0.2"}}).regimes[0].science.field.true_rate ==
          0.2);
}

TEST_CASE("regimes change copies of the config, by paths, tables and sections alike") {
    const std::string text = R"(
[field]
true_rate = 0.5
labs = 50
[design]
size = { plan = "fixed", n = 30 }
[[journal]]
name = "A"
accept = { by = "class", supportive = 1, mixed = 1, null = 0.5 }
[[journal]]
name = "B"
accept = { by = "class", supportive = 0.5, mixed = 0.5, null = 0.5 }
[[regime]]
name = "given"
[[regime]]
name = "star"
set = { "journal.*.results_blind" = 1.0, "journal.B.accept.supportive" = 0.75 }
[[regime]]
name = "inline"
set = { field = { true_rate = 0.25, negligible = 0.125 }, "design.size" = { plan = "power", power = 0.5, effect = 1 } }
[[regime]]
name = "dotted"
set = { field.true_rate = 0.25, design.size.n = 40 }
[[regime]]
name = "section"
[regime.set.writing]
unit = "line"
chance = { supportive = 1, mixed = 0.5, null = 0 }
)";
    const std::vector<Regime> regimes = parse(text).regimes;
    REQUIRE(regimes.size() == 5);
    CHECK(regimes[0].science == regimes[1].science);
    CHECK(regimes[0].rules.journals[0].results_blind == 0.0);
    CHECK(regimes[1].rules.journals[0].results_blind == 1.0);
    CHECK(regimes[1].rules.journals[1].results_blind == 1.0);
    CHECK(regimes[1].rules.journals[1].accept.supportive == 0.75);
    CHECK(regimes[1].rules.journals[1].results_blind_chance == 0.75);  // derived anew
    CHECK(regimes[2].science.field.true_rate == 0.25);
    CHECK(regimes[2].science.field.negligible == 0.125);
    CHECK(regimes[2].science.field.labs == 50);  // a section in braces changes only what it names
    CHECK(regimes[2].science.design.size.kind == SizePlan::Kind::power);
    CHECK(regimes[3].science.field.true_rate == 0.25);
    CHECK(regimes[3].science.design.size.n == 40);
    CHECK(regimes[3].science.labs[0].size.n == 40);
    CHECK(regimes[4].rules.writing == Writing{Unit::line, 1.0, 0.5, 0.0});
    CHECK(regimes[4].science == regimes[0].science);
    CHECK(regimes[4].name == "section");
}

TEST_CASE("published-rates.toml is the field of the baseline script") {
    const Scenario s = load_scenario(LACUNA_CONFIGS "/published-rates.toml", {});
    const Science& science = s.regimes.at(0).science;
    CHECK(science.field.questions * s.run.literatures == 100'000'000);
    CHECK(science.field.true_rate == 0.3);
    CHECK(science.field.effect == Distribution::fixed(0.4));
    CHECK(science.field.null_effect == Distribution::fixed(0.0));
    CHECK(science.field.heterogeneity == 0.0);
    CHECK(science.labs.size() == 1);
    CHECK(science.labs[0].studies.longest() == 1);
    CHECK(science.labs[0].lines.first * static_cast<double>(science.field.labs) ==
          static_cast<double>(science.field.questions));
    Distribution size = made(Family::lognormal, 25, 0.5);
    size.min = 8;
    size.max = 200;
    size.clamp = true;
    CHECK(science.labs[0].size.distribution == size);
    CHECK(science.labs[0].size.round_down);
    CHECK(science.design.findings == Findings::predicted);
    const Rules& rules = s.regimes[0].rules;
    CHECK(rules.writing == Writing{});
    REQUIRE(rules.journals.size() == 1);
    CHECK(rules.journals[0].accept.supportive == 0.95);
    CHECK(rules.journals[0].accept.null == 0.2);
}

TEST_CASE("a byte order mark and Windows line ends are no faults") {
    CHECK(parse("\xEF\xBB\xBF[run]\r\nseed = 3\r\n").run.seed == 3);
    CHECK(parse("title = \"\"\"\\\n  \u00c4cker\"\"\"\n").title == "\u00c4cker");  // as TOML 1.0 trims lines
}

TEST_CASE("a config that cannot be read is one clear fault") {
    const std::string remedy = " (start from configs/biostimulant-trials.toml)";
    CHECK(message_of_loading("/nowhere/at/all.toml") ==
          "/nowhere/at/all.toml: cannot be opened: No such file or directory" + remedy);
    CHECK(message_of_loading("/tmp") == "/tmp: is a directory, not a config" + remedy);
}

TEST_CASE("the steps of all regimes together are limited") {
    const auto journal = [](int from) {
        std::string steps, chances = "0.5";
        for (int i = 0; i < 90; ++i) {
            steps += (i ? ", " : "") + std::to_string(0.001 * (from + i));
            chances += ", 0.5";
        }
        return "{ by = \"p\", steps = [" + steps + "], chance = [" + chances + "] }";
    };
    std::string text = "[[journal]]\nname = \"J\"\naccept = " + journal(1) + "\n";
    const auto regime = [&](const char* name, int from) {
        return std::string("[[regime]]\nname = \"") + name + "\"\nset = { \"journal.J.accept\" = " + journal(from) +
               " }\n";
    };
    text += regime("A", 100) + regime("B", 200);
    CHECK(parse(text).regimes.size() == 2);
    text += regime("C", 300);
    CHECK_THROWS_WITH(parse(text), Catch::Contains("hold more than 255 different values of p"));
}
