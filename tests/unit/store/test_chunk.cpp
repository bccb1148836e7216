// Chunks as bytes: what HDF5's own filters make of them, and what they may depend on.
#include <zlib.h>

#include <array>
#include <catch2/catch.hpp>

#include "sim/store/chunk.h"
#include "tests/unit/store/sample_outcome.h"

using namespace lacuna;
using namespace lacuna::sample_outcome;

namespace {

/// The values again, as HDF5's own filters (zlib, and its shuffle) undo them, from a file in memory.
std::vector<unsigned char> decoded(const EncodedChunk& chunk, hid_t type, bool shuffled, hsize_t rows) {
    const hid_t access = H5Pcreate(H5P_FILE_ACCESS), properties = H5Pcreate(H5P_DATASET_CREATE);
    H5Pset_fapl_core(access, 1 << 20, false);
    H5Pset_chunk(properties, 1, &rows);
    if (shuffled) H5Pset_shuffle(properties);
    H5Pset_deflate(properties, 1);
    const hid_t file = H5Fcreate("chunk", H5F_ACC_TRUNC, H5P_DEFAULT, access);
    const hid_t space = H5Screate_simple(1, &rows, nullptr);
    const hid_t dataset = H5Dcreate2(file, "x", type, space, H5P_DEFAULT, properties, H5P_DEFAULT);
    const hsize_t start = 0;
    std::vector<unsigned char> values(rows * H5Tget_size(type));
    const bool written =
        H5Dwrite_chunk(dataset, H5P_DEFAULT, chunk.skipped, &start, chunk.bytes.size(), chunk.bytes.data()) >= 0;
    const bool read = H5Dread(dataset, type, H5S_ALL, H5S_ALL, H5P_DEFAULT, values.data()) >= 0;
    H5Dclose(dataset);
    H5Sclose(space);
    H5Fclose(file);
    H5Pclose(properties);
    H5Pclose(access);
    REQUIRE((written && read));
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
            const hid_t type = std::array{H5T_STD_U8LE, H5T_STD_I32LE, H5T_IEEE_F64LE}[batch.columns[c].index()];
            const EncodedChunk chunk = encode_chunk(batch.columns[c], first, count, padded, true);
            const std::vector<unsigned char> bytes = decoded(chunk, type, size > 1, padded);
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
