#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
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

TEST_CASE("Two lines' places are any two alike: small fields, chi-squared over pairs", "[variate]") {
    // 200,000 permutations each. Bound: five standard deviations sqrt(2 df) above the mean df, which the
    // chi-squared passes with a chance below 1e-4 for these df (scipy.stats.chi2.sf); ten sizes.
    for (const std::uint64_t size : {2u, 3u, 5u, 6u, 8u, 10u, 12u, 16u, 20u, 24u}) {
        INFO("size " << size);
        std::vector<double> cells(size * size, 0.0);
        const std::uint32_t literatures = 200000;
        std::vector<std::uint64_t> images;
        for (std::uint32_t l = 0; l < literatures; ++l) {
            Permutation(size, Stream({3}, {l, Purpose::line_order, 0, 0}, 0)).images(0, size, images);
            cells[images[0] * size + images[size - 1]] += 1.0;
        }
        const double pairs = static_cast<double>(size * (size - 1));
        const double expected = literatures / pairs;
        double statistic = 0.0;
        for (std::size_t a = 0; a < size; ++a) {
            CHECK(cells[a * size + a] == 0.0);
            for (std::size_t b = 0; b < size; ++b) {
                if (a != b) statistic += (cells[a * size + b] - expected) * (cells[a * size + b] - expected) / expected;
            }
        }
        CHECK(statistic < pairs - 1.0 + 5.0 * std::sqrt(2.0 * std::fmax(pairs - 1.0, 1.0)));
    }
}

TEST_CASE("The same for permutations that are computed, over 16 x 16 coarse cells", "[variate]") {
    for (const std::uint64_t size : {65537u, 90000u, 131072u, 1000003u}) {
        INFO("size " << size);
        for (const std::uint64_t apart : {1u, 4096u, 65000u}) {
            INFO("apart " << apart);
            std::vector<double> cells(256, 0.0), last(64, 0.0);
            const std::uint32_t literatures = 200000;
            std::vector<std::uint64_t> a, b;
            for (std::uint32_t l = 0; l < literatures; ++l) {
                const Permutation order(size, Stream({3}, {l, Purpose::line_order, 0, 0}, 0));
                order.images(7, 1, a);
                order.images(7 + apart, 1, b);
                cells[a[0] * 16 / size * 16 + b[0] * 16 / size] += 1.0;
                last[a[0] % 8 * 8 + b[0] % 8] += 1.0;  // the low bits too
            }
            const auto chi = [&](const std::vector<double>& counts) {
                const double expected = literatures / static_cast<double>(counts.size());
                double statistic = 0.0;
                for (const double count : counts) statistic += (count - expected) * (count - expected) / expected;
                return statistic;
            };
            CHECK(chi(cells) < 255 + 5 * std::sqrt(2.0 * 255));
            CHECK(chi(last) < 63 + 5 * std::sqrt(2.0 * 63));
        }
    }
}
