#include "sim/store/chunk.h"

#include <isa-l/igzip_lib.h>

#include <algorithm>
#include <cstring>

#include "sim/base/fault.h"

namespace lacuna {

namespace {

constexpr std::size_t sample_bytes = 16384;  // tried first, to tell what cannot be compressed
constexpr double worth_it = 0.92;            // keep the compressed form below this share of the raw one

/// The bytes of a chunk's values, the first of each, then the second of each, and so on.
std::vector<unsigned char> shuffled(const std::vector<unsigned char>& raw, std::size_t size) {
    std::vector<unsigned char> out(raw.size());
    const std::size_t count = raw.size() / size;
    for (std::size_t byte = 0; byte < size; ++byte) {
        const unsigned char* from = raw.data() + byte;
        unsigned char* to = out.data() + byte * count;
        for (std::size_t i = 0; i < count; ++i) to[i] = from[i * size];
    }
    return out;
}

/// Deflated bytes (zlib format), empty when they would not be smaller than `most`. ISA-L's level 3: a third
/// slower than level 1 of version 2.30, whose choices depend in one chunk of four thousand on where its state
/// lies in memory, so that equal runs would not be equal bytes.
std::vector<unsigned char> deflated(const std::vector<unsigned char>& from, std::size_t most) {
    std::vector<unsigned char> out(most), work(ISAL_DEF_LVL3_DEFAULT);
    isal_zstream stream{};  // the next call leaves the window's size as it finds it
    isal_deflate_stateless_init(&stream);
    stream.end_of_stream = 1;
    stream.flush = NO_FLUSH;
    stream.gzip_flag = IGZIP_ZLIB;
    stream.level = 3;
    stream.level_buf = work.data();
    stream.level_buf_size = static_cast<std::uint32_t>(work.size());
    stream.next_in = const_cast<unsigned char*>(from.data());  // read only, in an interface without const
    stream.avail_in = static_cast<std::uint32_t>(from.size());
    stream.next_out = out.data();
    stream.avail_out = static_cast<std::uint32_t>(out.size());
    out.resize(isal_deflate_stateless(&stream) == COMP_OK ? stream.total_out : 0);
    return out;
}

std::vector<unsigned char> raw_bytes(const ColumnData& column, std::size_t first, std::size_t count,
                                     std::size_t rows) {
    return std::visit(
        [&](const auto& values) {
            const std::size_t size = sizeof(values[0]);
            std::vector<unsigned char> bytes(rows * size, 0);
            if (count > 0) std::memcpy(bytes.data(), values.data() + first, count * size);
            return bytes;
        },
        column);
}

}  // namespace

std::size_t value_size(ColumnType type) {
    switch (type) {
        case ColumnType::u8:
            return 1;
        case ColumnType::i32:
            return 4;
        case ColumnType::f64:
            return 8;
    }
    throw Defect("value_size: unknown column type");
}

bool is_shuffled(ColumnType type) { return type != ColumnType::u8; }

EncodedChunk encode_chunk(const ColumnData& column, std::size_t first, std::size_t count, std::size_t rows,
                          bool compress) {
    std::vector<unsigned char> raw = raw_bytes(column, first, count, rows);
    if (!compress) return {std::move(raw), 0};
    const bool shuffle = column.index() != 0;
    const std::uint32_t skip_all = shuffle ? 0b11u : 0b1u;
    // Of a mantissa full of noise only a byte or two compress; the sample shows it at a tenth of the cost.
    const std::size_t size = raw.size() / rows;
    const std::size_t sampled = std::min(raw.size(), sample_bytes) / size * size;
    const std::vector<unsigned char> head(raw.begin(), raw.begin() + static_cast<std::ptrdiff_t>(sampled));
    const auto limit = [](std::size_t bytes) {
        return std::max<std::size_t>(64, static_cast<std::size_t>(worth_it * static_cast<double>(bytes)));
    };
    const std::vector<unsigned char> sample = shuffle ? shuffled(head, size) : head;
    if (deflated(sample, limit(sample.size())).empty()) return {std::move(raw), skip_all};
    const std::vector<unsigned char> sorted = shuffle ? shuffled(raw, size) : raw;
    std::vector<unsigned char> packed = deflated(sorted, limit(sorted.size()));
    if (packed.empty()) return {std::move(raw), skip_all};
    return {std::move(packed), 0};
}

}  // namespace lacuna
