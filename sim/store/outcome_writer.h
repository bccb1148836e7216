// Writes an outcome file: beside its final name, renamed when whole.
#pragma once

#include <cstdint>
#include <functional>
#include <memory>
#include <string>
#include <vector>

#include "sim/model/tables.h"
#include "sim/store/file_facts.h"

namespace lacuna {

/// Runs body(0) .. body(count - 1), in any order, on as many threads as it likes.
using ParallelFor = std::function<void(std::size_t count, const std::function<void(std::size_t)>& body)>;

/// Throws InputError when there is a file at `path` and it may not be overwritten, or when nothing can
/// be written there; says what to do.
void check_output(const std::string& path, bool overwrite);

class OutcomeWriter {
public:
    /// Opens "<path>.partial-<process>". Throws as check_output does, or RunError.
    OutcomeWriter(const std::string& path, bool overwrite, const FileFacts& facts, std::vector<TableSpec> tables,
                  bool compress, ParallelFor parallel_for);
    /// Without finish(): removes the partial file; a file that was at `path` before stays as it was.
    ~OutcomeWriter();
    OutcomeWriter(const OutcomeWriter&) = delete;
    OutcomeWriter& operator=(const OutcomeWriter&) = delete;

    /// Rows for one of the tables. Whole chunks are written at once, the rest waits. Throws RunError.
    void append(const std::string& table, const Batch& rows);

    /// Forgets the rows of a table beyond the first `rows`, those of a literature that was not finished;
    /// nothing more can be appended to it. Throws RunError.
    void keep_rows(const std::string& table, std::uint64_t rows);

    /// Writes what waits and puts the file in its place. `complete`: all planned literatures are in it.
    /// Throws RunError.
    void finish(bool complete, std::uint64_t literatures_done, std::uint64_t literatures_planned);

    const std::string& partial_path() const;

private:
    class File;
    std::unique_ptr<File> file_;
};

}  // namespace lacuna
