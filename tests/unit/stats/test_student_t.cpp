// Student's t against mpmath at 30 digits, the reference grids, and closed forms.
#include <catch2/catch.hpp>
#include <cmath>
#include <limits>

#include "sim/base/fault.h"
#include "sim/stats/partitioned_t.h"
#include "sim/stats/student_t.h"
#include "tests/oracle/reference_csv.h"

using namespace lacuna;
using oracle::has;
using oracle::number;

namespace {
constexpr double inf = std::numeric_limits<double>::infinity();
}

TEST_CASE("Noncentral t: tails and partial means to 1e-12 (mpmath)", "[stats]") {
    for (const auto& row : oracle::read_reference("noncentral_t_mpmath.csv").rows) {
        const double df = number(row, "df"), delta = number(row, "delta"), c = number(row, "c");
        INFO("df " << df << " delta " << delta << " c " << c);
        const double upper = number(row, "upper");
        CHECK(noncentral_t_upper(c, df, delta) == Approx(upper).margin(1e-12).epsilon(0));
        CHECK(noncentral_t_lower(c, df, delta) == Approx(1.0 - upper).margin(1e-12).epsilon(0));
        if (!has(row, "first")) continue;
        const TruncatedT above = noncentral_t_between(c, inf, df, delta);
        const double first = number(row, "first");
        CHECK(above.chance == Approx(upper).margin(1e-12).epsilon(0));
        CHECK(above.first == Approx(first).margin(1e-12).epsilon(1e-13));
        // The two sides of c add up to the whole, whose mean is a ratio of gamma functions.
        const TruncatedT below = noncentral_t_between(-inf, c, df, delta);
        const TruncatedT whole = noncentral_t_between(-inf, inf, df, delta);
        CHECK(below.chance + above.chance == Approx(1.0).margin(2e-12).epsilon(0));
        CHECK(below.first + above.first == Approx(whole.first).margin(2e-12).epsilon(2e-13));
    }
}

TEST_CASE("Intervals are differences of tails, near and far", "[stats]") {
    for (const double df : {2.0, 38.0, inf}) {
        for (const double delta : {-2.0, 0.0, 3.5}) {
            for (const auto& [a, b] : {std::pair{-2.5, 2.5}, {1.0, 1.1}, {4.0, 9.0}, {-9.0, -4.0}}) {
                INFO("df " << df << " delta " << delta << " a " << a << " b " << b);
                const TruncatedT got = noncentral_t_between(a, b, df, delta);
                const TruncatedT from = noncentral_t_between(a, inf, df, delta);
                const TruncatedT beyond = noncentral_t_between(b, inf, df, delta);
                CHECK(got.chance == Approx(from.chance - beyond.chance).margin(1e-12).epsilon(0));
                CHECK(got.first == Approx(from.first - beyond.first).margin(1e-11).epsilon(0));
            }
        }
    }
    CHECK(noncentral_t_between(2.0, 2.0, 10.0, 1.0).chance == 0.0);
}

TEST_CASE("A partition gives what its intervals give one by one", "[stats]") {
    const std::vector<double> ends{-inf, -4.0, -2.0, 0.0, 1.9, 2.0, 7.5, inf};
    for (const double df : {2.0, 9.0, 38.0, 1e6, inf}) {
        const PartitionedT partition(ends, df);
        for (const double delta : {-3.0, 0.0, 0.4, 12.0}) {
            const std::vector<TruncatedT> parts = partition(delta);
            REQUIRE(parts.size() == ends.size() - 1);
            for (std::size_t p = 0; p < parts.size(); ++p) {
                INFO("df " << df << " delta " << delta << " part " << p);
                const TruncatedT alone = noncentral_t_between(ends[p], ends[p + 1], df, delta);
                CHECK(parts[p].chance == Approx(alone.chance).margin(1e-12).epsilon(0));
                CHECK(parts[p].first == Approx(alone.first).margin(1e-12).epsilon(1e-12));
            }
        }
    }
}

TEST_CASE("One degree of freedom is the Cauchy distribution", "[stats]") {
    for (const double c : {-50.0, -1.0, 0.0, 0.3, 12.7062, 636619.0}) {
        CHECK(noncentral_t_upper(c, 1.0, 0.0) == Approx(0.5 - std::atan(c) / M_PI).margin(1e-12).epsilon(0));
    }
    CHECK(std::isnan(noncentral_t_between(1.0, inf, 1.0, 0.0).first));
    // E[T; 0 < T <= b] = log(1 + b^2) / (2 pi)
    CHECK(noncentral_t_between(0.0, 3.0, 1.0, 0.0).first == Approx(std::log(10.0) / (2.0 * M_PI)).epsilon(1e-12));
}

TEST_CASE("The noncentral t of infinite df is the normal", "[stats]") {
    CHECK(noncentral_t_upper(1.959963984540054, inf, 0.0) == Approx(0.025).epsilon(1e-13));
    CHECK(noncentral_t_between(1.0, inf, inf, 1.0).chance == Approx(0.5).epsilon(1e-14));
    CHECK(noncentral_t_between(1.0, inf, inf, 1.0).first == Approx(0.5 + 0.3989422804014327).epsilon(1e-14));
    CHECK(noncentral_t_between(-inf, inf, inf, 2.0).first == 2.0);
}

TEST_CASE("Critical values come back as their tails", "[stats]") {
    for (const double df : {1.0, 2.0, 3.0, 11.0, 398.0, 1e6, inf}) {
        for (const double tail : {0.5, 0.1, 0.025, 0.0025, 1e-6}) {
            INFO("df " << df << " tail " << tail);
            CHECK(noncentral_t_upper(t_critical(df, tail), df, 0.0) == Approx(tail).margin(1e-12).epsilon(0));
        }
    }
    // mpmath at 30 digits: roots of the regularised incomplete beta function.
    CHECK(t_critical(199.0, 0.005) == Approx(2.60076021605851619).epsilon(1e-14));
    CHECK(t_critical(8.0, 0.01) == Approx(2.89645944770962233).epsilon(1e-14));
    CHECK(t_critical(8.0, 0.0025) == Approx(3.83251868534434283).epsilon(1e-14));
    CHECK(t_critical(inf, 0.025) == Approx(1.959963984540054).epsilon(1e-15));
    CHECK(t_critical(7.0, 0.0) == inf);
    CHECK(t_critical(7.0, 1.0) == -inf);
    CHECK_THROWS_AS(t_critical(0.5, 0.1), Defect);
}

TEST_CASE("Power of Student's t tests (reference/power_t.csv)", "[stats]") {
    for (const auto& row : oracle::read_reference("power_t.csv").rows) {
        const double df = number(row, "df"), delta = number(row, "ncp"), alpha = number(row, "alpha");
        const bool two_sided = row.at("sides") == "2";
        INFO(row.at("test") << " n " << row.at("n") << " d " << row.at("d") << " alpha " << alpha);
        const double c = t_critical(df, two_sided ? alpha / 2.0 : alpha);
        // SciPy 1.10's t.ppf, which made the column, errs by up to 2e-9 relative (8 df, tail .01).
        CHECK(c == Approx(number(row, "tcrit")).epsilon(1e-8));
        const double up = noncentral_t_upper(c, df, delta);
        const double down = two_sided ? noncentral_t_lower(-c, df, delta) : 0.0;
        CHECK(up == Approx(number(row, "p_upper")).margin(1e-8).epsilon(0));
        CHECK(down == Approx(number(row, "p_lower")).margin(1e-8).epsilon(0));
        // R's and SciPy's own noncentral t, where they converge: both carry about 1e-9.
        CHECK(up + down == Approx(number(row, "power_R")).margin(1e-8).epsilon(0));
        CHECK(up + down == Approx(number(row, "power_scipy")).margin(1e-8).epsilon(0));
    }
}

TEST_CASE("Selected effects of the two-sample t (reference/selection_t_two_sample.csv)", "[stats]") {
    for (const auto& row : oracle::read_reference("selection_t_two_sample.csv").rows) {
        const double n = number(row, "n"), d = number(row, "d"), df = number(row, "df");
        INFO("n " << n << " d " << d << " alpha " << row.at("alpha"));
        const double delta = d * std::sqrt(n / 2.0), to_d = std::sqrt(2.0 / n);
        const double c = t_critical(df, number(row, "alpha") / 2.0);
        const TruncatedT up = noncentral_t_between(c, inf, df, delta);
        const TruncatedT down = noncentral_t_between(-inf, -c, df, delta);
        const double power = up.chance + down.chance;
        CHECK(power == Approx(number(row, "power")).margin(1e-8).epsilon(0));
        if (d > 0.0) CHECK(down.chance / power == Approx(number(row, "typeS")).margin(1e-8).epsilon(0));
        const double signed_mean = to_d * (up.first + down.first) / power;
        CHECK(signed_mean == Approx(number(row, "E_d_sig")).margin(1e-8).epsilon(0));
        CHECK(to_d * (up.first - down.first) / power == Approx(number(row, "Eabs_d_sig")).margin(1e-8).epsilon(0));
        CHECK(to_d * up.first / up.chance == Approx(number(row, "E_d_pos")).margin(1e-8).epsilon(0));
        CHECK(small_sample_correction(df) * signed_mean == Approx(number(row, "E_g_sig")).margin(1e-8).epsilon(0));
        CHECK(d / small_sample_correction(df) == Approx(number(row, "E_d_all")).margin(1e-10).epsilon(0));
    }
}

TEST_CASE("Selected z values (reference/selection_normal.csv)", "[stats]") {
    for (const auto& row : oracle::read_reference("selection_normal.csv").rows) {
        const double theta = number(row, "theta");
        INFO("theta " << theta << " alpha " << row.at("alpha"));
        const double c = t_critical(inf, number(row, "alpha") / 2.0);
        const TruncatedT up = noncentral_t_between(c, inf, inf, theta);
        const TruncatedT down = noncentral_t_between(-inf, -c, inf, theta);
        const double power = up.chance + down.chance;
        CHECK(up.chance == Approx(number(row, "p_up")).margin(1e-9).epsilon(0));
        CHECK(down.chance == Approx(number(row, "p_low")).margin(1e-9).epsilon(0));
        CHECK((up.first + down.first) / power == Approx(number(row, "EZ_sig")).margin(1e-9).epsilon(0));
        CHECK((up.first - down.first) / power == Approx(number(row, "EabsZ_sig")).margin(1e-9).epsilon(0));
        CHECK(up.first / up.chance == Approx(number(row, "EZ_pos")).margin(1e-9).epsilon(0));
    }
}

TEST_CASE("Noncentralities of any smallness are as good as none", "[stats]") {
    // Pieces of the quadrature may then lie within a rounding of zero; at 0 the central t is the answer.
    for (const double df : {2.0, 4.0, 28.0}) {
        for (const double noncentrality : {1e-6, 1e-12, 1e-18, 1e-100, 1e-300}) {
            for (const double c : {0.5, 2.5, 30.0}) {
                const double central = noncentral_t_upper(c, df, 0.0);
                CHECK(noncentral_t_upper(c, df, noncentrality) == Approx(central).margin(noncentrality + 1e-12));
                CHECK(std::fabs(noncentral_t_between(c, c + 1.0, df, noncentrality).chance -
                                noncentral_t_between(c, c + 1.0, df, 0.0).chance) < noncentrality + 1e-12);
            }
        }
    }
}
