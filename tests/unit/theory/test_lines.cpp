// Lines of several studies against a slow twin that walks through every course of a line.
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/theory/line_ends.h"
#include "sim/theory/line_totals.h"

using namespace lacuna;

namespace {

LineRule rule(LineRule::Kind kind, std::uint32_t count, std::uint32_t failures = 1) {
    LineRule its;
    its.kind = kind;
    its.count = its.limit = count;
    its.failures = failures;
    return its;
}

/// Results of a study: claims at several levels, chances summing to 1.
std::vector<Cell> some_cells() {
    return {{Claim::positive, 2, 2, {0.15, 0.12, 0.12}},    {Claim::positive, 1, 1, {0.2, 0.1, 0.1}},
            {Claim::inconclusive, 0, 1, {0.1, 0.02, 0.02}}, {Claim::inconclusive, 0, 0, {0.4, -0.02, 0.06}},
            {Claim::reversed, 1, 0, {0.09, -0.05, 0.05}},   {Claim::reversed, 2, 0, {0.06, -0.05, 0.05}}};
}

Journal by_p(std::vector<double> steps, std::vector<double> chance, int sides) {
    Journal journal;
    journal.accept.kind = Acceptance::Kind::by_p;
    journal.accept.steps = std::move(steps);
    journal.accept.chance = std::move(chance);
    journal.accept.sides = sides;
    return journal;
}

/// Three journals, of which two are tried or all: by class, by two-sided p, by one-sided p and blind.
Rules some_rules(Unit unit, std::uint32_t attempts) {
    Rules rules;
    rules.writing = {unit, 0.9, 0.6, 0.35};
    Journal by_class;
    by_class.accept.supportive = 0.5;
    by_class.accept.mixed = 0.25;
    by_class.accept.null = 0.1;
    rules.journals = {by_class, by_p({0.01, 0.05}, {0.7, 0.3, 0.05}, 2), by_p({0.02, 0.2}, {0.8, 0.45, 0.15}, 1)};
    rules.journals[2].results_blind = 0.25;
    rules.journals[2].results_blind_chance = 0.6;
    rules.submission.attempts = attempts;
    return rules;
}

/// The chances of `some_rules` spelled out. Levels: 2 passes both cuts of a journal, 1 the larger one.
double spelled_published(std::uint32_t attempts, std::size_t its_class, std::size_t two, std::size_t one) {
    const double first[3] = {0.5, 0.25, 0.1}, second[3] = {0.05, 0.3, 0.7}, third[3] = {0.15, 0.45, 0.8};
    double rejected = 1.0 - first[its_class];
    if (attempts > 1) rejected *= 1.0 - second[two];
    if (attempts > 2) rejected *= 1.0 - (0.25 * 0.6 + 0.75 * third[one]);
    return 1.0 - rejected;
}

struct Walk {
    LineRule rule;
    Unit unit;
    Findings findings;
    std::uint32_t attempts;
    std::vector<Cell> cells;
    LineTotals totals{};

    bool found(const Cell& cell) const {
        return cell.claim == Claim::positive || (cell.claim == Claim::reversed && findings == Findings::either);
    }

    std::size_t class_of(const std::vector<Cell>& held) const {
        std::size_t positive = 0, reversed = 0;
        for (const Cell& cell : held) {
            positive += cell.claim == Claim::positive;
            reversed += cell.claim == Claim::reversed && findings == Findings::either;
        }
        if (positive + reversed == 0) return 2;
        return positive == held.size() || reversed == held.size() ? 0 : 1;
    }

    void leave(Scope scope, const Cell& cell, double chance) {
        Sums each = cell.sums;  // given the cell
        each.estimate /= cell.sums.studies;
        each.abs_estimate /= cell.sums.studies;
        each.studies = 1.0;
        totals.studies[std::size_t(scope)][std::size_t(cell.claim)].add(each, chance);
    }

    /// Sends a manuscript on its way; returns the chances that it is conducted, written and published.
    std::array<double, 3> submit(const std::vector<Cell>& held, std::size_t its_class, double chance) {
        const double written[3] = {0.9, 0.6, 0.35};
        std::size_t two = 0, one = 0;
        for (const Cell& cell : held) {
            two = std::max(two, cell.level_two);
            one = std::max(one, cell.level_one);
        }
        const double published = spelled_published(attempts, its_class, two, one);
        for (const Cell& cell : held) {
            leave(Scope::written, cell, chance * written[its_class]);
            leave(Scope::published, cell, chance * written[its_class] * published);
        }
        const std::array<double, 3> reaches{1.0, written[its_class], written[its_class] * published};
        for (std::size_t s = 0; s < 3; ++s) totals.manuscripts[s][its_class] += chance * reaches[s];
        return reaches;
    }

    void finish(const std::vector<Cell>& line, double chance) {
        for (const Cell& cell : line) leave(Scope::conducted, cell, chance);
        std::vector<Cell> held;
        std::array<double, 3> hidden{1.0, 1.0, 1.0};  // chance that no finding is in the scope
        for (const Cell& cell : line) {
            if (found(cell)) held.push_back(cell);
            if (unit != Unit::study) continue;
            const std::array<double, 3> reaches = submit({cell}, class_of({cell}), chance);
            for (std::size_t s = 0; s < 3 && found(cell); ++s) hidden[s] *= 1.0 - reaches[s];
        }
        if (unit != Unit::study) {
            const std::array<double, 3> reaches =
                submit(unit == Unit::line || held.empty() ? line : held, class_of(line), chance);
            for (std::size_t s = 0; s < 3 && !held.empty(); ++s) hidden[s] = 1.0 - reaches[s];
        }
        for (std::size_t s = 0; s < 3; ++s) totals.established[s] += chance * (1.0 - hidden[s]);
    }

    void go(std::vector<Cell> line = {}, double chance = 1.0) {
        std::size_t hits = 0;
        for (const Cell& cell : line) hits += found(cell);
        bool ended = false;
        if (rule.kind == LineRule::Kind::fixed) ended = line.size() == rule.count;
        if (rule.kind == LineRule::Kind::until_positive) ended = hits > 0 || line.size() == rule.limit;
        if (rule.kind == LineRule::Kind::until_failures) {
            ended = line.size() - hits == rule.failures || line.size() == rule.limit;
        }
        if (ended) return finish(line, chance);
        for (const Cell& cell : cells) {
            std::vector<Cell> longer = line;
            longer.push_back(cell);
            go(longer, chance * cell.sums.studies);
        }
    }
};

}  // namespace

TEST_CASE("Line totals agree with a walk through every course", "[theory]") {
    const std::vector<LineRule> line_rules{rule(LineRule::Kind::fixed, 1), rule(LineRule::Kind::fixed, 3),
                                           rule(LineRule::Kind::until_positive, 4),
                                           rule(LineRule::Kind::until_failures, 4, 2)};
    for (const LineRule& its : line_rules) {
        for (const Unit unit : {Unit::study, Unit::line, Unit::findings}) {
            for (const Findings findings : {Findings::either, Findings::predicted}) {
                for (const std::uint32_t attempts : {1u, 2u, 3u}) {
                    Walk walk{its, unit, findings, attempts, some_cells()};
                    walk.go();
                    const LineTotals got = line_totals(its, unit, findings,
                                                       PublicationChance(some_rules(unit, attempts)), some_cells());
                    for (std::size_t s = 0; s < 3; ++s) {
                        INFO("established in scope " << s);
                        CHECK(got.established[s] == Approx(walk.totals.established[s]).epsilon(1e-12));
                        for (std::size_t c = 0; c < 3; ++c) {
                            INFO("rule " << int(its.kind) << " unit " << int(unit) << " findings " << int(findings)
                                         << " attempts " << attempts << " scope " << s << " claim " << c);
                            CHECK(got.manuscripts[s][c] == Approx(walk.totals.manuscripts[s][c]).epsilon(1e-12));
                            CHECK(got.studies[s][c].studies ==
                                  Approx(walk.totals.studies[s][c].studies).epsilon(1e-12));
                            CHECK(got.studies[s][c].estimate ==
                                  Approx(walk.totals.studies[s][c].estimate).margin(1e-14));
                            CHECK(got.studies[s][c].abs_estimate ==
                                  Approx(walk.totals.studies[s][c].abs_estimate).epsilon(1e-12));
                        }
                    }
                }
            }
        }
    }
}

TEST_CASE("How lines end: binomial, geometric, negative binomial", "[theory]") {
    const double p = 0.8;
    // Four of four at power .8: 41 %; two of three: 38.4 % (checks.md).
    CHECK(line_ends(rule(LineRule::Kind::fixed, 4), p, 1.0 - p).back().weight == Approx(0.4096).epsilon(1e-14));
    CHECK(line_ends(rule(LineRule::Kind::fixed, 3), p, 1.0 - p).at(2).weight == Approx(0.384).epsilon(1e-14));
    // Expected length until the first finding, at most k: (1 - q^k) / p.
    double length = 0.0, total = 0.0;
    for (const LineEnd& end : line_ends(rule(LineRule::Kind::until_positive, 6), 0.3, 0.7)) {
        length += end.weight * end.studies;
        total += end.weight;
    }
    CHECK(total == Approx(1.0).epsilon(1e-14));
    CHECK(length == Approx((1.0 - std::pow(0.7, 6)) / 0.3).epsilon(1e-14));
    // Third failure at study 5: C(4, 2) p^2 q^3.
    bool seen = false;
    for (const LineEnd& end : line_ends(rule(LineRule::Kind::until_failures, 9, 3), 0.6, 0.4)) {
        if (end.studies != 5) continue;
        seen = true;
        CHECK(end.findings == 2);
        CHECK(end.weight == Approx(6.0 * 0.36 * 0.064).epsilon(1e-14));
    }
    CHECK(seen);
}

TEST_CASE("Lines that never or always find", "[theory]") {
    CHECK(line_ends(rule(LineRule::Kind::fixed, 3), 0.0, 1.0).size() == 1);
    CHECK(line_ends(rule(LineRule::Kind::until_positive, 5), 0.0, 1.0).at(0).studies == 5);
    CHECK(line_ends(rule(LineRule::Kind::until_failures, 5, 2), 1.0, 0.0).at(0).findings == 5);
    CHECK(line_ends(rule(LineRule::Kind::until_positive, 5), 1.0, 0.0).at(0).studies == 1);
}
