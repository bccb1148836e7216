// The known word that a mistyped one was most likely meant to be.
#pragma once

#include <string>
#include <string_view>
#include <vector>

namespace lacuna {

/// Edits between two words: insertions, deletions, substitutions, and swaps of neighbours (optimal
/// string alignment; Damerau 1964).
std::size_t edits(std::string_view a, std::string_view b);

/// The word of `known` with the fewest edits from `word`, or "" when none is within a third of its
/// length (at least 1, at most 4).
std::string nearest(std::string_view word, const std::vector<std::string>& known);

/// "did you mean X?" or "known: A, B, C".
std::string suggestion(std::string_view word, const std::vector<std::string>& known);

}  // namespace lacuna
