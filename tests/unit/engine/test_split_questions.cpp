// Few questions with many studies each: blocks that hold a part of their questions' lines.
#include <catch2/catch.hpp>

#include "sim/config/load.h"
#include "sim/literature/block.h"
#include "sim/tally/layout.h"
#include "tests/oracle/recorded_run.h"

using namespace lacuna;
using namespace lacuna::oracle;

namespace {

const std::string few = R"(
[run]
seed = 8
literatures = 2
[field]
questions = 7
labs = 40
true_rate = 0.5
effect = { family = "normal", mean = 0.3, sd = 0.2 }
[design]
size = { plan = "fixed", n = 12 }
[[lab]]
name = "routine"
share = 0.7
lines = { family = "poisson", mean = 900 }
studies = { rule = "until-positive", limit = 3 }
[[lab]]
name = "careful"
share = 0.3
lines = 1000
studies = { rule = "fixed", count = 2 }
[writing]
unit = "line"
chance = { supportive = 0.9, mixed = 0.6, null = 0.3 }
[[journal]]
name = "first"
accept = { by = "p", steps = [0.05], chance = [0.8, 0.1] }
)";

}  // namespace

TEST_CASE("Questions with too many lines for one block are counted whole", "[engine]") {
    const Scenario scenario = parse_scenario(few + "[store]\ndetail = \"studies\"\n", "t", {});
    REQUIRE(cut_into_blocks(scenario).parts > 3);
    const Recorded all = run(scenario, 1);
    CHECK(same(all, run(scenario, 2)));
    CHECK(same(all, run(scenario, 7)));
    const auto& literature = column<std::int32_t>(scenario, all, "studies", "literature");
    const auto& question = column<std::int32_t>(scenario, all, "studies", "question");
    const auto& truth = column<std::uint8_t>(scenario, all, "studies", "truth");
    const auto& claim = column<std::uint8_t>(scenario, all, "studies", "claim");
    const auto& status = column<std::uint8_t>(scenario, all, "studies", "status_1");
    CHECK(all.tables.at("questions").rows == 14);
    CHECK(all.tables.at("labs").rows == 80);
    const Layout layout(2);
    for (std::size_t l = 0; l < 2; ++l) {
        for (std::size_t scope = 0; scope < 3; ++scope) {
            double studies[7] = {}, findings[7] = {};
            bool real[7] = {};
            for (std::size_t s = 0; s < literature.size(); ++s) {
                if (literature[s] != std::int32_t(l) || status[s] < scope) continue;
                studies[question[s]] += 1;
                findings[question[s]] += claim[s] == std::uint8_t(Claim::positive) || claim[s] == std::uint8_t(Claim::reversed);
                real[question[s]] = truth[s] != 0;
            }
            double standing[2][3] = {};
            for (std::size_t q = 0; q < 7; ++q) {
                standing[real[q]][0] += studies[q] > 0;
                standing[real[q]][1] += findings[q] > 0;
                standing[real[q]][2] += 2 * findings[q] > studies[q];
            }
            for (std::size_t r = 0; r < 2; ++r) {
                for (std::size_t n = 0; n < 3; ++n) {
                    CHECK(all.rows[l][0][layout.questions(Scope(scope), r != 0, Standing(n))] == standing[r][n]);
                }
            }
        }
    }
}

TEST_CASE("Storing studies changes no count, where lines are split and where they are not", "[engine]") {
    for (const char* questions : {"7", "3000"}) {
        const Scenario stored = parse_scenario(few + "[store]\ndetail = \"studies\"\n", "t", {{"field.questions", questions}});
        const Scenario counted = parse_scenario(few, "t", {{"field.questions", questions}});
        const Recorded a = run(stored), b = run(counted);
        for (std::size_t l = 0; l < 2; ++l) CHECK(same(a.rows[l][0], b.rows[l][0]));
    }
}

TEST_CASE("Long lines", "[engine]") {
    const std::string text = R"(
[run]
literatures = 2
[field]
questions = 3
labs = 1
[[lab]]
name = "long"
lines = 10
studies = { rule = "fixed", count = 4096 }
)";
    const Scenario scenario = parse_scenario(text, "t", {});
    CHECK(cut_into_blocks(scenario).parts > 1);
    const Recorded one = run(scenario, 1);
    CHECK(one.outcome.studies == 2 * 10 * 4096);
    CHECK(same(one, run(scenario, 2)));
}

TEST_CASE("Blocks partition a literature: every line of every question once", "[engine]") {
    for (const char* questions : {"1", "31", "33", "500", "100000"}) {
        const Scenario scenario = parse_scenario(few, "t", {{"field.questions", questions}});
        const Blocks blocks = cut_into_blocks(scenario);
        const PreparedScenario prepared(scenario);
        const StreamKey key{1};
        const std::vector<Roster> rosters = draw_rosters(prepared, key, 0);
        ConductScratch scratch;
        Conducted block;
        std::uint64_t next_line = 0;
        for (std::uint64_t b = 0; b < blocks.count; ++b) {
            const BlockRange range = blocks.range(b);
            conduct(prepared.sciences[0], key, rosters[0], 0, range, scratch, block);
            REQUIRE((block.lines.question.empty() || block.lines.first == next_line));
            for (std::size_t i = 0; i < block.lines.question.size(); ++i) {
                const std::uint64_t q = range.first + block.lines.question[i];
                // first_line(q) = floor(q L / Q) <= l exactly for q < (l + 1) Q / L.
                const std::uint64_t lines = rosters[0].lines, all = std::stoull(questions);
                REQUIRE(q == ((next_line + i + 1) * all + lines - 1) / lines - 1);
            }
            next_line += block.lines.question.size();
        }
        CHECK(next_line == rosters[0].lines);
    }
}
