// One block of a literature under every regime: the pure function that the engine calls.
#pragma once

#include <map>
#include <string>
#include <vector>

#include "sim/literature/conduct.h"
#include "sim/literature/count.h"
#include "sim/model/tables.h"

namespace lacuna {

/// How a scenario's literatures are cut into blocks, by the scenario alone.
struct Blocks {
    std::uint64_t questions;        // in a literature
    std::uint64_t questions_each;   // a multiple of 32: the groups of the random kernels
    std::uint64_t parts;            // blocks that share these questions, each with a part of their lines
    std::uint64_t count;            // blocks in a literature
    double studies_a_literature;    // expected, of the science with the most
    double studies_together;        // of all sciences

    BlockRange range(std::uint64_t block) const;
};
Blocks cut_into_blocks(const Scenario& scenario);

/// Scratch of one worker.
struct BlockScratch {
    ConductScratch conduct;
    ChainScratch chain;
    CountScratch count;
    Conducted block;
    std::vector<Outcome> outcomes;  // of the regimes of the science at hand
};

/// Rosters of a literature, one per science.
std::vector<Roster> draw_rosters(const PreparedScenario& prepared, StreamKey key, std::uint32_t literature);

/// Simulates `range` of `literature` under all regimes: adds to tallies[regime], appends rows to
/// `details` (by table name; empty map: none wanted), and returns the number of studies conducted.
std::uint64_t simulate_block(const PreparedScenario& prepared, StreamKey key, std::uint32_t literature,
                             const std::vector<Roster>& rosters, BlockRange range, BlockScratch& scratch,
                             std::vector<Tally>& tallies, std::map<std::string, Batch>& details);

}  // namespace lacuna
