// Functions from a manuscript's facts to chances. A journal sees what a report says, never how it came
// about.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

#include "sim/model/claim.h"
#include "sim/model/scenario.h"
#include "sim/random/chance.h"

namespace lacuna {

/// Chance that a manuscript is written up.
double writing_chance(const Writing& writing, ManuscriptClass manuscript_class);

/// A journal's acceptance rule as a table over classes or levels.
struct AcceptanceTable {
    Acceptance::Kind kind;
    int sides;
    std::vector<Chance> chance;  // by class, or by level 0 .. number of cuts
};

/// `cuts`: all cuts of the rule's sidedness that levels are counted over, ascending; they must hold the
/// rule's own steps. A manuscript at level l has a p below the l largest of them.
AcceptanceTable acceptance_table(const Acceptance& accept, const std::vector<double>& cuts);

/// The highest chance of the rule: what a results-blind decision is worth unless said otherwise.
double highest_chance(const Acceptance& accept);

/// A journal's name as the index of its random streams, so that adding or removing another journal
/// shifts no draw of this one. FNV-1a, 32 bits (Fowler, Noll & Vo 1991).
std::uint32_t journal_index(const std::string& name);

}  // namespace lacuna
