// [design], and the `size` of a design or a kind of labs
#pragma once

#include <cmath>

#include "sim/config/keys_distribution.h"
#include "sim/config/size_rules.h"
#include "sim/config/support.h"

namespace lacuna {

template <class V>
void check_sizes(V& v, const SizePlan& size, const Design& design) {
    const auto drawn = [&] { return size.kind == SizePlan::Kind::distribution; };
    v.check(
        {"min", "plan", "family", "value", "mean", "sd", "median", "sdlog", "low", "high", "values", "weights"},
        [&] { return !drawn() || lowest_draw(size.distribution) >= smallest_n(design); },
        fmt::format("must keep sizes at {} or more, the least this test can use", smallest_n(design)),
        fmt::format("add min = {}", smallest_n(design)));
    v.check(
        {"max", "min", "plan", "family", "value", "mean", "sd", "median", "sdlog", "shape", "concentration", "low",
         "high", "values", "weights", "clamp"},
        [&] { return !drawn() || practical_highest_draw(size.distribution) <= largest_n; },
        fmt::format("must keep sizes at {} or less", largest_n), fmt::format("add max = {}", largest_n));
    v.check(
        {"max", "min", "plan", "family", "value", "mean", "sd", "median", "sdlog", "shape", "concentration", "low",
         "high", "values", "weights", "clamp"},
        [&] { return !drawn() || is_tabulated(size); }, "must not spread over more than 2097152 sizes",
        "lower max or raise min");
}

/// The effect that a size is planned for.
template <class V>
void describe(V& v, PlanningEffect& effect, const Design& design) {
    v.number_or_word("effect", effect.value, effect.is_true, "true",
                     About::required_key("the effect that is planned for; \"true\": that of the question, and for "
                                         "questions that are not real that of a real one"));
    v.number("optimism", effect.optimism, positive_range, "factor on true effects: above 1 the planner hopes");
    v.check({"optimism", "effect"}, [&] { return effect.is_true || effect.optimism == 1.0; },
            "needs effect = \"true\"", "multiply the number instead");
    v.check({"effect"}, [&] { return effect.is_true || effect.value != 0.0; }, "must not be 0",
            "no n gives power for no effect");
    v.check({"effect"}, [&] { return effect.is_true || design.sides == 2 || effect.value >= 0.0; },
            "must be above 0 for a one-sided test", "");
    v.check({"effect"}, [&] { return effect.is_true || can_be_effect(design.test, effect.value); },
            effect_limits(design.test), "");
}

/// `design` gives the test, alpha and sides that a size is planned for.
template <class V>
void describe(V& v, SizePlan& size, const Design& design) {
    using Kind = SizePlan::Kind;
    const std::uint32_t least = smallest_n(design);
    v.choice("plan", size.kind, About::required_key("how sample sizes come about"));
    v.variant("plan", size.kind, Kind::fixed, [&] {
        v.integer("n", size.n, least, largest_n, About::required_key("observations (per group)"));
    });
    v.variant("plan", size.kind, Kind::distribution, [&] {
        describe_among_others(v, size.distribution);
        v.choice("round", size.round_down, "how a drawn size becomes a whole number");
    });
    const auto describe_power = [&](const char* meaning) {
        v.number("power", size.power, open_share_range, About::required_key(meaning));
        describe(v, size.effect, design);
        v.check(
            {"power"}, [&] { return size.power > design.alpha * (1.0 + 1e-9); },
            fmt::format("must be above alpha, which is {}", design.alpha), "any n has more power than alpha");
    };
    v.variant("plan", size.kind, Kind::power, [&] {
        describe_power("the power to reach");
        v.integer("most", size.most, least, largest_tabulated_n, "no study planned for a true effect is larger");
        v.check(
            {"effect", "power"},
            [&] {
                return size.effect.is_true || size.power <= design.alpha ||
                       rough_planned_n(size, design) <= largest_n;
            },
            fmt::format("needs more than {} observations", largest_n), "plan for a larger effect or less power");
    });
    v.check({"effect", "plan"},
            [&] { return !(size.kind == Kind::power && size.effect.is_true && design.welch) || design.allocation == 1.0; },
            "must be a number for Welch's test of unequal groups", "plan for a number, or set allocation = 1");
    v.check({"most", "effect", "plan"},
            [&] {
                const bool slow = design.test == Test::two_proportions || design.allocation != std::floor(design.allocation);
                return !(size.kind == Kind::power && size.effect.is_true && slow) || size.most <= 20000;
            },
            "must be 20000 or less for two proportions, and where allocation is not a whole number", "");
    v.check({"most"}, [&] { return size.kind != Kind::power || size.effect.is_true || size.most == SizePlan{}.most; },
            "needs effect = \"true\"", "");
    v.variant("plan", size.kind, Kind::exact_power, [&] {
        describe_power("the power that every study of the planning effect has");
        v.integer("n", size.n, least, largest_n, About::required_key("observations (per group)"));
        v.check({"plan"}, [&] { return has_free_noise(design); },
                "\"exact-power\" needs a design of one or two means with Student's or the z test", "");
    });
    v.check({"plan"}, [&] { return design.looks.count == 1 || !size.for_each_question(); },
            "must be neither for true effects nor for an exact power where there are interim looks", "");
    check_sizes(v, size, design);
}

template <class V>
void describe(V& v, Equivalence& equivalence, const Design& design) {
    v.number("bound", equivalence.bound, nonnegative_range,
             "effects within this bound are negligible; 0: no equivalence test");
    v.number("alpha", equivalence.alpha, Range{0.0, 0.5, true, true}, "significance level of each one-sided test");
    v.check({"bound"}, [&] { return equivalence.bound == 0.0 || can_be_effect(design.test, equivalence.bound); },
            effect_limits(design.test), "");
}

template <class V>
void describe(V& v, Looks& looks, const Design& design) {
    v.integer("count", looks.count, 1, most_looks, "looks at the data, the last included; at equal steps of n");
    v.choice("boundary", looks.boundary, "what a look must pass, so that all together keep alpha");
    v.bound("futility", looks.futility,
            About::derived("an interim look below this z (in absolute value if two-sided) ends the study",
                           "no study stops for futility"));
    v.check({"count"}, [&] { return looks.count == 1 || has_free_noise(design); },
            "needs a design of one or two means with Student's or the z test", "");
    v.check({"count"}, [&] { return looks.count == 1 || design.alpha >= 1e-9; },
            "needs alpha of 1e-9 or more", "");
    v.check({"count"}, [&] { return looks.count == 1 || !design.equivalence.tested(); },
            "must be 1 where equivalence is tested", "");
}

template <class V>
void describe(V& v, Design& design) {
    const auto is = [&](Test test) { return design.test == test; };
    v.choice("test", design.test, "the design and test of every study");
    v.number("alpha", design.alpha, open_share_range, "significance level");
    v.integer("sides", design.sides, 1, 2, "1: significant only in the predicted direction");
    v.choice("findings", design.findings, "which significant results count as findings");
    v.choice("estimate", design.estimate, "the effect that studies of means report: Cohen's d or Hedges' g");
    v.flag("welch", design.welch, "two-means: Welch's test instead of Student's");
    v.number("allocation", design.allocation, Range{1e-3, 1e3}, "designs of two groups: size of the second over the first");
    v.integer("groups", design.groups, 2, most_groups, "several-means: how many");
    v.number("base_rate", design.base_rate, open_share_range, "two-proportions: rate in the second group, the control");
    v.check({"sides", "test"}, [&] { return !is(Test::several_means) || design.sides == 2; },
            "must be 2 for test = \"several-means\", whose F test has no direction", "");
    v.check({"estimate", "test"}, [&] { return design.estimate == EffectEstimate::d || has_correction(design.test); },
            fmt::format("must be \"d\" for test = \"{}\"", word_for(design.test)), "");
    v.check({"welch", "test"}, [&] { return !design.welch || is(Test::two_means); }, "needs test = \"two-means\"", "");
    v.check({"allocation", "test"},
            [&] { return design.allocation == 1.0 || is(Test::two_means) || is(Test::two_proportions); },
            "needs a design of two groups", "");
    v.table("equivalence", About::derived("equivalence test after a result that is not significant", "none"),
            [&](auto& inner) { describe(inner, design.equivalence, design); });
    v.table("looks", About::derived("interim looks", "one look, at the end"),
            [&](auto& inner) { describe(inner, design.looks, design); });
    v.table("size", About::derived("sample size of a study", "{ plan = \"fixed\", n = 20 }"), [&](auto& inner) {
        inner.preset(design.size, SizePlan{});
        describe(inner, design.size, design);
    });
}

}  // namespace lacuna
