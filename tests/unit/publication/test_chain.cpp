// The chain from manuscripts to the record, on blocks made by hand.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/publication/chain.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;

namespace {

/// `count` lines that all hold the same studies, given by their claims and levels of two-sided p.
Conducted equal_lines(std::size_t count, const std::vector<Claim>& claims,
                      const std::vector<std::uint8_t>& levels) {
    Conducted block;
    block.literature = 3;
    block.lines.first = 40;
    for (std::size_t l = 0; l < count; ++l) {
        block.lines.question.push_back(static_cast<std::uint32_t>(l));
        block.lines.studies.push_back(static_cast<std::uint16_t>(claims.size()));
        const auto holds = [&](Claim c) {
            return static_cast<std::uint16_t>(std::count(claims.begin(), claims.end(), c));
        };
        block.lines.positive.push_back(holds(Claim::positive));
        block.lines.reversed.push_back(holds(Claim::reversed));
    }
    for (std::size_t s = 0; s < claims.size(); ++s) {
        block.studies.round.push_back(block.studies.line.size());
        for (std::size_t l = 0; l < count; ++l) {
            block.studies.line.push_back(static_cast<std::uint32_t>(l));
            block.studies.claim.push_back(static_cast<std::uint8_t>(claims[s]));
            if (!levels.empty()) block.studies.level_two.push_back(levels[s]);
        }
    }
    block.studies.round.push_back(block.studies.line.size());
    return block;
}

Journal coin(const std::string& name, double chance) {
    Journal journal;
    journal.name = name;
    journal.accept.supportive = journal.accept.mixed = journal.accept.null = chance;
    return journal;
}

/// A journal that accepts when p is below .05 but not below .01.
Journal only_between() {
    Journal journal;
    journal.accept.kind = Acceptance::Kind::by_p;
    journal.accept.steps = {0.01, 0.05};
    journal.accept.chance = {0.0, 1.0, 0.0};
    return journal;
}

Outcome published(const std::vector<Journal>& journals, const Conducted& block, Unit unit = Unit::study,
                  Findings findings = Findings::either) {
    Rules rules;
    rules.writing.unit = unit;
    rules.journals = journals;
    rules.submission.attempts = static_cast<std::uint32_t>(journals.size());
    ChainScratch scratch;
    Outcome outcome;
    publish({21}, prepare(rules, findings, collect_cuts({&rules})), block, scratch, outcome);
    return outcome;
}

double share(const std::vector<std::uint8_t>& values, std::uint8_t value) {
    return static_cast<double>(std::count(values.begin(), values.end(), value)) /
           static_cast<double>(values.size());
}

constexpr std::size_t many = 200000;

bool has_chance(double seen, double p) {
    return std::fabs(oracle::z_score(seen, p, oracle::share_error(p, static_cast<double>(many)))) <
           oracle::bound_in_standard_errors;
}

}  // namespace

TEST_CASE("Journals decide independently: p, q p, q q p of the manuscripts", "[publication]") {
    const Conducted block = equal_lines(many, {Claim::positive}, {});
    const Outcome outcome = published({coin("a", 0.4), coin("b", 0.4), coin("c", 0.4)}, block);
    CHECK(has_chance(share(outcome.journal, 1), 0.4));
    CHECK(has_chance(share(outcome.journal, 2), 0.6 * 0.4));
    CHECK(has_chance(share(outcome.journal, 3), 0.36 * 0.4));
    CHECK(has_chance(share(outcome.manuscript_status, std::uint8_t(Status::unpublished)), 0.216));
}

TEST_CASE("A journal's decisions are its name's, whatever its place in the chain", "[publication]") {
    const Conducted block = equal_lines(5000, {Claim::inconclusive}, {});
    const Journal a = coin("a", 0.4), b = coin("b", 0.7);
    const Outcome only_a = published({a}, block), only_b = published({b}, block);
    const Outcome ab = published({a, b}, block), ba = published({b, a}, block);
    for (std::size_t m = 0; m < only_a.journal.size(); ++m) {
        const bool by_a = only_a.journal[m] == 1, by_b = only_b.journal[m] == 1;
        REQUIRE(ab.journal[m] == (by_a ? 1 : by_b ? 2 : 0));
        REQUIRE(ba.journal[m] == (by_b ? 1 : by_a ? 2 : 0));
    }
}

TEST_CASE("Whether a submission is judged blind tells nothing about its acceptance", "[publication]") {
    const Conducted block = equal_lines(many, {Claim::inconclusive}, {});
    // Blind share, chance when blind, chance when seen: total probability.
    const double cases[][3] = {{0.5, 1.0, 0.5}, {0.5, 0.2, 0.6}, {0.3, 0.6, 0.0}, {0.3, 0.3, 0.3}};
    for (const auto& c : cases) {
        INFO("blind " << c[0] << ", then " << c[1] << ", else " << c[2]);
        Journal journal = coin("j", c[2]);
        journal.results_blind = c[0];
        journal.results_blind_chance = c[1];
        const Outcome outcome = published({journal}, block);
        CHECK(has_chance(share(outcome.journal, 1), c[0] * c[1] + (1 - c[0]) * c[2]));
    }
}

TEST_CASE("The best p is over what a manuscript reports", "[publication]") {
    // Levels: 1 for p in [.01, .05), 2 below .01. A reversed result is no finding when only the predicted
    // direction counts, however small its two-sided p.
    const Conducted block = equal_lines(7, {Claim::positive, Claim::reversed}, {1, 2});
    const auto status = [&](const Conducted& its, Unit unit, Findings findings) {
        return published({only_between()}, its, unit, findings).manuscript_status;
    };
    constexpr auto yes = std::uint8_t(Status::published);
    constexpr auto no = std::uint8_t(Status::unpublished);
    CHECK(status(block, Unit::findings, Findings::predicted) == std::vector<std::uint8_t>(7, yes));
    CHECK(status(block, Unit::findings, Findings::either) == std::vector<std::uint8_t>(7, no));
    CHECK(status(block, Unit::line, Findings::predicted) == std::vector<std::uint8_t>(7, no));
    // A line without findings reports all it has.
    const Conducted null = equal_lines(7, {Claim::inconclusive, Claim::reversed}, {0, 1});
    CHECK(status(null, Unit::findings, Findings::predicted) == std::vector<std::uint8_t>(7, yes));
    // What is not reported is not published either.
    const Outcome outcome = published({only_between()}, block, Unit::findings, Findings::predicted);
    for (std::size_t s = 0; s < 7; ++s) {
        CHECK(outcome.status[s] == yes);
        CHECK(outcome.status[7 + s] == std::uint8_t(Status::unwritten));
    }
}
