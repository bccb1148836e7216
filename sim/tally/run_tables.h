// The tables that every outcome file holds, whatever its detail: regimes, points and literatures.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

#include "sim/model/scenario.h"
#include "sim/model/tables.h"

namespace lacuna {

/// /regimes: one row per regime, with its name and the number of the science it shares.
TableSpec regimes_table(const Scenario& scenario);
Batch regimes_rows(const Scenario& scenario);

/// /points: one row per sweep point; a scenario is one point, number 0.
TableSpec points_table();
Batch points_rows();

/// /literatures: one row per literature and regime, ordered by literature, then regime: point, regime,
/// literature, then the columns of Layout.
TableSpec literatures_table(const Scenario& scenario);

/// How many columns of /literatures stand before those of Layout.
inline constexpr std::size_t literature_keys = 3;

/// Appends one literature: rows[r] its sufficient statistics under regime r.
void append_literature(Batch& batch, std::uint32_t literature, const std::vector<std::vector<double>>& rows);

/// Names of the lab kinds, the same under every regime.
std::vector<std::string> lab_names(const Scenario& scenario);

/// Names of the regimes, in order.
std::vector<std::string> regime_names(const Scenario& scenario);

}  // namespace lacuna
