// A regime's rules as chances that depend on a manuscript's class and best p.
#pragma once

#include <array>
#include <vector>

#include "sim/model/claim.h"
#include "sim/model/scenario.h"

namespace lacuna {

/// Levels count how many p cuts a result passes: 0 passes none. Two-sided and one-sided cuts apart.
class PublicationChance {
public:
    explicit PublicationChance(const Rules& rules);

    const std::vector<double>& cuts_two() const { return cuts_two_; }  // ascending p, each once
    const std::vector<double>& cuts_one() const { return cuts_one_; }

    /// Chance that a manuscript is written.
    double written(ManuscriptClass manuscript_class) const;

    /// Chance that a written manuscript is published: 1 - product over the journals tried of
    /// (1 - acceptance), 1 where there is no journal. An acceptance is the rule's chance, or that of
    /// results-blind review at its share.
    double published(ManuscriptClass manuscript_class, std::size_t level_two, std::size_t level_one) const;

private:
    double accepted(const Journal& journal, ManuscriptClass manuscript_class, std::size_t level_two,
                    std::size_t level_one) const;

    Rules rules_;
    std::vector<double> cuts_two_, cuts_one_;
};

}  // namespace lacuna
