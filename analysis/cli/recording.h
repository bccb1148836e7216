// A run's outcome file, fed as the run goes.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

#include "analysis/cli/build_facts.h"
#include "sim/model/scenario.h"
#include "sim/model/tables.h"
#include "sim/store/writer.h"

namespace lacuna {

class Recording {
public:
    /// Checks that `path` can be written before anything is simulated.
    Recording(const std::string& path, bool overwrite, const Scenario& scenario, const std::string& config_text,
              const BuildFacts& build);

    void add_literature(std::uint32_t literature, const std::vector<std::vector<double>>& rows);
    void add_rows(const std::string& table, Batch&& batch);
    /// Writes what is pending and puts the file in place. `complete`: the run was not stopped early.
    void finish(bool complete);

    const std::string& digest() const { return digest_; }
    const std::string& partial_file() const;
};

}  // namespace lacuna
