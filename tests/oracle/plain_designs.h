// Slow, plain twins of the study samplers: participants, drawn one by one with the standard library's
// generator and distributions, and the textbook formulas.
#pragma once

#include <cmath>
#include <random>
#include <vector>

namespace lacuna::oracle {

struct PlainResult {
    double statistic, estimate;
    double df = 0.0;        // of Welch's test
    double numerator = 0.0; // estimate of the mean difference, in units of sigma
    double error = 0.0;     // its estimated standard error
};

struct Group {
    double n = 0, mean = 0, squares = 0;  // sum of squares about the mean
};

template <class G>
Group plain_group(G& generator, std::size_t n, double mean) {
    std::normal_distribution<double> normal(mean, 1.0);
    std::vector<double> x(n);
    Group group;
    group.n = static_cast<double>(n);
    for (double& value : x) group.mean += (value = normal(generator)) / group.n;
    for (const double value : x) group.squares += (value - group.mean) * (value - group.mean);
    return group;
}

template <class G>
PlainResult plain_pooled(G& generator, std::size_t n1, std::size_t n2, double d) {
    const Group a = plain_group(generator, n1, d), b = plain_group(generator, n2, 0.0);
    const double sd = std::sqrt((a.squares + b.squares) / (a.n + b.n - 2.0));
    const double error = sd * std::sqrt(1.0 / a.n + 1.0 / b.n);
    return {(a.mean - b.mean) / error, (a.mean - b.mean) / sd, a.n + b.n - 2.0, a.mean - b.mean, error};
}

template <class G>
PlainResult plain_welch(G& generator, std::size_t n1, std::size_t n2, double d) {
    const Group a = plain_group(generator, n1, d), b = plain_group(generator, n2, 0.0);
    const double va = a.squares / (a.n - 1.0) / a.n, vb = b.squares / (b.n - 1.0) / b.n;
    const double sd = std::sqrt((a.squares + b.squares) / (a.n + b.n - 2.0));
    const double error = std::sqrt(va + vb);
    const double df = (va + vb) * (va + vb) / (va * va / (a.n - 1.0) + vb * vb / (b.n - 1.0));
    return {(a.mean - b.mean) / error, (a.mean - b.mean) / sd, df, a.mean - b.mean, error};
}

/// Pairs whose differences have mean d and standard deviation 1.
template <class G>
PlainResult plain_one_mean(G& generator, std::size_t n, double d) {
    const Group a = plain_group(generator, n, d);
    const double sd = std::sqrt(a.squares / (a.n - 1.0));
    const double error = sd / std::sqrt(a.n);
    return {a.mean / error, a.mean / sd, a.n - 1.0, a.mean, error};
}

template <class G>
PlainResult plain_correlation(G& generator, std::size_t n, double rho) {
    std::normal_distribution<double> normal;
    std::vector<double> x(n), y(n);
    double mx = 0, my = 0;
    for (std::size_t i = 0; i < n; ++i) {
        x[i] = normal(generator);
        y[i] = rho * x[i] + std::sqrt(1.0 - rho * rho) * normal(generator);
        mx += x[i] / static_cast<double>(n);
        my += y[i] / static_cast<double>(n);
    }
    double xx = 0, yy = 0, xy = 0;
    for (std::size_t i = 0; i < n; ++i) {
        xx += (x[i] - mx) * (x[i] - mx);
        yy += (y[i] - my) * (y[i] - my);
        xy += (x[i] - mx) * (y[i] - my);
    }
    const double r = xy / std::sqrt(xx * yy);
    const double df = static_cast<double>(n) - 2.0;
    return {r * std::sqrt(df / (1.0 - r * r)), r, df};
}

/// Group means with standard deviation f (over groups, divisor g): half of the groups above, half below, an odd
/// one in the middle.
template <class G>
PlainResult plain_several_means(G& generator, std::size_t groups, std::size_t n, double f) {
    const std::size_t half = groups / 2;
    const double step = f * std::sqrt(static_cast<double>(groups) / (2.0 * static_cast<double>(half)));
    std::vector<Group> all;
    double mean = 0.0, within = 0.0, between = 0.0;
    for (std::size_t g = 0; g < groups; ++g) {
        const double shift = g < half ? -step : g >= groups - half ? step : 0.0;
        all.push_back(plain_group(generator, n, shift));
        mean += all.back().mean / static_cast<double>(groups);
        within += all.back().squares;
    }
    for (const Group& group : all) between += group.n * (group.mean - mean) * (group.mean - mean);
    const double total = static_cast<double>(groups * n), df1 = static_cast<double>(groups) - 1.0;
    const double df2 = total - static_cast<double>(groups);
    const double statistic = between / df1 / (within / df2);
    return {statistic, std::sqrt(between / total / (within / df2)), df2};
}

}  // namespace lacuna::oracle
