// [design], and the `size` of a design or a kind of labs
#pragma once

#include "sim/config/keys_distribution.h"
#include "sim/config/size_rules.h"
#include "sim/config/support.h"

namespace lacuna {

template <class V>
void check_sizes(V& v, const SizePlan& size, Test test) {
    const auto drawn = [&] { return size.kind == SizePlan::Kind::distribution; };
    v.check(
        {"min", "plan", "family", "value", "mean", "sd", "median", "sdlog", "low", "high", "values", "weights"},
        [&] { return !drawn() || lowest_draw(size.distribution) >= smallest_n(test); },
        fmt::format("must keep sizes at {} or more, the least this test can use", smallest_n(test)),
        fmt::format("add min = {}", smallest_n(test)));
    v.check(
        {"max", "min", "plan", "family", "value", "mean", "sd", "median", "sdlog", "shape", "concentration", "low",
         "high", "values", "weights", "clamp"},
        [&] { return !drawn() || practical_highest_draw(size.distribution) <= largest_n; },
        fmt::format("must keep sizes at {} or less", largest_n), fmt::format("add max = {}", largest_n));
    v.check(
        {"max", "min", "plan", "family", "value", "mean", "sd", "median", "sdlog", "shape", "concentration", "low",
         "high", "values", "weights", "clamp"},
        [&] { return !drawn() || is_tabulated(size); }, "must not spread over more than 4194304 sizes",
        "lower max or raise min");
}

/// `design` gives the test, alpha and sides that a size is planned for.
template <class V>
void describe(V& v, SizePlan& size, const Design& design) {
    using Kind = SizePlan::Kind;
    v.choice("plan", size.kind, About::required_key("how sample sizes come about"));
    v.variant("plan", size.kind, Kind::fixed, [&] {
        v.integer("n", size.n, smallest_n(design.test), largest_n,
                  About::required_key("observations (per group in two-means)"));
    });
    v.variant("plan", size.kind, Kind::distribution, [&] {
        describe_among_others(v, size.distribution);
        v.choice("round", size.round_down, "how a drawn size becomes a whole number");
    });
    v.variant("plan", size.kind, Kind::power, [&] {
        v.number("power", size.power, open_share_range, About::required_key("the power to reach"));
        v.number("effect", size.effect, any_range, About::required_key("the effect that is planned for"));
        v.check(
            {"power"}, [&] { return size.power > design.alpha; },
            fmt::format("must be above alpha, which is {}", design.alpha), "any n has more power than alpha");
        v.check(
            {"effect"}, [&] { return size.effect != 0.0; }, "must not be 0", "no n gives power for no effect");
        v.check(
            {"effect"}, [&] { return design.sides == 2 || size.effect >= 0.0; },
            "must be above 0 for a one-sided test", "");
        v.check(
            {"effect", "power"},
            [&] { return size.power <= design.alpha || rough_planned_n(size, design) <= largest_n; },
            fmt::format("needs more than {} observations", largest_n), "plan for a larger effect or less power");
    });
    check_sizes(v, size, design.test);
}

template <class V>
void describe(V& v, Design& design) {
    v.choice("test", design.test, "the design and test of every study");
    v.number("alpha", design.alpha, open_share_range, "significance level");
    v.integer("sides", design.sides, 1, 2, "1: significant only in the predicted direction");
    v.choice("findings", design.findings, "which significant results count as findings");
    v.choice("estimate", design.estimate, "the effect that two-means studies report");
    v.check(
        {"estimate", "test"},
        [&] { return design.test == Test::two_means || design.estimate == EffectEstimate::d; },
        "must be \"d\" for test = \"known-variance\"", "");
    v.table("size", About::derived("sample size of a study", "{ plan = \"fixed\", n = 20 }"), [&](auto& inner) {
        inner.preset(design.size, SizePlan{});
        describe(inner, design.size, design);
    });
}

}  // namespace lacuna
