#include "sim/store/outcome_writer.h"

#include <fmt/format.h>
#include <unistd.h>

#include <algorithm>
#include <cerrno>
#include <cstring>
#include <filesystem>
#include <optional>

#include "sim/store/attributes.h"
#include "sim/store/column_writer.h"
#include "sim/store/guarded_driver.h"

namespace lacuna {

namespace {

namespace fs = std::filesystem;

constexpr std::size_t most_waiting_bytes = 12u << 20;  // of a table
constexpr std::size_t chunks_at_once = 64;             // encoded and waiting to be written, at most 32 MB

[[noreturn]] void refuse(const std::string& path, std::string message, std::string remedy) {
    Fault fault;
    fault.place.source = path;
    fault.message = std::move(message);
    fault.remedy = std::move(remedy);
    throw InputError(std::move(fault));
}

/// File creation without time stamps, so that equal runs are equal bytes.
Handle create_file(GuardedFile& bytes, const Handle& driver, const std::string& path) {
    const Handle creation = checked(H5Pcreate(H5P_FILE_CREATE), H5Pclose, path);
    check(H5Pset_obj_track_times(creation.id(), false), path);
    const Handle access = checked(H5Pcreate(H5P_FILE_ACCESS), H5Pclose, path);
    // Small tables have many columns; the newer layout keeps each one's overhead to a few hundred bytes.
    check(H5Pset_libver_bounds(access.id(), H5F_LIBVER_V110, H5F_LIBVER_V110), path);
    check(H5Pset_fclose_degree(access.id(), H5F_CLOSE_STRONG), path);
    return create_hdf5(bytes, driver, creation.id(), access.id(), path);
}

void create_group(hid_t file, const std::string& name) {
    const Handle properties = checked(H5Pcreate(H5P_GROUP_CREATE), H5Pclose, name);
    check(H5Pset_obj_track_times(properties.id(), false), name);
    checked(H5Gcreate2(file, name.c_str(), H5P_DEFAULT, properties.id(), H5P_DEFAULT), H5Gclose, name);
}

std::string parent_of(const std::string& path) {
    const fs::path parent = fs::path(path).parent_path();
    return parent.empty() ? "." : parent.string();
}

}  // namespace

void check_output(const std::string& path, bool overwrite) {
    std::error_code error;
    if (path.empty()) refuse("-o", "an output file needs a name", "give one with -o");
    const fs::file_status status = fs::status(path, error);
    if (fs::is_directory(status)) refuse(path, "is a directory", "give a file name with -o");
    if (fs::exists(status) && !overwrite) {
        refuse(path, "is there already", "give --overwrite to replace it, or another name with -o");
    }
    if (fs::exists(status) && !fs::is_regular_file(status))
        refuse(path, "is not a regular file", "give another name with -o");
    const std::string parent = parent_of(path);
    if (!fs::is_directory(parent, error))
        refuse(path, fmt::format("there is no directory {}", parent), "make it first");
    if (::access(parent.c_str(), W_OK | X_OK) != 0) {
        refuse(path, fmt::format("cannot write in {}: {}", parent, std::strerror(errno)),
               "write elsewhere with -o");
    }
}

class OutcomeWriter::File {
public:
    File(const std::string& path, const FileFacts& facts, std::vector<TableSpec> tables, bool compress,
         ParallelFor loop)
        : path_(path),
          partial_(fmt::format("{}.partial-{}", path, ::getpid())),
          compress_(compress),
          parallel_for_(std::move(loop)) {
        silence_hdf5();
        bytes_.emplace(partial_, path);
        try {
            driver_ = guarded_driver();
            file_ = create_file(*bytes_, driver_, partial_);
            open(facts, std::move(tables));
        } catch (...) {
            abandon();
            throw;
        }
    }

    ~File() { abandon(); }

    const std::string& partial() const { return partial_; }

    void append(const std::string& name, const Batch& rows) {
        silence_hdf5();  // the caller's thread may be another one each time
        const auto at =
            std::find_if(tables_.begin(), tables_.end(), [&](const Table& t) { return t.spec.name == name; });
        if (at == tables_.end()) throw Defect("OutcomeWriter: no table " + name);
        lacuna::append(at->waiting, rows);
        const std::size_t whole = at->waiting.rows / at->chunk;
        if (whole == 0) return;
        write_rows(*at, whole * at->chunk, at->chunk);
        drop_front(at->waiting, whole * at->chunk);
    }

    void keep_rows(const std::string& name, std::uint64_t rows) {
        silence_hdf5();
        for (Table& table : tables_) {
            if (table.spec.name != name) continue;
            const std::size_t written = table.created ? table.columns.front().rows() : 0;
            if (rows < written) {
                for (ColumnWriter& column : table.columns) column.cut(rows);
            }
            table.waiting = first_rows(table.waiting, rows > written ? rows - written : 0);
        }
    }

    void finish(bool complete, std::uint64_t done, std::uint64_t planned) {
        silence_hdf5();
        for (Table& table : tables_) {
            write_rows(table, table.waiting.rows,
                       table.created ? table.chunk : std::clamp<std::size_t>(table.waiting.rows, 1, table.chunk));
        }
        write_integer(file_.id(), "complete", complete ? 1 : 0);
        write_text(file_.id(), "literatures_done", std::to_string(done));
        write_text(file_.id(), "literatures_planned", std::to_string(planned));
        tables_.clear();
        if (!file_.close()) throw RunError(fmt::format("cannot write {}: {}", path_, hdf5_reason()));
        bytes_->sync();
        bytes_.reset();
        std::error_code error;
        fs::rename(partial_, path_, error);
        if (error) throw RunError(fmt::format("cannot rename {} to {}: {}", partial_, path_, error.message()));
        placed_ = true;
    }

private:
    struct Table {
        TableSpec spec;
        std::vector<ColumnWriter> columns;
        Batch waiting;
        std::size_t chunk;  // rows
        bool created = false;
    };

    /// Rows of a chunk: fewer for wide tables, since a chunk of every column waits in memory.
    static std::size_t chunk_of(const TableSpec& spec) {
        std::size_t row_bytes = 0;
        for (const ColumnSpec& column : spec.columns) row_bytes += value_size(column.type);
        std::size_t rows = chunk_rows;
        while (rows > 1024 && rows * row_bytes > most_waiting_bytes) rows /= 2;
        return rows;
    }

    static Batch first_rows(const Batch& batch, std::size_t rows) {
        Batch kept = batch;
        kept.rows = std::min(batch.rows, rows);
        for (ColumnData& column : kept.columns) std::visit([&](auto& values) { values.resize(kept.rows); }, column);
        return kept;
    }

    void open(const FileFacts& facts, std::vector<TableSpec> tables) {
        write_text(file_.id(), "format", outcome_format);
        write_integer(file_.id(), "format_version", outcome_format_version);
        for (const FactName& fact : fact_names) write_text(file_.id(), fact.name, facts.*fact.member);
        for (TableSpec& spec : tables) {
            create_group(file_.id(), spec.name);
            Table table{spec, {}, empty_batch(spec), chunk_of(spec)};
            for (const ColumnSpec& column : spec.columns) {
                table.columns.emplace_back(spec.name + '/' + column.name, column, compress_);
            }
            tables_.push_back(std::move(table));
        }
    }

    /// Encodes and writes the first `rows` waiting rows of a table in chunks; all columns have as many.
    void write_rows(Table& table, std::size_t rows, std::size_t rows_in_chunk) {
        if (!table.created) {
            for (ColumnWriter& column : table.columns)
                column.create(file_.id(), rows_in_chunk, rows_in_chunk == table.chunk);
            table.created = true;
        }
        const std::size_t columns = table.columns.size();
        const std::size_t jobs = (rows + rows_in_chunk - 1) / rows_in_chunk * columns;
        const auto first_row = [&](std::size_t job) { return job / columns * rows_in_chunk; };
        const auto count = [&](std::size_t job) { return std::min(rows_in_chunk, rows - first_row(job)); };
        for (std::size_t start = 0; start < jobs; start += chunks_at_once) {
            std::vector<EncodedChunk> encoded(std::min(chunks_at_once, jobs - start));
            parallel_for_(encoded.size(), [&](std::size_t i) {
                const std::size_t job = start + i;
                encoded[i] = encode_chunk(table.waiting.columns[job % columns], first_row(job), count(job),
                                          rows_in_chunk, compress_);
            });
            for (std::size_t i = 0; i < encoded.size(); ++i) {
                table.columns[(start + i) % columns].write(encoded[i], count(start + i));
            }
            bytes_->check();
        }
    }

    static void drop_front(Batch& batch, std::size_t rows) {
        for (ColumnData& column : batch.columns) {
            std::visit(
                [&](auto& values) {
                    values.erase(values.begin(), values.begin() + static_cast<std::ptrdiff_t>(rows));
                },
                column);
        }
        batch.rows -= rows;
    }

    void abandon() noexcept {
        tables_.clear();
        file_.reset();
        bytes_.reset();
        if (!placed_) ::unlink(partial_.c_str());
    }

    std::string path_, partial_;
    bool compress_;
    ParallelFor parallel_for_;
    std::optional<GuardedFile> bytes_;
    Handle driver_, file_;
    std::vector<Table> tables_;
    bool placed_ = false;
};

OutcomeWriter::OutcomeWriter(const std::string& path, bool overwrite, const FileFacts& facts,
                             std::vector<TableSpec> tables, bool compress, ParallelFor parallel_for) {
    check_output(path, overwrite);
    file_ = std::make_unique<File>(path, facts, std::move(tables), compress, std::move(parallel_for));
}

OutcomeWriter::~OutcomeWriter() = default;

void OutcomeWriter::append(const std::string& table, const Batch& rows) { file_->append(table, rows); }

void OutcomeWriter::keep_rows(const std::string& table, std::uint64_t rows) { file_->keep_rows(table, rows); }

void OutcomeWriter::finish(bool complete, std::uint64_t literatures_done, std::uint64_t literatures_planned) {
    file_->finish(complete, literatures_done, literatures_planned);
}

const std::string& OutcomeWriter::partial_path() const { return file_->partial(); }

}  // namespace lacuna
