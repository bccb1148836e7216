#include <catch2/catch.hpp>
#include <cmath>

#include "analysis/report/table_csv.h"

using namespace lacuna;

TEST_CASE("stored tables become CSV with enumerations by name", "[report]") {
    const TableSpec spec{"studies",
                         {{"claim", ColumnType::u8, "1", "", {"none, yet", "positive"}},
                          {"flag", ColumnType::u8, "1", "", {}},
                          {"n", ColumnType::i32, "participants", "", {}},
                          {"estimate", ColumnType::f64, "effect", "", {}}}};
    const Batch batch{
        3,
        {std::vector<std::uint8_t>{0, 1, 7}, std::vector<std::uint8_t>{0, 1, 255},
         std::vector<std::int32_t>{-5, 0, 2147483647}, std::vector<double>{0.1, std::nan(""), INFINITY}}};
    CHECK(table_header_csv(spec) == "claim,flag,n,estimate\r\n");
    CHECK(table_rows_csv(spec, batch) == "\"none, yet\",0,-5,0.1\r\npositive,1,0,\r\n7,255,2147483647,inf\r\n");
}
