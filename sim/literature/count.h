// From a block's columns to the counts of its literature.
#pragma once

#include <vector>

#include "sim/literature/prepared.h"
#include "sim/literature/roster.h"
#include "sim/model/columns.h"
#include "sim/tally/tally.h"

namespace lacuna {

/// Scratch columns, reused from block to block.
struct CountScratch {
    StudyFacts facts;
    std::vector<std::uint8_t> truth, kind;
    std::vector<double> effect;
    std::vector<std::uint32_t> participants;
    std::vector<QuestionCount> questions;
};

/// Study facts of the block, once for all regimes of its science.
void gather_facts(const PreparedScience& science, const Conducted& block, CountScratch& scratch);

/// True when every line holds one study and every question has at most one line, so that manuscripts
/// and questions need no counting of their own. A property of the literature, alike for all its blocks.
bool one_study_a_question(const PreparedScience& science, const Roster& roster);

/// Adds the block, as it came out under one regime, to that regime's tally. `single`: see above.
void count_outcome(const PreparedRules& rules, const Conducted& block, const Outcome& outcome, bool single,
                   CountScratch& scratch, Tally& tally);

}  // namespace lacuna
