// The vocabulary of results: what a study claims, what a manuscript holds, what became of it.
#pragma once

#include <array>
#include <cstdint>
#include <string_view>

namespace lacuna {

/// What a study says.
enum class Claim : std::uint8_t {
    inconclusive,  // no significant result
    positive,      // significant in the predicted direction
    reversed,      // significant the other way
    equivalent     // an equivalence test excluded effects beyond the bound
};
inline constexpr std::array<std::string_view, 4> claim_names{"inconclusive", "positive", "reversed", "equivalent"};

/// What is true of a study's question. `null` holds questions that are not real and those whose
/// effect is negligible; the sign is that of the question's effect.
enum class Truth : std::uint8_t { null, real, real_negative };
inline constexpr std::array<std::string_view, 3> truth_names{"null", "real", "real_negative"};

/// Which claims count as discoveries: positive or reversed, or positive only.
enum class Findings : std::uint8_t { either, predicted };

/// A manuscript's class: all its studies find, in one direction; some do, or they disagree; none.
enum class ManuscriptClass : std::uint8_t { supportive, mixed, null };
inline constexpr std::array<std::string_view, 3> class_names{"supportive", "mixed", "null"};

/// How far a result got, under one regime.
enum class Status : std::uint8_t { unwritten, unpublished, published };
inline constexpr std::array<std::string_view, 3> status_names{"unwritten", "unpublished", "published"};

/// Which part of what was done is looked at. Each scope holds the next.
enum class Scope : std::uint8_t { conducted, written, published };
inline constexpr std::array<std::string_view, 3> scope_names{"conducted", "written", "published"};

/// True when `claim` is a discovery under `findings`.
constexpr bool is_finding(Claim claim, Findings findings) {
    return claim == Claim::positive || (claim == Claim::reversed && findings == Findings::either);
}

}  // namespace lacuna
