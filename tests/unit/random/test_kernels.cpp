#include <hwy/targets.h>

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <numeric>

#include "sim/random/chance.h"
#include "sim/random/kernels.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;

namespace {

constexpr StreamKey key{20261201};

/// What the kernels must give, one entity at a time, in plain code and long double.
double oracle_normal(Address address, std::uint64_t entity) {
    Stream stream(key, address, entity / 32 * 16 + entity % 16);
    const auto u1 = static_cast<long double>(stream.uniform());
    const auto u2 = static_cast<long double>(stream.uniform());
    const long double radius = std::sqrt(-2.0L * std::log(u1));
    const long double angle = 2.0L * 3.14159265358979323846264338327950288L * u2;
    return static_cast<double>(entity / 16 % 2 == 0 ? radius * std::cos(angle) : radius * std::sin(angle));
}

std::vector<double> all_normals(Address address, std::size_t count) {
    std::vector<double> out(count);
    normals(key, address, {0, nullptr, count}, out.data());
    return out;
}

double normal_cdf(double x) { return 0.5 * std::erfc(-x * std::sqrt(0.5)); }

}  // namespace

TEST_CASE("Uniform kernels give the bits of the scalar stream, from any start and in any order", "[random]") {
    const Address address{1, Purpose::writing, 4, 0};
    for (const std::uint64_t first : {0ull, 1ull, 15ull, 16ull, 31ull, 32ull, 77ull, (1ull << 39) - 3}) {
        std::vector<double> out(101);
        uniforms(key, address, {first, nullptr, out.size()}, out.data());
        for (std::size_t i = 0; i < out.size(); ++i) REQUIRE(out[i] == uniform(key, address, first + i));
    }
    const std::vector<std::uint32_t> offsets{5, 5, 900, 31, 32, 16, 0, 4000000000u, 17, 1, 2};
    std::vector<double> out(offsets.size());
    uniforms(key, address, {10, offsets.data(), offsets.size()}, out.data());
    for (std::size_t i = 0; i < out.size(); ++i) REQUIRE(out[i] == uniform(key, address, 10ull + offsets[i]));
}

TEST_CASE("Normal kernels agree with Box-Muller in long double on every vector target", "[random]") {
    const Address address{0, Purpose::study_data, 0, 0};
    for (const std::int64_t target : hwy::SupportedAndGeneratedTargets()) {
        hwy::SetSupportedTargetsForTest(target);
        INFO(vector_target());
        const std::vector<double> z = all_normals(address, 20000);
        double worst = 0.0;
        for (std::size_t e = 0; e < z.size(); ++e) {
            // Near 0 the error is that of the reduced angle, 2^-54 of a turn, times the radius.
            worst = std::max(worst, std::fabs(z[e] - oracle_normal(address, e)) / std::max(1.0, std::fabs(z[e])));
        }
        CHECK(worst < 2e-15);
        const std::vector<std::uint32_t> offsets{7, 40, 16, 3, 19999, 31, 32};
        std::vector<double> some(offsets.size());
        normals(key, address, {0, offsets.data(), offsets.size()}, some.data());
        for (std::size_t i = 0; i < some.size(); ++i) CHECK(some[i] == z[offsets[i]]);
        hwy::SetSupportedTargetsForTest(0);
    }
}

TEST_CASE("Normals and uniforms have their distributions (Kolmogorov, moments, 4 standard errors)", "[random]") {
    const std::size_t count = 1u << 20;
    std::vector<double> z = all_normals({0, Purpose::study_data, 0, 0}, count);
    double m1 = 0, m2 = 0, m3 = 0, m4 = 0;
    for (const double x : z) {
        m1 += x;
        m2 += x * x;
        m3 += x * x * x;
        m4 += x * x * x * x;
    }
    const double n = static_cast<double>(count);
    // Variances of the raw moments of a standard normal: 1, 2, 15, 96.
    CHECK(std::fabs(m1 / n) < 4 * std::sqrt(1 / n));
    CHECK(std::fabs(m2 / n - 1) < 4 * std::sqrt(2 / n));
    CHECK(std::fabs(m3 / n) < 4 * std::sqrt(15 / n));
    CHECK(std::fabs(m4 / n - 3) < 4 * std::sqrt(96 / n));
    std::sort(z.begin(), z.end());
    CHECK(oracle::kolmogorov(z, normal_cdf) < oracle::kolmogorov_bound);
    std::vector<double> u(count);
    uniforms(key, {0, Purpose::writing, 0, 0}, {0, nullptr, count}, u.data());
    std::sort(u.begin(), u.end());
    CHECK(oracle::kolmogorov(u, [](double x) { return x; }) < oracle::kolmogorov_bound);
    CHECK(u.front() > 0.0);
    CHECK(u.back() < 1.0);
}

TEST_CASE("Neighbouring entities, studies, purposes, literatures and seeds are uncorrelated", "[random]") {
    const std::size_t count = 1u << 18;
    const auto correlation = [&](const std::vector<double>& a, const std::vector<double>& b, std::size_t lag) {
        return std::inner_product(a.begin(), a.end() - static_cast<std::ptrdiff_t>(lag),
                                  b.begin() + static_cast<std::ptrdiff_t>(lag), 0.0) /
               static_cast<double>(count - lag);
    };
    const double bound = 4.0 / std::sqrt(static_cast<double>(count));
    const auto base = all_normals({0, Purpose::study_data, 0, 0}, count);
    for (const std::size_t lag : {1u, 2u, 15u, 16u, 17u, 32u})
        CHECK(std::fabs(correlation(base, base, lag)) < bound);
    CHECK(std::fabs(correlation(base, all_normals({1, Purpose::study_data, 0, 0}, count), 0)) < bound);
    CHECK(std::fabs(correlation(base, all_normals({0, Purpose::study_effect, 0, 0}, count), 0)) < bound);
    CHECK(std::fabs(correlation(base, all_normals({0, Purpose::study_data, 1, 0}, count), 0)) < bound);
    CHECK(std::fabs(correlation(base, all_normals({0, Purpose::study_data, 0, 1}, count), 0)) < bound);
    std::vector<double> other(count);
    normals({key.seed + 1}, {0, Purpose::study_data, 0, 0}, {0, nullptr, count}, other.data());
    CHECK(std::fabs(correlation(base, other, 0)) < bound);
}

TEST_CASE("One draw from each of many keyed streams is uniform: chi-squared over 64 cells", "[random]") {
    // 99.99 % point of chi-squared with 63 degrees of freedom: 113.0 (scipy.stats.chi2.ppf(.9999, 63) = 113.02).
    const double critical = 113.02;
    const auto statistic = [](const std::vector<double>& u) {
        std::vector<double> cells(64, 0.0);
        for (const double x : u) cells[static_cast<std::size_t>(x * 64)] += 1.0;
        const double expected = static_cast<double>(u.size()) / 64;
        double sum = 0.0;
        for (const double c : cells) sum += (c - expected) * (c - expected) / expected;
        return sum;
    };
    std::vector<double> over_literatures, over_studies, over_seeds;
    for (std::uint32_t i = 0; i < 60000; ++i) {
        over_literatures.push_back(uniform(key, {i, Purpose::writing, 0, 0}, 0));
        over_studies.push_back(uniform(key, {0, Purpose::writing, static_cast<std::uint16_t>(i), 0}, 0));
        over_seeds.push_back(uniform({i}, {0, Purpose::writing, 0, 0}, 0));
    }
    CHECK(statistic(over_literatures) < critical);
    CHECK(statistic(over_studies) < critical);
    CHECK(statistic(over_seeds) < critical);
}

TEST_CASE("Words are the documented parts of their block, from any start and in any order", "[random]") {
    const Address address{2, Purpose::acceptance, 1, 77};
    const auto block_word = [&](std::uint64_t block, std::uint64_t which) {
        Stream stream(key, address, block);
        std::uint32_t drawn = stream();
        for (; which > 0; --which) drawn = stream();
        return drawn;
    };
    const auto word32 = [&](std::uint64_t e) { return block_word(e / 64 * 16 + e % 16, e / 16 % 4); };
    const auto word16 = [&](std::uint64_t e) {
        const std::uint32_t whole = block_word(e / 128 * 16 + e % 16, e / 16 % 4);
        return static_cast<std::uint16_t>(e / 64 % 2 == 0 ? whole : whole >> 16);
    };
    const std::vector<std::uint32_t> offsets{5, 5, 900, 63, 64, 127, 128, 16, 0, 4000000000u, 17, 1, 2};
    for (const std::int64_t target : hwy::SupportedAndGeneratedTargets()) {
        hwy::SetSupportedTargetsForTest(target);
        for (const std::uint64_t first : {0ull, 1ull, 63ull, 64ull, 130ull, (1ull << 39) - 3}) {
            std::vector<std::uint32_t> wide(301);
            std::vector<std::uint16_t> narrow(301);
            words(key, address, {first, nullptr, wide.size()}, wide.data());
            words(key, address, {first, nullptr, narrow.size()}, narrow.data());
            for (std::size_t i = 0; i < wide.size(); ++i) {
                REQUIRE(wide[i] == word32(first + i));
                REQUIRE(narrow[i] == word16(first + i));
            }
        }
        std::vector<std::uint32_t> wide(offsets.size());
        std::vector<std::uint16_t> narrow(offsets.size());
        words(key, address, {10, offsets.data(), offsets.size()}, wide.data());
        words(key, address, {10, offsets.data(), offsets.size()}, narrow.data());
        for (std::size_t i = 0; i < offsets.size(); ++i) {
            REQUIRE(wide[i] == word32(10ull + offsets[i]));
            REQUIRE(narrow[i] == word16(10ull + offsets[i]));
        }
        hwy::SetSupportedTargetsForTest(0);
    }
}

TEST_CASE("A refined uniform begins with its word", "[random]") {
    for (std::uint32_t e = 0; e < 1000; ++e) {
        const double fine = refined(key, {0, Purpose::writing, 0, 0}, e, 0x1234, 16);
        REQUIRE(std::floor(fine * 0x1p16) == 0x1234);
    }
}

TEST_CASE("A refined uniform stays below the next word, and below 1, however close its further bits come",
          "[random]") {
    // 32-bit words leave 21 of 53 bits, so word + bits would round up where the bits are above 1 - 2^-22.
    // These entities' further bits are, found by a search through 2^26 streams.
    const Address address{0, Purpose::study_size, 0, 0};
    const Address further{0, Purpose::refinement, 0, static_cast<std::uint32_t>(Purpose::study_size)};
    for (const std::uint64_t entity : {20393650u, 59257646u, 60569214u}) {
        REQUIRE(Stream(key, further, entity).uniform() > 1.0 - 0x1p-22);
        for (const std::uint32_t word : {0xFFFFFFFFu, 0xFFFFFFFEu, 0x80000000u}) {
            const double fine = refined(key, address, entity, word, 32);
            CHECK(fine < (word + 1.0) * 0x1p-32);
            CHECK(fine >= word * 0x1p-32);
        }
    }
}

TEST_CASE("Decisions have their chance exactly, also where the word alone cannot tell", "[random]") {
    // Chances that differ by less than 2^-16 share their sure words; the open ones make the difference.
    const std::size_t count = 1u << 22;
    std::vector<std::uint16_t> drawn(count);
    const Address address{0, Purpose::writing, 0, 0};
    words(key, address, {0, nullptr, count}, drawn.data());
    for (const double p : {0.0, 1e-6, 1e-5, 0.05, 0.5, 0.3, 1 - 1e-6, 1.0}) {
        const Chance chance(p);
        std::vector<std::uint8_t> happened(count);
        decide(
            key, address, count, drawn.data(), [&](std::size_t) -> const Chance& { return chance; },
            [](std::size_t i) { return i; }, happened.data());
        const double share =
            static_cast<double>(std::count(happened.begin(), happened.end(), 1)) / static_cast<double>(count);
        INFO(p);
        if (p == 0.0 || p == 1.0) {
            CHECK(share == p);
        } else {
            CHECK(std::fabs(oracle::z_score(share, p, oracle::share_error(p, static_cast<double>(count)))) < 4);
        }
    }
}
