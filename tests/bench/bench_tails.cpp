// Nanoseconds per p-value of sim/tail on one thread, and the ratio to Boost.Math on the same values.
// Usage: bench_tails [VALUES]. SciPy's times for the same grid: tests/bench/tails_scipy.py
#include <fmt/format.h>

#include <boost/math/distributions/fisher_f.hpp>
#include <boost/math/distributions/normal.hpp>
#include <boost/math/distributions/students_t.hpp>
#include <chrono>
#include <cmath>
#include <cstdlib>
#include <vector>

#include "sim/random/kernels.h"
#include "sim/tail/tails.h"

using namespace lacuna;

namespace {

constexpr std::size_t column = 4096;

/// Degrees of freedom 1 .. 1000 and t up to 8 in no order, f = t^2 / 4: whole numbers, so that the script in
/// Python has the same ones.
struct Grid {
    std::vector<double> t, f, df;
    Grid() {
        for (std::size_t i = 0; i < column; ++i) {
            df.push_back(1.0 + static_cast<double>(i * 7919 % 1000));
            t.push_back(static_cast<double>(i * 104729 % 10007) / 10007.0 * 8.0);
            f.push_back(t.back() * t.back() / 4.0);
        }
    }
};

/// The best of nine turns, in ns per value; `run` does a column.
template <class Run>
double nanoseconds(std::size_t values, Run run) {
    const std::size_t columns = std::max<std::size_t>(1, values / column / 9);
    double best = 1e300;
    for (int turn = 0; turn < 9; ++turn) {
        const auto start = std::chrono::steady_clock::now();
        for (std::size_t i = 0; i < columns; ++i) run();
        const std::chrono::duration<double, std::nano> time = std::chrono::steady_clock::now() - start;
        best = std::min(best, time.count() / static_cast<double>(columns * column));
    }
    return best;
}

template <class Kernel, class Boost>
void compare(const char* name, std::size_t values, Kernel kernel, Boost boost_tail) {
    std::vector<double> p(column);
    const double ours = nanoseconds(values, [&] { kernel(p.data()); });
    double largest = 0.0;
    std::vector<double> q(column);
    const double theirs = nanoseconds(values / 100, [&] {
        for (std::size_t i = 0; i < column; ++i) q[i] = boost_tail(i);
    });
    for (std::size_t i = 0; i < column; ++i) largest = std::max(largest, std::fabs(p[i] / q[i] - 1.0));
    fmt::print("{:12} {:8.2f} {:10.1f} {:8.0f}   {:.1e}\n", name, ours, theirs, theirs / ours, largest);
}

}  // namespace

int main(int argc, char** argv) {
    namespace bm = boost::math;
    const auto values = static_cast<std::size_t>(argc > 1 ? std::atof(argv[1]) : 2e7);
    const Grid g;
    fmt::print("{}; ns per value on one thread, best of nine\n", vector_target());
    fmt::print("law            lacuna Boost.Math    ratio   largest relative difference\n");
    compare("normal", values, [&](double* p) { normal_upper_tails(g.t.data(), column, p); },
            [&](std::size_t i) { return bm::cdf(bm::complement(bm::normal(), g.t[i])); });
    compare("t", values, [&](double* p) { t_upper_tails(g.t.data(), g.df.data(), column, p); },
            [&](std::size_t i) { return bm::cdf(bm::complement(bm::students_t(g.df[i]), g.t[i])); });
    for (const std::uint32_t df1 : {1u, 2u, 3u, 4u, 5u, 10u, 11u, 50u}) {
        compare(fmt::format("F, df1 = {}", df1).c_str(), values,
                [&](double* p) { f_upper_tails(g.f.data(), df1, g.df.data(), column, p); },
                [&](std::size_t i) { return bm::cdf(bm::complement(bm::fisher_f(df1, g.df[i]), g.f[i])); });
    }
}
