#include <catch2/catch.hpp>

#include "sim/tally/layout.h"
#include "sim/tally/shared_science.h"

using namespace lacuna;

TEST_CASE("regimes of one science share their conducted sums, and nothing else", "[tally]") {
    const Layout layout(2);
    std::vector<std::vector<double>> rows(3, std::vector<double>(layout.size(), 1.0));
    for (std::size_t r = 0; r < 3; ++r) {
        for (double& value : rows[r]) value += static_cast<double>(r);
    }
    share_conducted_sums({{0, 1, 0}, {0, 1}}, 2, rows);
    const auto conducted = layout.sum(1, Scope::conducted, Claim::reversed, Sum::abs_estimate);
    CHECK(rows[0][conducted] == 1.0);
    CHECK(rows[1][conducted] == 2.0);
    CHECK(rows[2][conducted] == 1.0);
    std::size_t changed = 0;
    for (double value : rows[2]) changed += value != 3.0;
    CHECK(changed == 2 * 4 * 3);
}
