// What regimes with the same science have in common, made the same to the last bit.
#pragma once

#include <vector>

#include "sim/model/schema.h"

namespace lacuna {

/// Sums over conducted studies are added up by status, in which regimes differ, so they may differ in
/// the last bit though the studies are the same: every regime gets those of the first with its science.
/// rows[r]: the sufficient statistics of one literature under regime r.
void share_conducted_sums(const ScienceGroups& groups, std::size_t kinds, std::vector<std::vector<double>>& rows);

}  // namespace lacuna
