// What must hold of a run whatever the scenario: same bits, shared draws, rules that stay downstream.
#include <fmt/format.h>

#include <catch2/catch.hpp>

#include "sim/tally/layout.h"
#include "tests/oracle/recorded_run.h"
#include "tests/oracle/run_scenario.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;
using namespace lacuna::oracle;

namespace {

const std::string field = R"(
[run]
seed = 5
literatures = 6
[field]
questions = 900
labs = 40
true_rate = 0.4
effect = { family = "normal", mean = 0.3, sd = 0.3 }
heterogeneity = 0.1
[design]
size = { plan = "distribution", family = "lognormal", median = 20, sdlog = 0.4, min = 4, max = 90 }
[[lab]]
name = "routine"
share = 0.7
lines = { family = "poisson", mean = 9 }
studies = { rule = "until-positive", limit = 4 }
[[lab]]
name = "careful"
share = 0.3
lines = 7
studies = { rule = "until-failures", failures = 2, limit = 5 }
size = { plan = "power", power = 0.8, effect = 0.6 }
)";

const std::string rules = R"(
[writing]
unit = "line"
chance = { supportive = 0.9, mixed = 0.6, null = 0.3 }
[[journal]]
name = "first"
accept = { by = "p", steps = [0.01, 0.05], chance = [0.8, 0.5, 0.1] }
[[journal]]
name = "second"
accept = { by = "class", supportive = 0.6, mixed = 0.4, null = 0.3 }
results_blind = 0.2
[submission]
attempts = 2
)";

}  // namespace

TEST_CASE("1, 2 and 7 threads give the same bits, in small literatures and in one huge one", "[engine]") {
    const Scenario small = parse_scenario(field + rules + "[store]\ndetail = \"studies\"\n", "t", {});
    const Recorded one = run(small, 1);
    CHECK(same(one, run(small, 2)));
    CHECK(same(one, run(small, 7)));
    const Scenario huge = parse_scenario(
        field + rules, "t", {{"field.questions", "400000"}, {"field.labs", "20000"}, {"run.literatures", "2"}});
    const Recorded whole = run(huge, 1);
    CHECK(whole.outcome.studies > 500000);
    CHECK(same(whole, run(huge, 2)));
    CHECK(same(whole, run(huge, 7)));
}

TEST_CASE("A literature does not depend on how many others there are", "[engine]") {
    const Recorded six = run(parse_scenario(field + rules, "t", {}));
    const Recorded two = run(parse_scenario(field + rules, "t", {{"run.literatures", "2"}}));
    for (std::size_t l = 0; l < 2; ++l) CHECK(same(six.rows[l][0], two.rows[l][0]));
    CHECK_FALSE(same(six.rows[0][0], six.rows[1][0]));
    const Recorded other = run(parse_scenario(field + rules, "t", {{"run.seed", "6"}}));
    CHECK_FALSE(same(six.rows[0][0], other.rows[0][0]));
}

TEST_CASE("A regime that changes nothing differs by exactly nothing", "[engine]") {
    const oracle::Simulated simulated(
        parse_scenario(field + rules +
                           "[[regime]]\nname = \"a\"\n[[regime]]\nname = \"b\"\n[[regime]]\nname = \"c\"\nset = { "
                           "\"writing.chance.null\" = 0.3 }\n",
                       "t", {}));
    std::size_t compared = 0;
    for (const PairedDifference& d : simulated.differences()) {
        if (!d.estimate.value) continue;
        INFO(d.metric);
        CHECK(*d.estimate.value == 0.0);
        CHECK(d.estimate.mcse.value() == 0.0);
        ++compared;
    }
    CHECK(compared > 40);
}

TEST_CASE("Rules change no conducted study, and a journal added behind changes no earlier decision", "[engine]") {
    const std::string studies = "[store]\ndetail = \"studies\"\n";
    const Scenario base = parse_scenario(field + rules + studies, "t", {});
    const Scenario more = parse_scenario(field + rules +
                                             "[[journal]]\nname = \"third\"\naccept = { by = \"class\", supportive "
                                             "= 0.5, mixed = 0.5, null = 0.5 }\n" +
                                             studies,
                                         "t", {{"submission.attempts", "3"}, {"writing.chance.null", "0.3"}});
    const Recorded a = run(base);
    const Recorded b = run(more);
    CHECK(a.tables.at("questions").columns == b.tables.at("questions").columns);
    CHECK(a.tables.at("labs").columns == b.tables.at("labs").columns);
    for (const char* name : {"statistic", "estimate", "true_effect"}) {
        CHECK(column<double>(base, a, "studies", name) == column<double>(more, b, "studies", name));
    }
    const auto& before = column<std::uint8_t>(base, a, "manuscripts", "journal");
    const auto& after = column<std::uint8_t>(more, b, "manuscripts", "journal");
    const auto& status = column<std::uint8_t>(base, a, "manuscripts", "status");
    REQUIRE(before.size() == after.size());
    std::size_t published_by_third = 0;
    for (std::size_t m = 0; m < before.size(); ++m) {
        if (status[m] == std::uint8_t(Status::published)) REQUIRE(after[m] == before[m]);
        published_by_third += after[m] == 3;
    }
    CHECK(published_by_third > 0);
    // A stricter alpha conducts the same data: the claims differ, the statistics do not.
    const Recorded strict = run(parse_scenario(field + rules + studies, "t",
                                               {{"design.alpha", "0.01"},
                                                {"lab.*.studies", "{ rule = \"fixed\", count = 2 }"},
                                                {"lab.*.size", "{ plan = \"fixed\", n = 30 }"}}));
    const Recorded loose = run(parse_scenario(
        field + rules + studies, "t",
        {{"lab.*.studies", "{ rule = \"fixed\", count = 2 }"}, {"lab.*.size", "{ plan = \"fixed\", n = 30 }"}}));
    CHECK(column<double>(base, strict, "studies", "statistic") ==
          column<double>(base, loose, "studies", "statistic"));
    CHECK(column<std::uint8_t>(base, strict, "studies", "claim") !=
          column<std::uint8_t>(base, loose, "studies", "claim"));
}

TEST_CASE("The stored studies agree with their literature's row", "[engine]") {
    const Scenario scenario = parse_scenario(field + rules + "[store]\ndetail = \"studies\"\n", "t", {});
    const Recorded all = run(scenario);
    const Layout layout(2);
    const auto& literature = column<std::int32_t>(scenario, all, "studies", "literature");
    const auto& truth = column<std::uint8_t>(scenario, all, "studies", "truth");
    const auto& claim = column<std::uint8_t>(scenario, all, "studies", "claim");
    const auto& status = column<std::uint8_t>(scenario, all, "studies", "status_1");
    const auto& n1 = column<std::int32_t>(scenario, all, "studies", "n1");
    for (std::size_t l = 0; l < all.rows.size(); ++l) {
        const std::vector<double>& row = all.rows[l][0];
        for (std::size_t scope = 0; scope < 3; ++scope) {
            double people = 0.0;
            for (std::size_t t = 0; t < 3; ++t) {
                for (std::size_t c = 0; c < 4; ++c) {
                    double counted = 0.0;
                    for (std::size_t s = 0; s < literature.size(); ++s) {
                        counted += literature[s] == std::int32_t(l) && truth[s] == t && claim[s] == c &&
                                   status[s] >= scope;
                    }
                    CHECK(counted == row[layout.studies(0, Scope(scope), Truth(t), Claim(c))] +
                                         row[layout.studies(1, Scope(scope), Truth(t), Claim(c))]);
                }
            }
            for (std::size_t s = 0; s < literature.size(); ++s) {
                people += literature[s] == std::int32_t(l) && status[s] >= scope ? 2.0 * n1[s] : 0.0;
            }
            CHECK(people == row[layout.participants(0, Scope(scope))] + row[layout.participants(1, Scope(scope))]);
        }
    }
}

TEST_CASE("Lines follow their rules, and labs run the lines they drew", "[engine]") {
    const Scenario scenario = parse_scenario(field + rules + "[store]\ndetail = \"studies\"\n", "t", {});
    const Recorded all = run(scenario);
    const auto& literature = column<std::int32_t>(scenario, all, "studies", "literature");
    const auto& line = column<std::int32_t>(scenario, all, "studies", "line");
    const auto& lab = column<std::int32_t>(scenario, all, "studies", "lab");
    const auto& number = column<std::int32_t>(scenario, all, "studies", "study");
    const auto& claim = column<std::uint8_t>(scenario, all, "studies", "claim");
    const auto& kind = column<std::uint8_t>(scenario, all, "labs", "kind");
    const auto& lines = column<std::int32_t>(scenario, all, "labs", "lines");
    std::map<std::pair<int, int>, int> lines_of_lab;
    for (std::size_t s = 0; s < line.size();) {
        std::size_t end = s;
        while (end < line.size() && line[end] == line[s] && literature[end] == literature[s]) ++end;
        const std::size_t studies = end - s;
        std::size_t findings = 0;
        for (std::size_t i = s; i < end; ++i) {
            REQUIRE(number[i] == std::int32_t(i - s));
            REQUIRE(lab[i] == lab[s]);
            findings += claim[i] != 0;
        }
        ++lines_of_lab[{literature[s], lab[s]}];
        const bool last_finds = claim[end - 1] != 0;
        if (kind[std::size_t(literature[s] * 40 + lab[s])] == 0) {  // until-positive, at most 4
            REQUIRE((studies == 4 || last_finds));
            REQUIRE(findings <= 1);
            REQUIRE((findings == 0) == (studies == 4 && !last_finds));
        } else {  // two failures, at most 5
            REQUIRE((studies == 5 || studies - findings == 2));
            REQUIRE(studies - findings <= 2);
        }
        s = end;
    }
    for (std::size_t i = 0; i < lines.size(); ++i) CHECK(lines_of_lab[{int(i / 40), int(i % 40)}] == lines[i]);
}

TEST_CASE("A stopped run hands on whole literatures, the first ones", "[engine]") {
    const Scenario scenario = parse_scenario(field + rules, "t", {{"run.literatures", "4000"}});
    int asked = 0;
    const Recorded stopped = run(scenario, 2, [&] { return ++asked > 3; });
    CHECK(stopped.outcome.stopped);
    CHECK(stopped.rows.size() > 0);
    CHECK(stopped.rows.size() < 4000);
    CHECK(stopped.outcome.literatures == stopped.rows.size());
    const Recorded few =
        run(parse_scenario(field + rules, "t", {{"run.literatures", std::to_string(stopped.rows.size())}}));
    CHECK(same(stopped, few));
}

TEST_CASE("Findings, writing and publication at their limits", "[engine]") {
    const auto everything = oracle::Simulated(parse_scenario(field, "t", {}));
    for (const char* metric : {"false_discovery_rate", "positive_share", "type1_error", "power", "effect_inflation",
                               "effect_inflation_median"}) {
        INFO(metric);
        CHECK(everything.estimate(metric, Scope::published).value ==
              everything.estimate(metric, Scope::conducted).value);
    }
    CHECK(everything.estimate("missing_share", Scope::published).value == 0.0);
    const auto nothing = oracle::Simulated(parse_scenario(field + "[writing]\nchance = 0.0\n", "t", {}));
    CHECK(nothing.estimate("missing_share", Scope::published).value == 1.0);
    CHECK_FALSE(nothing.estimate("false_discovery_rate", Scope::published).value.has_value());
    CHECK_FALSE(nothing.estimate("effect_inflation_median", Scope::published).value.has_value());
}

TEST_CASE("More selection by significance never lowers inflation or the false discovery rate", "[engine]") {
    std::string regimes;
    for (const char* w : {"1.0", "0.5", "0.2", "0.0"}) {
        regimes += fmt::format(
            "[[regime]]\nname = \"{0}\"\nset = {{ \"writing.chance\" = {{ supportive = 1.0, mixed = {0}, null = "
            "{0} }} }}\n",
            w);
    }
    const oracle::Simulated s(
        parse_scenario(field + "[writing]\nunit = \"study\"\n" + regimes, "t",
                       {{"run.literatures", "60"}, {"lab.*.studies", "{ rule = \"fixed\", count = 1 }"}}));
    for (std::size_t r = 1; r < 4; ++r) {
        CHECK(*s.estimate("effect_inflation_reports", Scope::published, r).value >
              *s.estimate("effect_inflation_reports", Scope::published, r - 1).value);
        CHECK(*s.estimate("positive_share", Scope::published, r).value >
              *s.estimate("positive_share", Scope::published, r - 1).value);
    }
}

TEST_CASE("One question, one lab, one study", "[engine]") {
    const Recorded one = run(parse_scenario("[run]\nliteratures = 3\n[field]\nquestions = 1\nlabs = 1\n", "t", {}));
    CHECK(one.outcome.studies == 3);
    const Recorded none = run(parse_scenario(
        "[run]\nliteratures = 3\n[field]\nquestions = 5\nlabs = 1\n[[lab]]\nname = \"idle\"\nlines = 0\n", "t",
        {}));
    CHECK(none.outcome.studies == 0);
    CHECK(none.rows.size() == 3);
}
