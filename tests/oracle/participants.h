// The slow, plain twin of the two-means sampler: participants, drawn one by one with the standard
// library's generator and normal distribution, and the textbook formulas.
#pragma once

#include <cmath>
#include <random>

namespace lacuna::oracle {

struct PlainStudy {
    double t, d;
};

inline PlainStudy plain_two_means(std::mt19937_64& generator, std::uint32_t n, double effect) {
    std::normal_distribution<double> normal;
    double sum[2] = {}, squares[2] = {};
    for (int group = 0; group < 2; ++group) {
        for (std::uint32_t i = 0; i < n; ++i) {
            const double x = normal(generator) + (group == 1 ? effect : 0.0);
            sum[group] += x;
            squares[group] += x * x;
        }
    }
    const double mean = (sum[1] - sum[0]) / n;
    const double ss = squares[0] - sum[0] * sum[0] / n + squares[1] - sum[1] * sum[1] / n;
    const double sd = std::sqrt(ss / (2.0 * n - 2.0));
    return {mean / (sd * std::sqrt(2.0 / n)), mean / sd};
}

}  // namespace lacuna::oracle
