#include <catch2/catch.hpp>
#include <cmath>

#include "sim/base/fault.h"
#include "sim/variate/alias.h"

using namespace lacuna;

namespace {

/// The chance of each value that a table encodes, exactly: the share of (column, fraction) that picks it.
std::vector<double> encoded(const AliasTable& table) {
    std::vector<double> chance(table.keep.size(), 0.0);
    for (std::size_t c = 0; c < table.keep.size(); ++c) {
        chance[c] += table.keep[c] / static_cast<double>(table.keep.size());
        chance[table.other[c]] += (1.0 - table.keep[c]) / static_cast<double>(table.keep.size());
    }
    return chance;
}

}  // namespace

TEST_CASE("An alias table encodes its chances", "[variate]") {
    const std::vector<std::vector<double>> cases{{1.0},
                                                 {0.5, 0.5},
                                                 {0.0, 1.0},
                                                 {1.0, 0.0, 0.0},
                                                 {0.1, 0.2, 0.3, 0.4},
                                                 {3.0, 1.0, 0.0, 6.0},
                                                 {1e-12, 1.0, 1e-300}};
    for (const auto& chance : cases) {
        double sum = 0.0;
        for (const double c : chance) sum += c;
        const std::vector<double> got = encoded(alias_table(chance));
        for (std::size_t i = 0; i < chance.size(); ++i) CHECK(got[i] == Approx(chance[i] / sum).margin(1e-15));
    }
}

TEST_CASE("A value without chance is never picked", "[variate]") {
    const std::vector<double> chance{0.0, 0.3, 0.0, 0.7, 0.0};
    const AliasTable table = alias_table(chance);
    for (int i = 0; i < 100000; ++i) {
        const std::size_t pick = table.pick((i + 0.5) / 100000);
        REQUIRE(chance[pick] > 0.0);
    }
}

TEST_CASE("An alias table without any chance is a defect", "[variate]") {
    CHECK_THROWS_AS(alias_table(std::vector<double>{}), Defect);
    CHECK_THROWS_AS(alias_table(std::vector<double>{0.0, 0.0}), Defect);
}
