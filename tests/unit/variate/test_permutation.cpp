#include <algorithm>
#include <catch2/catch.hpp>
#include <numeric>

#include "sim/variate/permutation.h"

using namespace lacuna;

TEST_CASE("A computed permutation hits every place once", "[variate]") {
    for (const std::uint64_t size : {1u, 2u, 3u, 4u, 5u, 31u, 32u, 33u, 1000u, 65537u}) {
        const Permutation order(size, Stream({3}, {1, Purpose::line_order, 0, 0}, 0));
        std::vector<std::uint64_t> images;
        order.images(0, size, images);
        std::sort(images.begin(), images.end());
        for (std::uint64_t i = 0; i < size; ++i) REQUIRE(images[i] == i);
        if (size < 1000) continue;
        std::vector<std::uint64_t> part;
        order.images(100, 50, part);
        order.images(0, size, images);
        CHECK(std::equal(part.begin(), part.end(), images.begin() + 100));
    }
}

TEST_CASE("Which place a line gets is uniform over literatures, and neighbours are independent", "[variate]") {
    const std::uint64_t size = 8;
    std::vector<double> cells(64, 0.0);
    const int literatures = 64000;
    std::vector<std::uint64_t> images;
    for (std::uint32_t l = 0; l < literatures; ++l) {
        Permutation(size, Stream({3}, {l, Purpose::line_order, 0, 0}, 0)).images(0, size, images);
        cells[images[0] * 8 + images[1]] += 1.0;
    }
    double statistic = 0.0;
    const double expected = literatures / 56.0;
    for (std::size_t a = 0; a < 8; ++a) {
        for (std::size_t b = 0; b < 8; ++b) {
            if (a != b) statistic += (cells[a * 8 + b] - expected) * (cells[a * 8 + b] - expected) / expected;
        }
        CHECK(cells[a * 8 + a] == 0.0);
    }
    CHECK(statistic < 102.9);  // 99.99 % point, 55 degrees of freedom (scipy.stats.chi2.ppf(.9999, 55) = 102.95)
}
