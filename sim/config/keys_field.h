// [field] and [run]
#pragma once

#include <cstdint>

#include "sim/config/keys_distribution.h"
#include "sim/config/support.h"

namespace lacuna {

inline constexpr std::int64_t most_questions = (std::int64_t{1} << 40) - 1;  // entities have 40 bits in the streams
inline constexpr std::int64_t most_labs = (std::int64_t{1} << 31) - 1;

/// Far beyond any effect, so that no noncentrality overflows.
inline constexpr double largest_effect = 1e6;
inline constexpr Range size_of_effect{0.0, largest_effect};

/// A distribution of effects.
template <class V>
void describe_effect(V& v, const char* key, Distribution& effect, const About& about) {
    describe_distribution(v, key, effect, about);
    v.check(
        {key},
        [&] {
            return practical_lowest_draw(effect) >= -largest_effect &&
                   practical_highest_draw(effect) <= largest_effect;
        },
        fmt::format("must stay between {0:.0f} and {1:.0f}", -largest_effect, largest_effect), "");
}

template <class V>
void describe(V& v, Run& run) {
    v.integer("seed", run.seed, 0, INT64_MAX, "equal seeds give equal runs");
    v.integer("literatures", run.literatures, 1, UINT32_MAX, "how many independent literatures are simulated");
}

template <class V>
void describe(V& v, Field& field) {
    v.integer("questions", field.questions, 1, most_questions, "questions the field can ask");
    v.integer("labs", field.labs, 1, most_labs, "labs in the field");
    v.number("true_rate", field.true_rate, share_range, "chance that a question is real");
    describe_effect(v, "effect", field.effect, "effect of a real question, on the design's scale");
    describe_effect(v, "null_effect", field.null_effect, "effect of a question that is not real");
    v.number("heterogeneity", field.heterogeneity, size_of_effect,
             "standard deviation of a study's true effect around its question's");
    v.number("negligible", field.negligible, size_of_effect, "effects up to this size count as null");
}

}  // namespace lacuna
