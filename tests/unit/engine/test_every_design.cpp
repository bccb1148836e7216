// What must hold of a run with every design: same bits, and sizes and rates as planned.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <numeric>

#include "sim/config/load.h"
#include "sim/design/design.h"
#include "tests/oracle/recorded_run.h"
#include "tests/oracle/run_scenario.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;
using namespace lacuna::oracle;

namespace {

Scenario field(const std::string& design, const std::string& effect, const std::string& rest, std::uint64_t questions,
               std::uint64_t literatures) {
    return parse_scenario("[run]\nseed = 3\nliteratures = " + std::to_string(literatures) + "\n[field]\nquestions = " +
                              std::to_string(questions) + "\nlabs = 50\ntrue_rate = 0.4\neffect = " + effect +
                              "\nheterogeneity = 0.1\n[design]\n" + design + "\n" + rest,
                          "t", {});
}

const std::string two_kinds = R"(
[[lab]]
name = "a"
share = 0.6
lines = 6
studies = { rule = "until-positive", limit = 3 }
[[lab]]
name = "b"
share = 0.4
lines = { family = "poisson", mean = 5 }
[[journal]]
name = "j"
accept = { by = "p", steps = [0.01, 0.05], chance = [0.9, 0.6, 0.2] }
[store]
detail = "studies"
)";

}  // namespace

TEST_CASE("Every design: 1, 2 and 7 threads give the same bits, and so does every cut into blocks", "[engine]") {
    const std::string drawn = "size = { plan = \"distribution\", family = \"lognormal\", median = 20, sdlog = 0.4, min = 12, max = 60 }\n";
    const std::string effect = "{ family = \"uniform\", low = 0.1, high = 0.6 }";
    for (const std::string& design :
         {std::string("welch = true\nallocation = 1.4\n"), std::string("test = \"paired-means\"\nequivalence = { bound = 0.4 }\n"),
          std::string("test = \"correlation\"\n"), std::string("test = \"several-means\"\ngroups = 3\n"),
          std::string("test = \"several-means\"\ngroups = 4\n"), std::string("test = \"several-means\"\ngroups = 6\n"),
          std::string("test = \"two-proportions\"\nbase_rate = 0.3\n"), std::string("looks = { count = 3, futility = 0.2 }\n"),
          std::string("test = \"known-variance\"\nlooks = { count = 2, boundary = \"spending-pocock\" }\n")}) {
        INFO(design);
        const Scenario scenario = field(design + drawn, effect, two_kinds, 300, 3);
        const Recorded one = run(scenario, 1);
        CHECK(same(one, run(scenario, 2)));
        CHECK(same(one, run(scenario, 7)));
        // Few questions with many lines are cut elsewhere than many questions with few; stored or not, alike.
        Scenario few = field(design + drawn, effect, two_kinds, 5, 1);
        for (Regime& regime : few.regimes) regime.science.field.labs = 9000;
        const Recorded stored = run(few, 1);
        few.store.detail = Detail::literatures;
        CHECK(same(stored.rows[0][0], run(few, 7).rows[0][0]));
        CHECK(stored.outcome.studies > 50000);
    }
}

TEST_CASE("Sizes planned for true effects: real questions as planned one by one, the others alike", "[engine]") {
    Scenario scenario = field("size = { plan = \"power\", power = 0.8, effect = \"true\", optimism = 1.25, most = 800 }\n",
                              "{ family = \"normal\", mean = 0.4, sd = 0.2 }",
                              "[[lab]]\nname = \"a\"\nlines = 100\n[store]\ndetail = \"studies\"\n", 5000, 1);
    const Recorded all = run(scenario);
    const auto& n = column<std::int32_t>(scenario, all, "studies", "n1");
    const auto& effect = column<double>(scenario, all, "studies", "question_effect");
    const auto& question = column<std::int32_t>(scenario, all, "studies", "question");
    const auto& real = column<std::uint8_t>(scenario, all, "questions", "real");
    const Design& design = scenario.regimes[0].science.design;
    std::vector<double> sizes[2];
    for (std::size_t s = 0; s < n.size(); ++s) {
        const bool is_real = real[static_cast<std::size_t>(question[s])] != 0;
        sizes[is_real].push_back(n[s]);
        if (!is_real || s % 20 != 0) continue;
        const double planned = 1.25 * std::fabs(effect[s]);
        const double by_hand = planned < 0.14 ? 800 : planned_n(design, 0.8, planned);  // d = 0.14 needs 802
        CHECK(n[s] == std::min(800.0, by_hand));
    }
    // Sizes tell nothing about the truth: two-sample Kolmogorov-Smirnov.
    for (auto& its : sizes) std::sort(its.begin(), its.end());
    double worst = 0.0;
    for (double x = 2; x <= 800; x += 1) {
        const auto share = [&](const std::vector<double>& its) {
            return double(std::upper_bound(its.begin(), its.end(), x) - its.begin()) / double(its.size());
        };
        worst = std::max(worst, std::fabs(share(sizes[0]) - share(sizes[1])));
    }
    const double count = double(sizes[0].size()) * double(sizes[1].size()) / double(n.size());
    CHECK(worst * std::sqrt(count) < kolmogorov_bound);
}

TEST_CASE("Studies of an exact power have it, whatever the effect", "[engine]") {
    const Simulated simulated(parse_scenario(R"(
[run]
literatures = 200
[field]
questions = 2000
labs = 20
effect = { family = "uniform", low = 0.05, high = 2.0 }
[design]
size = { plan = "exact-power", power = 0.35, effect = "true", n = 11 }
[[lab]]
name = "a"
lines = 100
)",
                                             "t", {}));
    CHECK(std::fabs(simulated.z("power", Scope::conducted, 0.35)) < 4);
    CHECK(std::fabs(simulated.z("type1_error", Scope::conducted, 0.05)) < 4);
    // d of 20 degrees of freedom is biased by 1 / J (Hedges 1981), relative to any effect alike.
    const double j = std::exp(std::lgamma(10.0) - std::lgamma(9.5)) / std::sqrt(10.0);
    CHECK(std::fabs(simulated.z("effect_inflation_reports", Scope::conducted, 1 / j)) < 4);
}
