// A small outcome file with every kind of column, for the tests of the store.
#pragma once

#include <unistd.h>

#include <cmath>
#include <cstring>
#include <filesystem>
#include <fstream>
#include <string>

#include "sim/base/fault.h"
#include "sim/store/outcome_reader.h"
#include "sim/store/outcome_writer.h"

namespace lacuna::sample_outcome {

namespace fs = std::filesystem;

/// A directory of its own for each test, removed afterwards.
struct Folder {
    fs::path path = fs::temp_directory_path() / ("lacuna-store-" + std::to_string(::getpid()));
    Folder() {
        fs::remove_all(path);
        fs::create_directories(path);
    }
    ~Folder() { fs::remove_all(path); }
    std::string operator/(const std::string& name) const { return (path / name).string(); }
};

inline const ParallelFor serial = [](std::size_t count, const std::function<void(std::size_t)>& body) {
    for (std::size_t i = 0; i < count; ++i) body(i);
};

inline TableSpec spec() {
    return {"studies",
            {{"claim", ColumnType::u8, "1", "what the study says", {"inconclusive", "positive", "reversed"}},
             {"flag", ColumnType::u8, "1", "a small number", {}},
             {"literature", ColumnType::i32, "code", "literature", {}},
             {"estimate", ColumnType::f64, "effect", "noise, which does not compress", {}},
             {"few", ColumnType::f64, "effect", "few values, which do", {}}}};
}

inline Batch rows(std::size_t first, std::size_t count) {
    Batch batch = empty_batch(spec());
    batch.rows = count;
    for (std::size_t i = first; i < first + count; ++i) {
        std::get<0>(batch.columns[0]).push_back(static_cast<std::uint8_t>(i % 3));
        std::get<0>(batch.columns[1]).push_back(static_cast<std::uint8_t>(i % 200));
        std::get<1>(batch.columns[2]).push_back(static_cast<std::int32_t>(i / 7) - 5);
        std::get<2>(batch.columns[3]).push_back(std::sin(static_cast<double>(i) * 12.9898) * 43758.5453);
        std::get<2>(batch.columns[4]).push_back(i % 11 == 0 ? std::nan("") : static_cast<double>(i % 5));
    }
    return batch;
}

inline FileFacts facts() {
    FileFacts f;
    f.title = "Versuche mit Pflanzenstärkung — 試験";
    f.config_text = "title = \"x\"\n";
    f.resolved_config = "{}";
    f.digest = "ab";
    f.seed = "18446744073709551615";
    f.program_version = "0.1.0";
    return f;
}

inline void write(const std::string& path, std::size_t count, std::size_t batch, bool compress = true,
                  bool overwrite = false) {
    OutcomeWriter writer(path, overwrite, facts(), {spec()}, compress, serial);
    for (std::size_t first = 0; first < count; first += batch)
        writer.append("studies", rows(first, std::min(batch, count - first)));
    writer.finish(true, 3, 3);
}

inline std::string bytes_of(const std::string& path) {
    std::ifstream in(path, std::ios::binary);
    return {std::istreambuf_iterator<char>(in), {}};
}

inline bool same_values(const ColumnData& a, const ColumnData& b) {
    if (a.index() != b.index()) return false;
    if (a.index() != 2) return a == b;
    const auto& x = std::get<2>(a);
    const auto& y = std::get<2>(b);
    if (x.size() != y.size()) return false;
    for (std::size_t i = 0; i < x.size(); ++i) {
        if (x[i] != y[i] && !(std::isnan(x[i]) && std::isnan(y[i]))) return false;
    }
    return true;
}

inline std::string message_of(const std::string& path) {
    try {
        const OutcomeReader reader(path);
        for (const TableSpec& table : reader.tables()) {
            for (const ColumnSpec& column : table.columns) reader.read(table.name, column.name);
        }
    } catch (const RunError& error) {
        return error.what();
    }
    return {};
}

}  // namespace lacuna::sample_outcome
