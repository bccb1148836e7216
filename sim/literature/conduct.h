// From questions to studies: one block of a literature's conducted science.
#pragma once

#include <cstdint>
#include <vector>

#include "sim/design/sampling.h"
#include "sim/literature/prepared.h"
#include "sim/literature/bend.h"
#include "sim/literature/roster.h"
#include "sim/model/columns.h"

namespace lacuna {

/// Questions first .. last - 1 of a literature; of their lines the part `part` of `parts` equal ones.
struct BlockRange {
    std::uint64_t first, last;
    std::uint64_t part = 0, parts = 1;
};

/// Scratch columns, reused from block to block.
struct ConductScratch {
    SamplingScratch sampling;
    std::vector<double> drawn, deviation;
    std::vector<std::uint16_t> words;
    std::vector<std::uint32_t> chosen, active, still;
    std::vector<std::uint64_t> places;
    std::vector<std::uint8_t> kinds;
    BentStudies bent;
};

/// Fills `block` with the questions of `range`, its part of their lines, and their studies. A pure
/// function of its arguments (scratch apart).
void conduct(const PreparedScience& science, StreamKey key, const Roster& roster, std::uint32_t literature,
             BlockRange range, ConductScratch& scratch, Conducted& block);

/// First line of question `question`: lines spread evenly over questions.
std::uint64_t first_line(std::uint64_t question, std::uint64_t questions, std::uint64_t lines);

/// True when a line goes on after `studies` of which `findings` found.
bool goes_on(const LineRule& rule, std::uint32_t studies, std::uint32_t findings);

}  // namespace lacuna
