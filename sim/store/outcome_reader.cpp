#include "sim/store/outcome_reader.h"

#include <fmt/format.h>

#include <algorithm>
#include <charconv>
#include <filesystem>
#include <string_view>

#include "sim/base/sha256.h"
#include "sim/store/attributes.h"
#include "sim/store/column_reader.h"

namespace lacuna {

namespace {

namespace fs = std::filesystem;

/// Names of the hard links in a group, in the order in which HDF5 gives them; other links are refused.
std::vector<std::string> links_of(hid_t group, const std::string& path) {
    struct Found {
        std::vector<std::string> names;
        bool foreign = false;
    } found;
    const auto add = [](hid_t, const char* name, const H5L_info_t* info, void* out) -> herr_t {
        auto& list = *static_cast<Found*>(out);
        // A path as a name would be followed through other groups, and through what they link to.
        if (info->type == H5L_TYPE_HARD && std::string_view(name).find('/') == std::string_view::npos)
            list.names.emplace_back(name);
        else
            list.foreign = true;
        return 0;
    };
    check(H5Literate(group, H5_INDEX_NAME, H5_ITER_INC, nullptr, add, &found), path);
    if (found.foreign) throw RunError(path + ": holds links to elsewhere, which are not followed");
    return found.names;
}

std::uint64_t to_number(const std::string& text) {
    std::uint64_t value = 0;
    std::from_chars(text.data(), text.data() + text.size(), value);
    return value;
}

std::uint64_t size_of(const std::string& path) {
    std::error_code error;
    if (!fs::exists(path, error)) throw RunError(fmt::format("{}: there is no such file", path));
    if (!fs::is_regular_file(path, error)) throw RunError(fmt::format("{}: is not a file", path));
    return fs::file_size(path, error);
}

Handle open_file(const std::string& path) {
    silence_hdf5();
    H5PLset_loading_state(0);  // no filter plug-ins
    const htri_t is_hdf5 = H5Fis_hdf5(path.c_str());
    if (is_hdf5 <= 0) {
        H5Eclear2(H5E_DEFAULT);
        throw RunError(
            fmt::format("{}: is not an HDF5 file, so no outcome file (`lacuna run` writes those)", path));
    }
    // Finished files do not change, and some network file systems have no locks.
    const Handle access = checked(H5Pcreate(H5P_FILE_ACCESS), H5Pclose, path);
    check(H5Pset_file_locking(access.id(), false, true), path);
    const hid_t id = H5Fopen(path.c_str(), H5F_ACC_RDONLY, access.id());
    if (id < 0)
        throw RunError(fmt::format("{}: cannot be opened, it may be cut short or still being written ({})", path,
                                   hdf5_reason()));
    return {id, H5Fclose};
}

void check_format(hid_t file, const std::string& path) {
    if (read_text(file, "format") != outcome_format) {
        throw RunError(fmt::format("{}: is an HDF5 file of another program, no outcome file", path));
    }
    const std::int32_t version = read_integer(file, "format_version", 0);
    if (version > outcome_format_version) {
        throw RunError(fmt::format(
            "{}: was written by a newer lacuna (format {}); this one reads up to {}: use a newer program", path,
            version, outcome_format_version));
    }
    if (version < 1) throw RunError(fmt::format("{}: has no valid format version, it is damaged", path));
}

}  // namespace

struct OutcomeReader::Content {
    std::string path;
    Handle file;
    FileFacts facts;
    bool complete = false;
    std::uint64_t done = 0, planned = 0;
    std::vector<TableSpec> specs;
    std::vector<std::vector<ColumnReader>> columns;  // per table

    std::size_t find(const std::string& table) const {
        for (std::size_t t = 0; t < specs.size(); ++t) {
            if (specs[t].name == table) return t;
        }
        throw RunError(fmt::format("{}: has no table '{}'", path, table));
    }

    void open_table(const std::string& name, std::uint64_t bytes) {
        const Handle group = checked(H5Gopen2(file.id(), name.c_str(), H5P_DEFAULT), H5Gclose, path + ": " + name);
        TableSpec spec{name, {}};
        std::vector<ColumnReader> its;
        for (const std::string& column : links_of(group.id(), path + ": " + name)) {
            its.push_back(open_column(file.id(), name + '/' + column, column, bytes));
            if (its.back().rows != its.front().rows) {
                throw RunError(fmt::format("{}: columns of table '{}' differ in length", path, name));
            }
            spec.columns.push_back(its.back().spec);
        }
        specs.push_back(std::move(spec));
        columns.push_back(std::move(its));
    }
};

OutcomeReader::OutcomeReader(const std::string& path) : content_(std::make_unique<Content>()) {
    Content& c = *content_;
    c.path = path;
    const std::uint64_t bytes = size_of(path);
    c.file = open_file(path);
    try {
        check_format(c.file.id(), path);
        for (const FactName& fact : fact_names) c.facts.*fact.member = read_text(c.file.id(), fact.name);
        c.complete = read_integer(c.file.id(), "complete", 0) == 1;
        c.done = to_number(read_text(c.file.id(), "literatures_done"));
        c.planned = to_number(read_text(c.file.id(), "literatures_planned"));
        for (const std::string& table : links_of(c.file.id(), path)) c.open_table(table, bytes);
    } catch (const RunError& error) {
        const std::string text = error.what();
        throw RunError(text.starts_with(path) ? text : path + ": " + text);
    }
}

OutcomeReader::~OutcomeReader() = default;
OutcomeReader::OutcomeReader(OutcomeReader&&) noexcept = default;
OutcomeReader& OutcomeReader::operator=(OutcomeReader&&) noexcept = default;

const FileFacts& OutcomeReader::facts() const { return content_->facts; }
bool OutcomeReader::complete() const { return content_->complete; }
std::uint64_t OutcomeReader::literatures_done() const { return content_->done; }
std::uint64_t OutcomeReader::literatures_planned() const { return content_->planned; }
const std::vector<TableSpec>& OutcomeReader::tables() const { return content_->specs; }

bool OutcomeReader::has(const std::string& table) const {
    return std::any_of(content_->specs.begin(), content_->specs.end(),
                       [&](const TableSpec& t) { return t.name == table; });
}

std::size_t OutcomeReader::rows(const std::string& table) const {
    const auto& columns = content_->columns[content_->find(table)];
    return columns.empty() ? 0 : columns.front().rows;
}

const std::vector<ColumnSpec>& OutcomeReader::columns(const std::string& table) const {
    return content_->specs[content_->find(table)].columns;
}

ColumnData OutcomeReader::read(const std::string& table, const std::string& column) const {
    return read(table, column, 0, rows(table));
}

ColumnData OutcomeReader::read(const std::string& table, const std::string& column, std::size_t first,
                               std::size_t count) const {
    for (const ColumnReader& its : content_->columns[content_->find(table)]) {
        if (its.spec.name != column) continue;
        try {
            return read_rows(its, first, count);
        } catch (const RunError& error) {
            throw RunError(
                fmt::format("{}: table '{}': {}; the file is damaged", content_->path, table, error.what()));
        }
    }
    throw RunError(fmt::format("{}: table '{}' has no column '{}'", content_->path, table, column));
}

std::string payload_digest(const OutcomeReader& file) {
    constexpr std::size_t stretch = 1u << 20;
    std::string parts;
    for (const TableSpec& table : file.tables()) {
        for (const ColumnSpec& column : table.columns) {
            parts += table.name + '/' + column.name;
            const std::size_t rows = file.rows(table.name);
            for (std::size_t first = 0; first < rows; first += stretch) {
                const ColumnData data = file.read(table.name, column.name, first, std::min(stretch, rows - first));
                std::visit(
                    [&](const auto& values) {
                        parts += sha256_hex(
                            {reinterpret_cast<const char*>(values.data()), values.size() * sizeof(values[0])});
                    },
                    data);
            }
        }
    }
    return sha256_hex(parts);
}

}  // namespace lacuna
