// Chunks of a column as bytes for the file: shuffled and deflated as HDF5's own filters would, so that
// every reader undoes them, or raw where that saves too little.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "sim/model/tables.h"

namespace lacuna {

/// Rows of a whole chunk, but for wide tables.
inline constexpr std::size_t chunk_rows = 65536;

/// What goes into the file for one chunk, and which filters of the pipeline it skips (HDF5's mask).
struct EncodedChunk {
    std::vector<unsigned char> bytes;
    std::uint32_t skipped = 0;
};

/// Bytes of one value.
std::size_t value_size(ColumnType type);

/// Whether a column of this type is shuffled before it is deflated: bytes of single-byte codes need no
/// sorting.
bool is_shuffled(ColumnType type);

/// Encodes values first .. first + count - 1 of a column, padded with zeros to `rows`.
EncodedChunk encode_chunk(const ColumnData& column, std::size_t first, std::size_t count, std::size_t rows,
                          bool compress);

}  // namespace lacuna
