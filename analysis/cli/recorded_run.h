// A run that was stored, opened again.
#pragma once

#include <string>

#include "analysis/cli/run_results.h"
#include "sim/store/outcome_reader.h"

namespace lacuna {

struct RecordedRun {
    std::string path;
    OutcomeReader file;
    Scenario scenario;  // as the file says it was resolved

    /// Throws RunError, naming the file, when it is not a run's outcome file that can be read.
    explicit RecordedRun(const std::string& its_path);

    /// From the stored literatures, by the same accumulators as a run's own.
    Results results() const;
};

}  // namespace lacuna
