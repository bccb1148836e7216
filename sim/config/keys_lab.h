// [[lab]]
#pragma once

#include <cmath>
#include <vector>

#include "sim/config/keys_design.h"
#include "sim/config/keys_practices.h"

namespace lacuna {

inline constexpr std::int64_t longest_line = 4096;  // study numbers have 12 bits in the streams
inline constexpr double most_lines = 4e9;
inline constexpr std::size_t most_kinds = 256;  // kinds are stored as bytes

template <class V>
void describe(V& v, LineRule& rule) {
    using Kind = LineRule::Kind;
    v.choice("rule", rule.kind, About::required_key("when a line of studies ends"));
    v.variant("rule", rule.kind, Kind::fixed,
              [&] { v.integer("count", rule.count, 1, longest_line, About::required_key("studies in a line")); });
    v.variant("rule", rule.kind, Kind::until_positive, [&] {
        v.integer("limit", rule.limit, 1, longest_line, About::required_key("most studies in a line"));
    });
    v.variant("rule", rule.kind, Kind::until_failures, [&] {
        v.integer("failures", rule.failures, 1, longest_line,
                  About::required_key("studies without a finding after which a line ends"));
        v.integer("limit", rule.limit, 1, longest_line, About::required_key("most studies in a line"));
        v.check(
            {"failures", "limit"}, [&] { return rule.failures <= rule.limit; }, "must be limit or less",
            "a line that ends at its limit never sees them");
    });
}

template <class V>
void describe(V& v, LabKind& lab, const Design& design) {
    v.name("name", lab.name, About::required_key("name of the kind"));
    v.number("share", lab.share, share_range, "chance that a lab is of this kind; shares sum to 1");
    describe_distribution(v, "lines", lab.lines, "lines of studies that a lab runs, rounded to the nearest number");
    v.check(
        {"lines"}, [&] { return lowest_draw(lab.lines) >= 0.0; }, "must be 0 or more", "add min = 0");
    v.check(
        {"lines"}, [&] { return practical_highest_draw(lab.lines) <= most_lines; },
        fmt::format("must be {:.0f} or less", most_lines), "");
    v.table("studies", About::derived("how many studies a line holds", "{ rule = \"fixed\", count = 1 }"),
            [&](auto& inner) {
                inner.preset(lab.studies, LineRule{});
                describe(inner, lab.studies);
            });
    v.preset(lab.size, design.size);
    v.table("size", About::derived("sample size of this kind's studies", "that of [design]"), [&](auto& inner) {
        inner.preset(lab.size, SizePlan{});
        describe(inner, lab.size, design);
    });
    v.table("practices", About::derived("what bends this kind's analyses", "nothing"),
            [&](auto& inner) { describe(inner, lab.practices, design); });
    v.check({"practices", "size"}, [&] { return !lab.practices.optional_stopping.used || lab.size.kind != SizePlan::Kind::exact_power; },
            "must not hold optional_stopping where sizes are planned for an exact power", "");
}

template <class V>
void describe(V& v, std::vector<LabKind>& labs, const Design& design) {
    LabKind only;
    only.size = design.size;
    v.preset(labs, std::vector<LabKind>{only});
    v.list("lab", labs, About::derived("the kinds of labs", "one kind, one line of one study each"),
           [&](auto& inner, LabKind& lab) { describe(inner, lab, design); });
    v.check(
        {"lab"}, [&] { return !labs.empty() && labs.size() <= most_kinds; },
        fmt::format("must hold 1 to {} kinds", most_kinds), "");
    double sum = 0.0;
    for (const LabKind& lab : labs) sum += lab.share;
    v.check(
        {"lab"}, [&] { return labs.empty() || std::abs(sum - 1.0) <= 1e-9; },
        fmt::format("shares must sum to 1, sum to {:.12g}", sum), "");
}

}  // namespace lacuna
