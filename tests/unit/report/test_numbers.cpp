#include <catch2/catch.hpp>
#include <cmath>
#include <limits>

#include "analysis/report/number.h"

using namespace lacuna;

TEST_CASE("a value is shown to the place of its error's second digit", "[report]") {
    CHECK(show({0.312746, 0.001234, 400}) == "0.3127 ± 0.0012");
    CHECK(show({0.3, 0.05, 9}) == "0.300 ± 0.050");
    CHECK(show({72034.27, 12.31, 9}) == "72034 ± 12");
    CHECK(show({-0.00003, 0.0012, 9}) == "0.0000 ± 0.0012");
    CHECK(show({0.00031152, 0.0000843, 9}) == "0.000312 ± 0.000084");
    CHECK(show({1.51234567890, 1.2e-7, 9}) == "1.51234568 ± 1.2e-07");
    CHECK(show({2.5e-8, 1.2e-8, 9}) == "2.5e-08 ± 1.2e-08");
    CHECK(show({0.0, 0.0, 9}) == "0 ± 0");
    CHECK(show({1.0, 0.0, 9}) == "1.000 ± 0");
}

TEST_CASE("what is not known is not shown", "[report]") {
    CHECK(show({0.31274, std::nullopt, 1}) == "0.3127");
    CHECK(show({std::nullopt, std::nullopt, 0}) == "–");
    CHECK(show_range(std::nullopt).empty());
    CHECK(exact_number(std::nullopt).empty());
    CHECK(exact_number(std::numeric_limits<double>::quiet_NaN()).empty());
}

TEST_CASE("a range is shown to the digits that tell its ends apart", "[report]") {
    CHECK(show_range(Spread{0.2812, 0.3, 0.31, 0.32, 0.3431}) == "0.281 to 0.343");
    CHECK(show_range(Spread{2, 2, 2, 2, 2}) == "all 2.00");
    CHECK(show_range(Spread{0, 0, 0, 0, 0}) == "all 0");
}

TEST_CASE("counts have thousands separators", "[report]") {
    CHECK(show_count(0) == "0");
    CHECK(show_count(999) == "999");
    CHECK(show_count(1000) == "1,000");
    CHECK(show_count(-1234567) == "-1,234,567");
    CHECK(show_count(1e8) == "100,000,000");
}

TEST_CASE("machine numbers read back to the same double", "[report]") {
    for (double value : {0.1, 1.0 / 3, 1e-300, 123456789.125, 2.2250738585072014e-308, 0.1 + 0.2}) {
        CHECK(std::stod(exact_number(value)) == value);
    }
    CHECK(exact_number(0.1) == "0.1");
}
