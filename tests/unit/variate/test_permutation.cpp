#include <algorithm>
#include <boost/math/distributions/chi_squared.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <map>
#include <numeric>

#include "sim/variate/permutation.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;

namespace {

/// Pearson's chi-squared of counts against expectations proportional to `weight(cell)`: below the quantile
/// that one of this file's some 50 tests passes with a chance of 1 in 10,000 in all, 1 - 1e-4 / 50 (Boost.Math).
template <class Weight>
bool fits(const std::vector<double>& seen, Weight weight, double total) {
    double sum = 0.0;
    for (std::size_t i = 0; i < seen.size(); ++i) sum += weight(i);
    double statistic = 0.0;
    double cells = 0.0;
    for (std::size_t i = 0; i < seen.size(); ++i) {
        const double expected = total * weight(i) / sum;
        if (expected == 0.0 && seen[i] > 0.0) return false;
        if (expected == 0.0) continue;
        statistic += (seen[i] - expected) * (seen[i] - expected) / expected;
        cells += 1.0;
    }
    const double bound = boost::math::quantile(complement(boost::math::chi_squared(cells - 1), 1e-4 / 50));
    if (statistic >= bound) WARN("chi-squared " << statistic << " on " << cells - 1 << ", bound " << bound);
    return statistic < bound;
}

}  // namespace

TEST_CASE("A computed permutation hits every place once", "[variate]") {
    for (const std::uint64_t size : {1u, 2u, 3u, 4u, 5u, 31u, 32u, 33u, 1000u, 65535u, 65536u, 65537u, 100000u}) {
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

TEST_CASE("Small permutations: every pair of images, and every order, has the same chance", "[variate]") {
    const int keys = 200000;
    std::vector<std::uint64_t> images;
    for (const std::uint64_t size : {2u, 3u, 5u, 6u, 8u, 10u, 12u, 16u, 20u, 24u}) {
        std::vector<double> pairs(size * size, 0.0), ends(size * size, 0.0);
        std::map<std::vector<std::uint64_t>, double> orders;
        for (std::uint32_t l = 0; l < keys; ++l) {
            Permutation(size, Stream({3}, {l, Purpose::line_order, 0, 0}, 0)).images(0, size, images);
            pairs[images[0] * size + images[1]] += 1.0;
            ends[images[size / 2] * size + images[size - 1]] += 1.0;
            if (size <= 6) orders[images] += 1.0;
        }
        INFO("size " << size);
        const auto unequal = [&](std::size_t cell) { return cell / size == cell % size ? 0.0 : 1.0; };
        CHECK(fits(pairs, unequal, keys));
        if (size > 2) CHECK(fits(ends, unequal, keys));
        if (size > 6) continue;
        std::vector<double> seen;
        for (const auto& [order, times] : orders) seen.push_back(times);
        REQUIRE(seen.size() == (size == 2 ? 2 : size == 3 ? 6 : size == 5 ? 120 : 720));
        CHECK(fits(
            seen, [](std::size_t) { return 1.0; }, keys));
    }
}

TEST_CASE("Permutations on both sides of the largest table: places are uniform, neighbours independent",
          "[variate]") {
    const int keys = 100000;
    std::vector<std::uint64_t> images;
    for (const std::uint64_t size : {65537u, 65600u, 98304u, 131072u, 300001u}) {
        INFO("size " << size);
        // 256 cells by the leading part of a place, and by its last bits: how many places each has.
        const auto leading = [size](std::uint64_t place) { return place * 256 / size; };
        const auto trailing = [](std::uint64_t place) { return place % 256; };
        std::vector<double> lead(256, 0.0), trail(256, 0.0), lead_places(256, 0.0), trail_places(256, 0.0);
        for (std::uint64_t place = 0; place < size; ++place) {
            lead_places[leading(place)] += 1.0;
            trail_places[trailing(place)] += 1.0;
        }
        // Lines 0 and 1, which start in one half of the network, on 16 x 16 coarse cells.
        const auto cell = [](std::uint64_t a, std::uint64_t b) { return a / 16 * 16 + b / 16; };
        std::vector<double> lead_pairs(256, 0.0), trail_pairs(256, 0.0), mixed_pairs(256, 0.0);
        double near = 0.0;
        for (std::uint32_t l = 0; l < keys; ++l) {
            Permutation(size, Stream({4}, {l, Purpose::line_order, 0, 0}, 0)).images(0, 2, images);
            const std::uint64_t a = images[0], b = images[1];
            lead[leading(a)] += 1.0;
            trail[trailing(a)] += 1.0;
            lead_pairs[cell(leading(a), leading(b))] += 1.0;
            trail_pairs[a % 16 * 16 + b % 16] += 1.0;
            mixed_pairs[a % 16 * 16 + leading(b) / 16] += 1.0;
            near += (a > b ? a - b : b - a) < 256;
        }
        CHECK(fits(
            lead, [&](std::size_t i) { return lead_places[i]; }, keys));
        CHECK(fits(
            trail, [&](std::size_t i) { return trail_places[i]; }, keys));
        // Products of margins: that a place is not taken twice moves a cell by one in 4000 of its count at
        // most, far below its standard error of one in twenty.
        const auto sixteenth = [](const std::vector<double>& places, std::size_t c) {
            return std::accumulate(places.begin() + static_cast<std::ptrdiff_t>(c * 16),
                                   places.begin() + static_cast<std::ptrdiff_t>(c * 16 + 16), 0.0);
        };
        const auto last_bits = [size](std::size_t c) { return static_cast<double>((size + 15 - c) / 16); };
        CHECK(fits(
            lead_pairs,
            [&](std::size_t i) { return sixteenth(lead_places, i / 16) * sixteenth(lead_places, i % 16); }, keys));
        CHECK(fits(
            trail_pairs, [&](std::size_t i) { return last_bits(i / 16) * last_bits(i % 16); }, keys));
        CHECK(fits(
            mixed_pairs, [&](std::size_t i) { return last_bits(i / 16) * sixteenth(lead_places, i % 16); }, keys));
        // Ordered pairs at distances 1 .. 255: 2 sum (size - k), of size (size - 1).
        const double n = static_cast<double>(size);
        const double chance = (2 * 255 * n - 255 * 256) / (n * (n - 1));
        CHECK(std::fabs(oracle::z_score(near / keys, chance, oracle::share_error(chance, keys))) <
              oracle::bound_in_standard_errors);
    }
}
