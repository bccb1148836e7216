// The chi-squared variates behind studies against the exact distribution function (Boost.Math).
#include <algorithm>
#include <boost/math/distributions/chi_squared.hpp>
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/design/errors.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;

TEST_CASE("Chi-squared variates of small degrees of freedom, two million each", "[design]") {
    // A squeeze that accepted too early would show: with a tenth of the bound the distance is above 5 at df 2.
    const std::size_t count = 2'000'000;
    ChiColumns chi, other;
    for (const double df : {2.0, 3.0, 4.0, 17.0}) {
        chi.add(df, df);
        other.add(df, 1.0);
    }
    chi.add(1.0, 1.0);
    other.add(1.0, 1.0);
    chi.add(0.0, 1.0);
    other.add(0.0, 1.0);
    SamplingScratch scratch;
    const StudyRound round{{12}, 0, 2, {0, nullptr, count}};
    std::vector<double> z(count + 16), v(count + 16), w(count + 16);
    for (std::uint32_t row = 0; row < 5; ++row) {
        const double df = row == 4 ? 1.0 : row == 3 ? 17.0 : row + 2.0;
        INFO("df " << df);
        const std::vector<std::uint32_t> rows(count + 16, row);
        draw_two_errors(round, chi, other, rows.data(), scratch, z.data(), v.data(), w.data());
        double products[3] = {};  // of the columns, two at a time, as deviations from their means
        for (std::size_t i = 0; i < count; ++i) {
            products[0] += z[i] * (v[i] - 1.0);
            products[1] += z[i] * (w[i] - df);
            products[2] += (v[i] - 1.0) * (w[i] - df);
        }
        const double sd_v = std::sqrt(2.0 / df), sd_w = std::sqrt(2.0 * df), root = std::sqrt(double(count));
        CHECK(std::fabs(products[0]) < 4 * sd_v * root);
        CHECK(std::fabs(products[1]) < 4 * sd_w * root);
        CHECK(std::fabs(products[2]) < 4 * sd_v * sd_w * root);
        const boost::math::chi_squared law(df);
        const auto distance = [&](const std::vector<double>& column, double scale) {
            std::vector<double> sorted(column.begin(), column.begin() + std::ptrdiff_t(count));
            std::sort(sorted.begin(), sorted.end());
            // At every 400th value the distance is within 400 / sqrt(count) = 0.3 of the largest.
            double worst = 0.0;
            for (std::size_t i = 0; i < count; i += 400) {
                worst = std::max(worst, std::fabs(boost::math::cdf(law, sorted[i] * scale) - double(i) / double(count)));
            }
            return worst * root;
        };
        CHECK(distance(v, df) < oracle::kolmogorov_bound);
        CHECK(distance(w, 1.0) < oracle::kolmogorov_bound);
    }
    const std::vector<std::uint32_t> rows(count + 16, 5u);
    draw_errors(round, chi, rows.data(), scratch, z.data(), v.data());
    CHECK(std::all_of(v.begin(), v.begin() + std::ptrdiff_t(count), [](double x) { return x == 0.0; }));
}
