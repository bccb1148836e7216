#include <array>
#include <catch2/catch.hpp>
#include <cstdlib>

#include "sim/random/stream.h"
#include "tests/oracle/reference_csv.h"

using namespace lacuna;

namespace {

std::uint32_t word(const std::map<std::string, std::string>& row, const char* column) {
    return static_cast<std::uint32_t>(std::strtoul(row.at(column).c_str(), nullptr, 16));
}

}  // namespace

TEST_CASE("Philox4x32-10 gives its published known answers", "[random]") {
    const auto table = oracle::read_reference("philox4x32_10_known_answers.csv");
    REQUIRE(table.rows.size() == 3);
    for (const auto& row : table.rows) {
        const auto out = r123::Philox4x32()({{word(row, "c0"), word(row, "c1"), word(row, "c2"), word(row, "c3")}},
                                            {{word(row, "k0"), word(row, "k1")}});
        CHECK(out[0] == word(row, "r0"));
        CHECK(out[1] == word(row, "r1"));
        CHECK(out[2] == word(row, "r2"));
        CHECK(out[3] == word(row, "r3"));
    }
}

TEST_CASE("A stream is a pure function of seed, literature, purpose, study, index and entity", "[random]") {
    const auto first = [](std::uint64_t seed, Address address, std::uint64_t entity) {
        Stream stream({seed}, address, entity);
        return std::array<std::uint32_t, 4>{stream(), stream(), stream(), stream()};
    };
    const Address address{3, Purpose::study_data, 2, 7};
    const auto base = first(9, address, 1000);
    CHECK(first(9, address, 1000) == base);
    CHECK(first(10, address, 1000) != base);
    CHECK(first(9 + (std::uint64_t{1} << 32), address, 1000) != base);
    CHECK(first(9, {4, Purpose::study_data, 2, 7}, 1000) != base);
    CHECK(first(9, {3, Purpose::study_size, 2, 7}, 1000) != base);
    CHECK(first(9, {3, Purpose::study_data, 3, 7}, 1000) != base);
    CHECK(first(9, {3, Purpose::study_data, 2, 8}, 1000) != base);
    CHECK(first(9, address, 1001) != base);
    CHECK(first(9, address, 1000 + (std::uint64_t{1} << 32)) != base);
    CHECK(first(9, address, 1000 + (std::uint64_t{1} << 39)) != base);
}

TEST_CASE("A stream's counter is the one documented", "[random]") {
    Stream stream({0x1122334455667788u}, {0xAABBCCDDu, Purpose::acceptance, 0x0102, 5}, 0x03DEADBEEFu);
    const auto expected = r123::Philox4x32()({{5u, 0xDEADBEEFu, 0x01020000u | 14u << 8 | 0x03u, 0xAABBCCDDu}},
                                             {{0x55667788u, 0x11223344u}});
    CHECK(stream() == expected[0]);
    CHECK(stream() == expected[1]);
    CHECK(stream() == expected[2]);
    CHECK(stream() == expected[3]);
    const auto next = r123::Philox4x32()({{6u, 0xDEADBEEFu, 0x01020000u | 14u << 8 | 0x03u, 0xAABBCCDDu}},
                                         {{0x55667788u, 0x11223344u}});
    CHECK(stream() == next[0]);
}
