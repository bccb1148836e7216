// Functions from a manuscript's facts to chances. A journal sees what a report says, never how it came
// about.
#pragma once

#include <cstddef>
#include <vector>

#include "sim/model/claim.h"
#include "sim/model/scenario.h"

namespace lacuna {

/// What a journal sees of a manuscript.
struct ManuscriptFacts {
    ManuscriptClass manuscript_class;
    std::uint8_t level_two;  // how many of the regime set's two-sided cuts its best p is below
    std::uint8_t level_one;  // the same for one-sided p
};

/// Chance that a manuscript is written up.
double writing_chance(const Writing& writing, ManuscriptClass manuscript_class);

/// A journal's acceptance rule as a table over classes or levels.
struct AcceptanceTable {
    Acceptance::Kind kind;
    int sides;
    std::vector<double> chance;  // by class, or by level 0 .. number of cuts

    double operator()(const ManuscriptFacts& facts) const {
        if (kind == Acceptance::Kind::by_class) return chance[static_cast<std::size_t>(facts.manuscript_class)];
        return chance[sides == 2 ? facts.level_two : facts.level_one];
    }
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
