// The labs of one literature: who they are, how many lines each runs, and who works on which line.
#pragma once

#include <cstdint>
#include <optional>
#include <vector>

#include "sim/literature/prepared.h"
#include "sim/random/stream.h"
#include "sim/variate/permutation.h"

namespace lacuna {

/// Lines are numbered by question: line l works on question floor(l * questions / lines), so lines
/// spread evenly over questions. Which lab runs a line is a random permutation of all labs' lines.
struct Roster {
    std::uint64_t lines = 0;           // of all labs
    std::vector<std::uint8_t> kind;    // per lab; empty where there is one kind
    std::vector<std::uint64_t> first;  // per lab, and the end: its places before the permutation
    std::uint64_t lines_each = 0;      // where every lab has as many, `first` is empty
    std::optional<Permutation> order;  // of lines over places; none where nobody asks who

    std::uint64_t lab_of_place(std::uint64_t place) const;
};

/// Draws the labs of `literature`. Throws InputError when they run more lines than entity_limit.
Roster draw_roster(const PreparedScience& science, StreamKey key, std::uint32_t literature);

}  // namespace lacuna
