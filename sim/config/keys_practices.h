// [lab.practices]
#pragma once

#include <cmath>

#include <fmt/format.h>

#include "sim/config/rule.h"
#include "sim/config/size_rules.h"

namespace lacuna {

template <class V>
void describe(V& v, OptionalStopping& stopping, const Design& design) {
    v.number("chance", stopping.chance, share_range, About::required_key("chance that a study is run so"));
    v.flag("relative", stopping.relative, "whether start, batch and limit are multiples of the planned n");
    v.number("start", stopping.start, positive_range, About::required_key("participants (per group) at the first test"));
    v.number("batch", stopping.batch, positive_range, About::required_key("participants (per group) added before each further test"));
    v.number("limit", stopping.limit, positive_range, About::required_key("participants (per group) at the last test"));
    const auto whole = [](double x) { return x == std::floor(x); };
    v.check({"start", "batch", "limit"},
            [&] { return stopping.relative || (whole(stopping.start) && whole(stopping.batch) && whole(stopping.limit)); },
            "must be whole numbers unless relative = true", "");
    v.check({"start"}, [&] { return stopping.relative || stopping.start >= smallest_n(design); },
            fmt::format("must be {} or more, the least this test can use", smallest_n(design)), "");
    v.check({"limit", "start"}, [&] { return stopping.start <= stopping.limit; }, "must be start or more", "");
    v.check({"limit"}, [&] { return stopping.limit <= (stopping.relative ? 1000.0 : largest_n); },
            fmt::format("must be {} or less", stopping.relative ? 1000 : largest_n), "");
    v.check({"batch", "start", "limit"}, [&] { return (stopping.limit - stopping.start) / stopping.batch <= most_unplanned_looks; },
            fmt::format("must not be so small that there are more than {} looks", most_unplanned_looks + 1), "raise batch");
}

template <class V>
void describe(V& v, Practices& practices, const Design& design) {
    v.optional_table("optional_stopping", practices.optional_stopping.used,
                     About::derived("tests after every batch, and a stop when significant", "not used"),
                     [&](auto& inner) { describe(inner, practices.optional_stopping, design); });
    v.check({"optional_stopping"},
            [&] { return !practices.optional_stopping.used || (has_free_noise(design) && design.looks.count == 1 && !design.equivalence.tested()); },
            "needs a design of one or two means with Student's or the z test, without planned looks and equivalence tests", "");
}

}  // namespace lacuna
