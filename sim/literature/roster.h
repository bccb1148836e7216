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
/// spread evenly over questions. Which lab runs a line is a random permutation of all labs' lines: line
/// l has place order(l), and places belong to the labs of the first kind, then of the second, and so on.
/// Where labs are not stored only the kinds' totals are kept, so that memory does not grow with labs.
struct Roster {
    std::uint64_t lines = 0;                // of all labs
    std::vector<std::uint64_t> kind_first;  // per kind, and the end: its places
    std::optional<Permutation> order;       // of lines over places; none where nobody asks who

    // Only where labs are stored.
    std::vector<std::uint8_t> kind;    // per lab
    std::vector<std::uint64_t> runs;   // per lab: its lines
    std::vector<std::uint32_t> lab;    // labs, those of the first kind first
    std::vector<std::uint64_t> first;  // place of the first line of lab[i], and the end

    std::uint8_t kind_of_place(std::uint64_t place) const;
    std::uint32_t lab_of_place(std::uint64_t place) const;  // where labs are stored
};

/// Draws the labs of `literature`. Throws InputError when they run more lines than entity_limit.
Roster draw_roster(const PreparedScience& science, StreamKey key, std::uint32_t literature);

}  // namespace lacuna
