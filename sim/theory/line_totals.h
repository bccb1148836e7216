// What one line leaves in each scope, in expectation, given its question's effect.
#pragma once

#include <array>
#include <vector>

#include "sim/theory/publication_chance.h"
#include "sim/theory/study_law.h"

namespace lacuna {

struct LineTotals {
    std::array<std::array<Sums, 4>, 3> studies{};        // [scope][claim]
    std::array<std::array<double, 3>, 3> manuscripts{};  // [scope][class]; conducted: could be written
    std::array<double, 3> established{};  // [scope]: chance that a finding of the line is in the scope
};

/// `cells`: the law of each of the line's studies, independent of one another.
LineTotals line_totals(const LineRule& rule, Unit unit, Findings findings, const PublicationChance& chance,
                       const std::vector<Cell>& cells);

}  // namespace lacuna
