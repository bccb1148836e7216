// One column of a table in an HDF5 file: its dataset, made when its first chunk is ready.
#pragma once

#include <algorithm>
#include <string>

#include "sim/model/tables.h"
#include "sim/store/chunk.h"
#include "sim/store/handle.h"

namespace lacuna {

class ColumnWriter {
public:
    ColumnWriter(std::string path, ColumnSpec spec, bool compress)
        : path_(std::move(path)), spec_(std::move(spec)), compress_(compress) {}

    const ColumnSpec& spec() const { return spec_; }

    /// Rows of a chunk for a column that will hold `rows` in all, or more than a chunk.
    static std::size_t rows_of_chunk(std::size_t rows) { return rows < chunk_rows ? std::max<std::size_t>(rows, 1) : chunk_rows; }

    /// Makes the dataset with chunks of `rows_in_chunk`. Throws RunError.
    void create(hid_t file, std::size_t rows_in_chunk, bool grows);

    /// Writes a chunk that holds `count` rows, behind those before.
    void write(const EncodedChunk& chunk, std::size_t count);

    bool created() const { return dataset_.open(); }

private:
    std::string path_;
    ColumnSpec spec_;
    bool compress_;
    Handle dataset_;
    hsize_t rows_ = 0;
};

}  // namespace lacuna
