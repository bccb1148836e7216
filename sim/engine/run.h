// The engine: simulates a scenario's literatures on all cores and hands their rows on, in order.
// It takes a callable and sinks; it knows no files, no terminal, no clock of its own.
#pragma once

#include <cstdint>
#include <functional>
#include <span>
#include <vector>

#include "sim/model/scenario.h"
#include "sim/model/tables.h"

namespace lacuna {

/// Rows that a stretch of the run has produced, in the order of literatures. Always called from one
/// thread at a time, with everything of literature i before anything of literature i + 1.
struct Sinks {
    /// One literature is complete: its row of sufficient statistics under each regime
    /// (rows[r] in the order of Layout). Required.
    std::function<void(std::uint32_t literature, const std::vector<std::vector<double>>& rows)> literature;
    /// A batch of a detail table ("questions", "labs", "manuscripts", "studies"; see sim/model/schema.h).
    /// Needed when the scenario stores more than literatures.
    std::function<void(const std::string& table, Batch&& batch)> rows;
};

/// How far a run is.
struct Progress {
    std::uint64_t literatures_done = 0, literatures_total = 0;
    std::uint64_t studies_done = 0;
    double studies_total = 0;  // expected
};

struct RunOptions {
    unsigned threads = 0;                           // 0: as many as the machine has
    std::uint32_t first_literature = 0;             // literatures before it are taken as done
    std::function<bool()> stop;                     // true: end after what is in flight
    std::function<void(const Progress&)> progress;  // called from the thread of the sinks
};

struct RunOutcome {
    std::uint64_t literatures = 0;  // complete and handed on, counted from literature 0
    std::uint64_t studies = 0;
    bool stopped = false;
};

/// Simulates literatures first_literature .. run.literatures-1. Draws depend on seed, literature and
/// entity only, so neither threads nor stops change a bit.
RunOutcome simulate(const Scenario& scenario, const RunOptions& options, const Sinks& sinks);

}  // namespace lacuna
