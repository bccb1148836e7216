// A run's outcome file, fed as the run goes.
#pragma once

#include <cstdint>
#include <map>
#include <string>
#include <vector>

#include "analysis/cli/build_facts.h"
#include "sim/model/scenario.h"
#include "sim/model/tables.h"
#include "sim/store/outcome_writer.h"

namespace lacuna {

class Recording {
public:
    /// Opens the file before anything is simulated; throws as OutcomeWriter does.
    Recording(const std::string& path, bool overwrite, const Scenario& scenario, const std::string& config_text,
              const BuildFacts& build);

    void add_literature(std::uint32_t literature, const std::vector<std::vector<double>>& rows);
    void add_rows(const std::string& table, const Batch& batch);
    /// Writes what is pending and puts the file in place, without detail rows of a literature that was not
    /// finished. `literatures`: how many are complete.
    void finish(bool complete, std::uint64_t literatures);

    const std::string& digest() const { return digest_; }
    const std::string& partial_path() const { return writer_.partial_path(); }

private:
    void flush();

    std::string digest_;
    std::uint64_t planned_;
    TableSpec literatures_;
    Batch pending_;
    std::map<std::string, std::uint64_t> detail_rows_, whole_rows_;  // so far; when a literature was last whole
    OutcomeWriter writer_;
};

}  // namespace lacuna
