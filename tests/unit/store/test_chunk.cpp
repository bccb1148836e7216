// Chunks as bytes: what zlib and the definition of HDF5's shuffle filter make of them.
#include <zlib.h>

#include <catch2/catch.hpp>

#include "sim/store/chunk.h"
#include "tests/unit/store/sample_outcome.h"

using namespace lacuna;
using namespace lacuna::sample_outcome;

namespace {

/// The values again, by zlib and the definition of HDF5's shuffle filter: byte b of value i stands at
/// b * rows + i.
std::vector<unsigned char> decoded(const EncodedChunk& chunk, std::size_t size, std::size_t rows) {
    if (chunk.skipped != 0) return chunk.bytes;
    std::vector<unsigned char> sorted(size * rows), values(size * rows);
    uLongf length = sorted.size();
    REQUIRE(uncompress(sorted.data(), &length, chunk.bytes.data(), chunk.bytes.size()) == Z_OK);
    REQUIRE(length == sorted.size());
    for (std::size_t i = 0; i < rows; ++i) {
        for (std::size_t b = 0; b < size; ++b) values[i * size + b] = sorted[b * rows + i];
    }
    return values;
}

}  // namespace

TEST_CASE("A chunk holds its values, padded with zeros", "[store]") {
    const Batch batch = rows(0, 5000);
    for (std::size_t c = 0; c < batch.columns.size(); ++c) {
        const std::size_t size = value_size(spec().columns[c].type);
        for (const auto& [first, count, padded] :
             {std::tuple{0u, 5000u, 5000u}, {4000u, 1000u, 4096u}, {4999u, 1u, 1u}}) {
            INFO("column " << c << ", " << count << " rows of " << padded);
            const EncodedChunk chunk = encode_chunk(batch.columns[c], first, count, padded, true);
            const std::vector<unsigned char> bytes = decoded(chunk, size, padded);
            REQUIRE(bytes.size() == padded * size);
            std::vector<unsigned char> expected(padded * size, 0);
            std::visit([&](const auto& v) { std::memcpy(expected.data(), v.data() + first, count * size); },
                       batch.columns[c]);
            CHECK(bytes == expected);
            CHECK(encode_chunk(batch.columns[c], first, count, padded, false).bytes == expected);
        }
    }
}

TEST_CASE("Noise is stored as it is, and what repeats is packed", "[store]") {
    std::vector<double> noise(chunk_rows), few(chunk_rows);
    std::uint64_t state = 1;
    for (std::size_t i = 0; i < chunk_rows; ++i) {
        state = state * 6364136223846793005u + 1442695040888963407u;  // Knuth, MMIX
        const std::uint64_t mixed = (state ^ (state >> 29)) * 0xbf58476d1ce4e5b9u;
        std::memcpy(&noise[i], &mixed, sizeof mixed);
        few[i] = static_cast<double>(i % 3);
    }
    const EncodedChunk raw = encode_chunk(noise, 0, chunk_rows, chunk_rows, true);
    CHECK(raw.skipped == 0b11u);
    CHECK(raw.bytes.size() == chunk_rows * 8);
    const EncodedChunk packed = encode_chunk(few, 0, chunk_rows, chunk_rows, true);
    CHECK(packed.skipped == 0);
    CHECK(packed.bytes.size() < chunk_rows / 4);
}
