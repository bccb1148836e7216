#include <catch2/catch.hpp>

#include <boost/math/distributions/fisher_f.hpp>
#include <boost/math/distributions/normal.hpp>
#include <boost/math/distributions/students_t.hpp>
#include <cmath>
#include <functional>
#include <hwy/targets.h>

#include "sim/random/kernels.h"
#include "sim/tail/tails.h"
#include "tests/oracle/plain_tails.h"
#include "tests/oracle/reference_csv.h"

using namespace lacuna;

namespace {

constexpr double smallest = 1e-300;

struct Column {
    std::vector<double> x, df;
    void add(double its_x, double its_df) {
        x.push_back(its_x);
        df.push_back(its_df);
    }
};

std::vector<double> t_tails(const Column& c) {
    std::vector<double> p(c.x.size());
    t_upper_tails(c.x.data(), c.df.data(), p.size(), p.data());
    return p;
}

std::vector<double> f_tails(const Column& c, std::uint32_t df1) {
    std::vector<double> p(c.x.size());
    f_upper_tails(c.x.data(), df1, c.df.data(), p.size(), p.data());
    return p;
}

/// Every df from 1 to 1000, halves between the small ones, then a logarithmic grid to 1e7.
std::vector<double> many_df() {
    std::vector<double> df;
    for (int i = 1; i <= 1000; ++i) df.push_back(i);
    for (int i = 1; i <= 40; ++i) df.push_back(i + 0.37);
    for (double x = 1100.0; x < 1e7; x *= 1.3) df.push_back(x);
    df.push_back(1e7);
    return df;
}

/// t from the body to p = 1e-300 at every df: t^2 = df (exp(w^2 / df) - 1), where w is about normal.
Column t_grid(double step) {
    Column c;
    for (const double df : many_df()) {
        for (double w = 1e-3; w < 37.2; w += step) c.add(std::sqrt(df * std::expm1(w * w / df)), df);
    }
    return c;
}

/// The largest relative difference from `exact` where it is in range, as most of a grid must be.
double worst(const std::vector<double>& p, const std::function<double(std::size_t)>& exact) {
    double largest = 0.0;
    std::size_t seen = 0;
    for (std::size_t i = 0; i < p.size(); ++i) {
        const double expected = exact(i);
        if (!(expected > smallest)) continue;
        const double error = std::fabs(p[i] / expected - 1.0);
        largest = error <= largest ? largest : error;  // NaN counts
        ++seen;
    }
    CHECK(2 * seen > p.size());
    return largest;
}

void on_each_target(const std::function<void()>& check) {
    for (const std::int64_t target : hwy::SupportedAndGeneratedTargets()) {
        hwy::SetSupportedTargetsForTest(target);
        INFO(vector_target());
        check();
        hwy::SetSupportedTargetsForTest(0);
    }
}

}  // namespace

// tails_mpmath.csv: 40-digit quadrature.
TEST_CASE("Normal, t and F tails agree with mpmath on every vector target", "[tail]") {
    const oracle::ReferenceTable table = oracle::read_reference("tails_mpmath.csv");
    on_each_target([&] {
        std::size_t seen[3] = {};
        for (const auto& row : table.rows) {
            const double x = oracle::number(row, "x"), expected = oracle::number(row, "p");
            const std::string& law = row.at("law");
            const double df = law == "normal" ? 1.0 : oracle::number(row, "df2");
            const std::size_t which = law == "normal" ? 0 : law == "t" ? 1 : 2;
            double p = 0.0;
            if (which == 0) normal_upper_tails(&x, 1, &p);
            if (which == 1) t_upper_tails(&x, &df, 1, &p);
            if (which == 2) f_upper_tails(&x, static_cast<std::uint32_t>(oracle::number(row, "df1")), &df, 1, &p);
            CAPTURE(law, x, df, expected, p);
            CHECK(std::fabs(p / expected - 1.0) < (which == 0 ? 2e-13 : 1e-12));
            ++seen[which];
        }
        CHECK(seen[0] == 17);
        CHECK(seen[1] == 156);
        CHECK(seen[2] == 484);
    });
}

TEST_CASE("The normal tail agrees with erfc in long double", "[tail]") {
    std::vector<double> z;
    for (double x = -9.0; x < 37.06; x += 0.00137) z.push_back(x);
    on_each_target([&] {
        std::vector<double> p(z.size());
        normal_upper_tails(z.data(), z.size(), p.data());
        CHECK(worst(p, [&](std::size_t i) { return static_cast<double>(oracle::normal_upper(z[i])); }) < 2e-13);
    });
}

TEST_CASE("The t tail agrees with the continued fraction at every df on every vector target", "[tail]") {
    const Column c = t_grid(0.83);
    std::vector<double> exact;
    for (std::size_t i = 0; i < c.x.size(); ++i) exact.push_back(static_cast<double>(oracle::t_upper(c.x[i], c.df[i])));
    on_each_target([&] {
        CHECK(worst(t_tails(c), [&](std::size_t i) { return exact[i]; }) < 1e-12);
    });
}

TEST_CASE("The t tail agrees with Boost.Math at every df", "[tail]") {
    const Column c = t_grid(1.31);
    const auto boost_tail = [&](std::size_t i) {
        return boost::math::cdf(boost::math::complement(boost::math::students_t(c.df[i]), c.x[i]));
    };
    CHECK(worst(t_tails(c), boost_tail) < 1e-10);
}

TEST_CASE("The F tail agrees with Boost.Math and the continued fraction", "[tail]") {
    for (const std::uint32_t df1 : {1u, 2u, 3u, 4u, 5u, 8u, 9u, 16u, 17u, 18u, 63u, 200u, 1001u}) {
        Column c;
        for (const double df2 : {1.0, 1.5, 2.0, 3.0, 7.0, 20.5, 60.0, 333.0, 4000.0, 1e5, 1e7}) {
            for (double spread = -4.0; spread < 30.0; spread += 0.7) {
                c.add(std::exp(spread * std::sqrt(2.0 / df1 + 2.0 / df2)), df2);
            }
        }
        std::vector<double> plain, by_boost;
        for (std::size_t i = 0; i < c.x.size(); ++i) {
            plain.push_back(static_cast<double>(oracle::f_upper(c.x[i], df1, c.df[i])));
            by_boost.push_back(
                boost::math::cdf(boost::math::complement(boost::math::fisher_f(df1, c.df[i]), c.x[i])));
        }
        on_each_target([&] {
            CAPTURE(df1);
            const std::vector<double> p = f_tails(c, df1);
            CHECK(worst(p, [&](std::size_t i) { return plain[i]; }) < 1e-12);
            CHECK(worst(p, [&](std::size_t i) { return by_boost[i]; }) < 1e-10);
        });
    }
}
