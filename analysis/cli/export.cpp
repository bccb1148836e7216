#include <fmt/format.h>

#include <cerrno>
#include <cstring>
#include <filesystem>
#include <fstream>

#include "analysis/cli/commands.h"
#include "analysis/cli/console.h"
#include "analysis/cli/recorded_run.h"
#include "analysis/record/literatures.h"
#include "analysis/report/machine.h"
#include "analysis/report/table_csv.h"
#include "sim/base/fault.h"

namespace lacuna {

namespace {

namespace fs = std::filesystem;

constexpr std::size_t rows_at_once = 16384;

void prepare_directory(const fs::path& directory, bool overwrite) {
    std::error_code error;
    const bool usable = fs::is_directory(directory, error);
    const bool filled = usable ? !fs::is_empty(directory, error) : fs::exists(directory, error);
    if (filled && !(usable && overwrite)) {
        Fault fault;
        fault.place.source = "command line";
        fault.key = "--output";
        fault.message = fmt::format("'{}' {}", directory.string(), usable ? "is not empty" : "is not a directory");
        fault.remedy = usable ? "give --overwrite, or another directory" : "give another name";
        throw InputError(fault);
    }
    fs::create_directories(directory, error);
    if (error) throw RunError(fmt::format("cannot make the directory {}: {}", directory.string(), error.message()));
}

/// One CSV file, written in stretches; every write is checked.
class CsvFile {
public:
    explicit CsvFile(fs::path path) : path_(std::move(path)), stream_(path_, std::ios::binary | std::ios::trunc) {
        check();
    }
    void write(const std::string& text) {
        stream_.write(text.data(), static_cast<std::streamsize>(text.size()));
        check();
    }
    void close() {
        stream_.close();
        check();
    }

private:
    void check() const {
        if (!stream_) throw RunError(fmt::format("cannot write {}: {}", path_.string(), std::strerror(errno)));
    }
    fs::path path_;
    std::ofstream stream_;
};

void write_whole(const fs::path& path, const std::string& text) {
    CsvFile file(path);
    file.write(text);
    file.close();
}

void write_table(const RecordedRun& run, const TableSpec& table, const fs::path& directory) {
    CsvFile file(directory / (table.name + ".csv"));
    file.write(table_header_csv(table));
    read_table(run.file, table, rows_at_once, [&](const Batch& rows) { file.write(table_rows_csv(table, rows)); });
    file.close();
}

}  // namespace

int export_command(const Options& options) {
    const RecordedRun run(options.input);
    const fs::path directory = options.output;
    prepare_directory(directory, options.overwrite);
    const Results results = run.results();
    write_whole(directory / "results.csv", results_csv(results));
    write_whole(directory / "differences.csv", differences_csv(results));
    std::size_t files = 2;
    for (const TableSpec& table : run.file.tables()) {
        write_table(run, table, directory);
        ++files;
    }
    if (!options.quiet) message(fmt::format("{}: {} CSV files\n", directory.string(), files));
    return exit_code::done;
}

}  // namespace lacuna
