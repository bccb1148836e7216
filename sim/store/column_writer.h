// One column of a table in an HDF5 file: its dataset, made when its first chunk is ready.
#pragma once

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

    /// Makes the dataset with chunks of `rows_in_chunk`. Throws RunError.
    void create(hid_t file, std::size_t rows_in_chunk, bool grows);

    /// Writes a chunk that holds `count` rows, behind those before.
    void write(const EncodedChunk& chunk, std::size_t count);

    /// Rows written so far.
    std::size_t rows() const { return rows_; }

    /// Forgets the rows from `rows` on; nothing can be written behind them any more.
    void cut(std::size_t rows);

private:
    std::string path_;
    ColumnSpec spec_;
    bool compress_;
    Handle dataset_;
    hsize_t rows_ = 0;
};

}  // namespace lacuna
