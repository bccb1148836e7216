// Reads an outcome file. The file may come from anywhere: nothing is allocated before class, rank and
// size have been looked at, and only plain datasets of the file itself are read.
#pragma once

#include <cstdint>
#include <memory>
#include <string>
#include <vector>

#include "sim/model/tables.h"
#include "sim/store/file_facts.h"

namespace lacuna {

class OutcomeReader {
public:
    /// Throws RunError, naming the file, when it is missing, no HDF5, cut short, of another program, or
    /// of a newer format.
    explicit OutcomeReader(const std::string& path);
    ~OutcomeReader();
    OutcomeReader(OutcomeReader&&) noexcept;
    OutcomeReader& operator=(OutcomeReader&&) noexcept;

    const FileFacts& facts() const;
    bool complete() const;  // all planned literatures are in it
    std::uint64_t literatures_done() const;
    std::uint64_t literatures_planned() const;

    const std::vector<TableSpec>& tables() const;
    bool has(const std::string& table) const;
    std::size_t rows(const std::string& table) const;
    const std::vector<ColumnSpec>& columns(const std::string& table) const;

    /// A column's values, all or `count` from `first` on. Throws RunError.
    ColumnData read(const std::string& table, const std::string& column) const;
    ColumnData read(const std::string& table, const std::string& column, std::size_t first,
                    std::size_t count) const;

private:
    struct Content;
    std::unique_ptr<Content> content_;
};

/// SHA-256 over every table's columns, their names and the SHA-256 of their values, in the order of the file: equal
/// for equal content, whatever the file's layout.
std::string payload_digest(const OutcomeReader& file);

}  // namespace lacuna
