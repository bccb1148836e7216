// The derived numbers of each lab kind's design.
#pragma once

#include <vector>

#include "analysis/report/preview.h"
#include "sim/model/scenario.h"

namespace lacuna {

/// One entry per lab kind of `regime`.
std::vector<DesignPreview> preview_designs(const Regime& regime);

}  // namespace lacuna
