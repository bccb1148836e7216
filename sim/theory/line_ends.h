// How a line of studies can end.
#pragma once

#include <cstdint>
#include <vector>

#include "sim/model/scenario.h"

namespace lacuna {

/// Lines that end with this many studies, of which this many find.
struct LineEnd {
    std::uint32_t studies, findings;
    double weight;  // number of such courses, times find^findings, times miss^(studies - findings)
};

/// All ends of a line whose studies find with chance `find` and do not with chance `miss`. With
/// find + miss = 1 the weights are chances (binomial, geometric and negative binomial by the rule); with
/// less they are chances that, besides, every study has a further property.
std::vector<LineEnd> line_ends(const LineRule& rule, double find, double miss);

}  // namespace lacuna
