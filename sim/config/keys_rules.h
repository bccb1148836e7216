// [writing], [[journal]] and [submission]
#pragma once

#include <fmt/format.h>

#include <algorithm>
#include <functional>
#include <set>
#include <vector>

#include "sim/config/choices.h"
#include "sim/config/rule.h"
#include "sim/publication/acceptance.h"

namespace lacuna {

inline constexpr std::size_t most_journals = 256;
inline constexpr std::size_t most_steps = 100;
inline constexpr std::int64_t most_attempts = 100;

/// A chance for each class of manuscript.
template <class V>
void describe_classes(V& v, double& supportive, double& mixed, double& null) {
    v.number("supportive", supportive, share_range, About::required_key("all studies find, in one direction"));
    v.number("mixed", mixed, share_range, About::required_key("some find, or they disagree"));
    v.number("null", null, share_range, About::required_key("none finds"));
}

template <class V>
void describe(V& v, Writing& w) {
    v.choice("unit", w.unit, "what a manuscript reports");
    v.number_or_table(
        "chance", share_range, "chance that a manuscript is written up, for all or by class",
        [&](double x) { w.supportive = w.mixed = w.null = x; },
        [&](auto& inner) { describe_classes(inner, w.supportive, w.mixed, w.null); });
}

template <class V>
void describe(V& v, Acceptance& accept) {
    using Kind = Acceptance::Kind;
    v.choice("by", accept.kind, About::required_key("what the journal decides by"));
    v.variant("by", accept.kind, Kind::by_class,
              [&] { describe_classes(v, accept.supportive, accept.mixed, accept.null); });
    v.variant("by", accept.kind, Kind::by_p, [&] {
        const auto ascending = [&] {
            return std::adjacent_find(accept.steps.begin(), accept.steps.end(), std::greater_equal<>()) ==
                   accept.steps.end();
        };
        v.numbers("steps", accept.steps, open_share_range,
                  About::required_key("p values at which the chance changes, ascending"));
        v.numbers("chance", accept.chance, share_range,
                  About::required_key("acceptance chance below each step, and at or above the last"));
        v.integer("sides", accept.sides, 1, 2, "1: the p of the one-sided test in the predicted direction");
        v.check({"steps"}, ascending, "must ascend", "");
        v.check(
            {"steps"}, [&] { return accept.steps.size() <= most_steps; },
            fmt::format("must hold at most {} numbers", most_steps), "");
        v.check(
            {"chance", "steps"}, [&] { return accept.chance.size() == accept.steps.size() + 1; },
            fmt::format("must hold one number more than steps, so {}, holds {}", accept.steps.size() + 1,
                        accept.chance.size()),
            "");
    });
}

template <class V>
void describe(V& v, Journal& journal) {
    v.name("name", journal.name, About::required_key("name of the journal"));
    v.table("accept",
            About::required_key("when the journal accepts: { by = \"class\", ... } or { by = \"p\", ... }"),
            [&](auto& inner) {
                inner.preset(journal.accept, Acceptance{});
                describe(inner, journal.accept);
            });
    v.number("results_blind", journal.results_blind, share_range,
             "share of submissions that are judged before the results are seen");
    if (v.sound({"accept"})) v.preset(journal.results_blind_chance, highest_chance(journal.accept));
    v.number("results_blind_chance", journal.results_blind_chance, share_range,
             About::derived("acceptance chance of those", "the highest of accept"));
}

/// Journals draw from streams that their names index; two names with one index would share their draws.
inline bool indices_differ(const std::vector<Journal>& journals) {
    std::set<std::uint32_t> indices;
    for (const Journal& journal : journals) indices.insert(journal_index(journal.name));
    return indices.size() == journals.size();
}

template <class V>
void describe(V& v, std::vector<Journal>& journals) {
    v.list("journal", journals, About::derived("the journals", "none: all that is written is published"),
           [](auto& inner, Journal& journal) { describe(inner, journal); });
    v.check(
        {"journal"}, [&] { return journals.size() <= most_journals; },
        fmt::format("must hold at most {} journals", most_journals), "");
    v.check(
        {"journal"}, [&] { return indices_differ(journals); }, "two names stand for the same random stream",
        "rename one of the journals");
}

template <class V>
void describe(V& v, Submission& submission) {
    v.integer("attempts", submission.attempts, 1, most_attempts, "journals that a manuscript is sent to at most");
}

}  // namespace lacuna
