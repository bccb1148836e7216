// What is written up together, and what its journal sees of it.
#pragma once

#include "sim/publication/chain.h"

namespace lacuna {

/// Class of a single study as a manuscript.
constexpr ManuscriptClass class_of_study(Claim claim, Findings findings) {
    return is_finding(claim, findings) ? ManuscriptClass::supportive : ManuscriptClass::null;
}

/// Class of a line: all its studies find, in one direction; some do, or they disagree; none does.
ManuscriptClass class_of_line(std::uint32_t studies, std::uint32_t positive, std::uint32_t reversed,
                              Findings findings);

/// Fills outcome.manuscript_class: per study where studies are manuscripts, else per line.
void classify(const PreparedRules& rules, const Conducted& block, Outcome& outcome);

/// Fills scratch.level_two / level_one: the levels of each manuscript's best p (smallest over the
/// studies that the manuscript holds). Left empty where no rule asks.
void best_levels(const PreparedRules& rules, const Conducted& block, ChainScratch& scratch);

/// Fills outcome.status: what each study shares of its manuscript's fate.
void spread_status(const PreparedRules& rules, const Conducted& block, Outcome& outcome);

}  // namespace lacuna
